/** Rounded up in the fourth digit: a rate that one would state. */
export function statedRate(rateHz: number): number {
  const step = 10 ** (Math.floor(Math.log10(rateHz)) - 3)
  return Number((Math.ceil(rateHz / step - 1e-9) * step).toPrecision(12))
}
