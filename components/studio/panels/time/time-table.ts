import { formatNumber, formatSeconds } from '@/lib/format/quantity'
import type { Span } from '@/components/plot/scale'
import type { Versions } from '../../derive'
import { valuesAt, type TimeCurves, type TimeKind } from './time-curves'

const MOST_ROWS = 200

/** The plot's values sample by sample; where a view holds too many, every second, fifth, tenth … of them. */
export function timeRows(
  versions: Versions,
  curves: TimeCurves,
  kind: TimeKind,
  [from, to]: Span,
  sampleRateHz: number,
  perUnit: number,
): readonly (readonly string[])[] {
  const first = Math.max(0, Math.ceil(from * sampleRateHz))
  const last = Math.floor(to * sampleRateHz)
  const stride = Math.max(1, Math.ceil((last - first + 1) / MOST_ROWS))
  const rows: string[][] = []
  for (let n = Math.ceil(first / stride) * stride; n <= last; n += stride) {
    const values = valuesAt(versions, curves, kind, n, sampleRateHz)
    rows.push([
      String(n),
      formatSeconds(n / sampleRateHz, 5),
      ...[...values.values()].map((value) => formatNumber(value / perUnit, 5)),
    ])
  }
  return rows
}
