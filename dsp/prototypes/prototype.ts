import type { HalfRoots } from '../forms/zeros-poles-gain'

/**
 * A low-pass filter with its edge at 1 rad/s: what every family yields and every band transform starts from.
 * `dcGain` is kept beside the roots since three of the four band transforms need it and not the leading gain.
 */
export interface Prototype {
  readonly zeros: HalfRoots
  readonly poles: HalfRoots
  readonly dcGain: number
}
