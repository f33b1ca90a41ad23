import { fromHalf, fullCount } from '../forms/zeros-poles-gain'
import { toSections } from '../forms/sections'
import { designHalf } from '../design-analog'
import { bilinearFactor, bilinearHalf, warp, warpedWidth } from './bilinear'
import { DesignError } from '../errors'
import type { DigitalFilter } from '../forms/filter'
import type { AnalogSpec, Method } from '../spec'

export function discretize(spec: AnalogSpec, sampleRateHz: number, how: Method): DigitalFilter {
  if (how.method !== 'bilinear') throw new DesignError('method-not-available', 'how.method', 'Soon.')
  const half =
    how.hold === 'edges'
      ? designHalf(
          spec,
          spec.edgesHz.map((edge) => warp(edge, sampleRateHz)),
          warpedWidth(spec.edgesHz[0] ?? 0, spec.edgesHz[1] ?? 0, sampleRateHz),
        )
      : designHalf(
          spec,
          spec.edgesHz.map(
            (edge) =>
              (2 * Math.PI * edge) /
              sampleRateHz /
              bilinearFactor(sampleRateHz, how.hold === 'none' ? 'none' : (how.hold as number)),
          ),
        )
  void fullCount
  const filter = fromHalf('z', bilinearHalf(half))
  return { ...filter, sampleRateHz, sections: toSections(filter), diagnostics: [] }
}
