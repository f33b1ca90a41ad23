import { show } from '../check'
import { DesignError } from '../errors'
import { fromHalf, type HalfRoots } from '../forms/zeros-poles-gain'
import { modulus } from '../numeric/complex'
import type { Complex, Filter } from '../forms/filter'
import type { OwnTarget } from '../spec'

/** How far a root may lie from the conjugate of its partner, relative to its size; the pair is then made exact. */
const PAIR_TOLERANCE = 1e-9
/** Sizes of poles, in rad/s, that leave room for 24 of them in double precision. */
const POLE_RANGE = [1e-5, 1e10] as const
/** Where a pole on the axis would have to go at least, as a part of its size. */
const LEAST_DAMPING = 1e-6
/** Sizes of a gain factor that keep all their digits once multiplied out. */
const GAIN_RANGE = [1e-300, 1e300] as const

type RootsTarget = Extract<OwnTarget, { given: 'roots' }>

/** A root as a sentence shows it. */
function showRoot({ re, im }: Complex): string {
  if (im === 0) return show(re).replace('-', '−')
  return `${show(re).replace('-', '−')} ${im < 0 ? '−' : '+'} ${show(Math.abs(im))}j`
}

/** The half list of roots that come in conjugate pairs but for rounding. */
function pairedRoots(roots: readonly Complex[], field: 'own.zeros' | 'own.poles'): HalfRoots {
  roots.forEach(({ re, im }, index) => {
    if (Number.isFinite(re) && Number.isFinite(im)) return
    throw new DesignError('not-finite', `${field}.${index}`, 'This root is not a finite number.', 'another value')
  })
  const half: Complex[] = []
  const open = roots.map((root, index) => ({ root, index }))
  while (open.length > 0) {
    const { root, index } = open.shift()!
    const tolerance = PAIR_TOLERANCE * modulus(root)
    if (Math.abs(root.im) <= tolerance) {
      half.push({ re: root.re, im: 0 })
      continue
    }
    let partner = -1
    let least = Infinity
    open.forEach((other, at) => {
      const apart = Math.hypot(root.re - other.root.re, root.im + other.root.im)
      if (apart < least) [partner, least] = [at, apart]
    })
    if (!(least <= tolerance)) {
      throw new DesignError(
        'unpaired-root',
        `${field}.${index}.im`,
        `The ${field === 'own.poles' ? 'pole' : 'zero'} ${showRoot(root)} has no conjugate partner ${showRoot({ re: root.re, im: -root.im })}; without it the filter would not be real.`,
        0,
      )
    }
    const [match] = open.splice(partner, 1)
    half.push({ re: (root.re + match!.root.re) / 2, im: Math.abs(root.im - match!.root.im) / 2 })
  }
  return half
}

/** Refuses poles that don't lie left of the axis, or are too small or too large to compute with. */
export function checkPoles(poles: readonly Complex[], fieldOf: (index: number) => string): void {
  poles.forEach((pole, index) => {
    const size = modulus(pole)
    if (!(pole.re < 0)) {
      throw new DesignError(
        'unstable-pole',
        fieldOf(index),
        `The pole ${showRoot(pole)} does not lie left of the imaginary axis: such a filter is not stable.`,
        pole.re > 0 ? -pole.re : -(LEAST_DAMPING * size || 1),
      )
    }
    if (size >= POLE_RANGE[0] && size <= POLE_RANGE[1]) return
    throw new DesignError(
      'pole-out-of-range',
      fieldOf(index),
      `${show(POLE_RANGE[0])} rad/s ≤ size of a pole ≤ ${show(POLE_RANGE[1])} rad/s; that of ${showRoot(pole)} is ${show(size)}.`,
      -Math.min(Math.max(Math.abs(pole.re), POLE_RANGE[0]), POLE_RANGE[1]),
    )
  })
}

/** Refuses a gain factor that double precision can't hold with all its digits. */
export function checkGain(gain: number, field: string): void {
  const size = Math.abs(gain)
  if (size >= GAIN_RANGE[0] && size <= GAIN_RANGE[1]) return
  const nearest = Math.min(Math.max(size, GAIN_RANGE[0]), GAIN_RANGE[1])
  throw new DesignError(
    'gain-out-of-range',
    field,
    `${show(GAIN_RANGE[0])} ≤ size of the gain factor ≤ ${show(GAIN_RANGE[1])}; ${show(size)} was given.`,
    gain < 0 ? -nearest : nearest,
  )
}

/**
 * The analog filter given by its zeros, poles and gain factor. Conjugate pairs that agree to 1e-9 are made exact.
 *
 * @param own zeros and poles in rad/s; the gain is the factor before the products
 * @throws DesignError `unpaired-root`, `not-finite`, `unstable-pole`, `pole-out-of-range`, `improper`, `gain-out-of-range` with fields under `own`
 */
export function filterOfRoots(own: Pick<RootsTarget, 'zeros' | 'poles' | 'gain'>): Filter<'s'> {
  if (own.poles.length === 0) {
    throw new DesignError('no-poles', 'own.poles', 'A filter takes at least one pole.', 1)
  }
  const poles = pairedRoots(own.poles, 'own.poles')
  const zeros = pairedRoots(own.zeros, 'own.zeros')
  checkPoles(own.poles, (index) => `own.poles.${index}.re`)
  if (own.zeros.length > own.poles.length) {
    throw new DesignError(
      'improper',
      'own.zeros',
      `${own.zeros.length} zeros and ${own.poles.length} poles: the gain would grow without bound at high frequencies. There may be as many zeros as poles.`,
      own.poles.length,
    )
  }
  if (own.gain === 0 || !Number.isFinite(own.gain)) {
    throw new DesignError('gain-out-of-range', 'own.gain', 'The gain factor must be a finite number other than 0.', 1)
  }
  checkGain(own.gain, 'own.gain')
  return fromHalf('s', { zeros, poles, gain: own.gain })
}
