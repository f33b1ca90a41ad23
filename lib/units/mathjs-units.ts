import { create, type FactoryFunctionMap, unitDependencies } from 'mathjs'

const factories: FactoryFunctionMap = { ...unitDependencies }
const math = create(factories)

/**
 * Hertz from a text that mathjs reads as a frequency ("2.5 kHz", "1/ms") or as an angular frequency ("157 rad/s", "9000 deg/s");
 * null when it is neither.
 */
export function unitToHertz(text: string): number | null {
  try {
    const quantity = math.unit(text)
    if (quantity.equalBase(math.unit('1 Hz'))) return quantity.toNumber('Hz')
    if (quantity.equalBase(math.unit('1 rad/s'))) return quantity.toNumber('rad/s') / (2 * Math.PI)
    return null
  } catch {
    // mathjs throws on any text it can't read; to the caller that is simply "not a frequency".
    return null
  }
}
