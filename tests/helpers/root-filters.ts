import type { AnyFilter, Complex, DigitalFilter, Filter, Section } from '@/dsp'

/*
 * Filters made straight from closed formulas, for tests of responses and of running that must not depend on the design code.
 */

export interface RootCase {
  readonly domain: string
  readonly sampleRateHz: number | null
  readonly zeros: readonly Complex[]
  readonly poles: readonly Complex[]
  readonly gain: number
}

export function asFilter(entry: RootCase): AnyFilter {
  const { zeros, poles, gain } = entry
  return entry.sampleRateHz === null ? analog(zeros, poles, gain) : digital(zeros, poles, gain, entry.sampleRateHz)
}

export const analog = (zeros: readonly Complex[], poles: readonly Complex[], gain: number): Filter<'s'> => ({
  domain: 's',
  zeros,
  poles,
  gain,
})

export const digital = (
  zeros: readonly Complex[],
  poles: readonly Complex[],
  gain: number,
  sampleRateHz: number,
  sections: readonly Section[] = [],
): DigitalFilter => ({ domain: 'z', zeros, poles, gain, sampleRateHz, sections, diagnostics: [] })

export const pair = (re: number, im: number): Complex[] => [
  { re, im },
  { re, im: -im },
]

export const many = (re: number, count: number): Complex[] => Array.from({ length: count }, () => ({ re, im: 0 }))

/** Butterworth poles on a circle of radius w rad/s, in exact pairs (Butterworth 1930). */
export function butterworthPoles(order: number, w: number): Complex[] {
  const poles: Complex[] = []
  for (let k = 0; k < Math.floor(order / 2); k++) {
    const angle = (Math.PI * (2 * k + 1)) / (2 * order)
    poles.push(...pair(-w * Math.sin(angle), w * Math.cos(angle)))
  }
  if (order % 2 === 1) poles.push({ re: -w, im: 0 })
  return poles
}

export const butterworthLowpass = (order: number, cornerHz: number): Filter<'s'> => {
  const w = 2 * Math.PI * cornerHz
  return analog([], butterworthPoles(order, w), w ** order)
}

export const butterworthHighpass = (order: number, cornerHz: number): Filter<'s'> =>
  analog(many(0, order), butterworthPoles(order, 2 * Math.PI * cornerHz), 1)

/** The bilinear transform of a Butterworth low-pass, its corner held, with sections of unit gain at DC. */
export function bilinearLowpass(order: number, cornerHz: number, sampleRateHz: number): DigitalFilter {
  const k = 1 / Math.tan((Math.PI * cornerHz) / sampleRateHz)
  const poles: Complex[] = []
  const sections: Section[] = []
  let gain = 1
  for (const { re, im } of butterworthPoles(order, 1)) {
    if (im < 0) continue
    const norm = (k - re) ** 2 + im * im
    if (im === 0) {
      const pole = (k - 1) / (k + 1)
      poles.push({ re: pole, im: 0 })
      gain *= 1 / (k + 1)
      sections.push({ b0: 1 / (k + 1), b1: 1 / (k + 1), b2: 0, a1: -pole, a2: 0 })
    } else {
      const z = { re: ((k - re) * (k + re) - im * im) / norm, im: (2 * k * im) / norm }
      poles.push(...pair(z.re, z.im))
      gain *= 1 / norm
      sections.push({ b0: 1 / norm, b1: 2 / norm, b2: 1 / norm, a1: -2 * z.re, a2: z.re * z.re + z.im * z.im })
    }
  }
  return digital(many(-1, order), poles, gain, sampleRateHz, sections)
}
