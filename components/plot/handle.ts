/* Handles without a pointer: a value, its bounds, its steps. Where a handle stands is for the plot that holds it to say. */

export interface HandleValue {
  readonly value: number
  readonly min: number
  readonly max: number
}

export type StepSize = 'fine' | 'plain' | 'coarse'

export const clamped = (value: number, { min, max }: Pick<HandleValue, 'min' | 'max'>): number =>
  Math.min(max, Math.max(min, value))

const stepFactor: Readonly<Record<StepSize, number>> = { fine: 0.1, plain: 1, coarse: 10 }

/** Next value on a fixed step, met on its multiples. */
export function steppedBy(handle: HandleValue, step: number, size: StepSize, direction: 1 | -1): number {
  return clamped(nextMultiple(handle.value, step * stepFactor[size], direction), handle)
}

/** Next value in the third significant digit: 120 → 121, 9.5 → 9.51; coarse in the second, fine in the fourth. */
export function steppedDigit(handle: HandleValue, size: StepSize, direction: 1 | -1): number {
  // Downwards from a power of ten the digits below it are finer.
  const power = Math.floor(Math.log10(Math.abs(handle.value)) - (direction < 0 ? 1e-9 : -1e-12))
  return clamped(nextMultiple(handle.value, 10 ** (power - 2) * stepFactor[size], direction), handle)
}

function nextMultiple(value: number, step: number, direction: 1 | -1): number {
  const at = value / step
  const nearest = Math.round(at)
  const isOnIt = Math.abs(at - nearest) < 1e-6
  const next = isOnIt ? nearest + direction : direction > 0 ? Math.ceil(at) : Math.floor(at)
  return Number((next * step).toPrecision(12))
}

/** A key on a slider, by the ARIA pattern; null when the key means nothing to it. */
export type SliderKey =
  | { readonly kind: 'step'; readonly direction: 1 | -1; readonly size: StepSize }
  | { readonly kind: 'end'; readonly which: 'min' | 'max' }

export function sliderKey(
  key: string,
  modifiers: { readonly shift: boolean; readonly alt: boolean },
): SliderKey | null {
  const size: StepSize = modifiers.shift ? 'coarse' : modifiers.alt ? 'fine' : 'plain'
  switch (key) {
    case 'ArrowRight':
    case 'ArrowUp':
      return { kind: 'step', direction: 1, size }
    case 'ArrowLeft':
    case 'ArrowDown':
      return { kind: 'step', direction: -1, size }
    case 'PageUp':
      return { kind: 'step', direction: 1, size: 'coarse' }
    case 'PageDown':
      return { kind: 'step', direction: -1, size: 'coarse' }
    case 'Home':
      return { kind: 'end', which: 'min' }
    case 'End':
      return { kind: 'end', which: 'max' }
    default:
      return null
  }
}
