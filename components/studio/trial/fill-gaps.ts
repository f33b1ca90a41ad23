import { bisector } from 'd3'
import type { FrameSource } from '@/lib/recordings/types'
import type { Gap } from './overview'

/**
 * A source whose missing samples lie on straight lines between their neighbours; at the ends of the record the nearest value stands.
 * Filled while reading, so that nothing is copied.
 */
export function fillGaps(source: FrameSource, gapsOf: (channel: number) => readonly Gap[]): FrameSource {
  return {
    frames: source.frames,
    channelCount: source.channelCount,
    async read(startFrame, channels, outs) {
      await source.read(startFrame, channels, outs)
      channels.forEach((channel, position) => {
        const out = outs[position]
        if (out) fill(out, startFrame, gapsOf(channel))
      })
    },
  }
}

function fill(out: Float64Array, startFrame: number, gaps: readonly Gap[]): void {
  const end = startFrame + out.length
  for (let k = firstEndingAfter(gaps, startFrame); k < gaps.length; k += 1) {
    const gap = gaps[k]
    if (!gap || gap.from >= end) return
    const before = Number.isNaN(gap.before) ? gap.after : gap.before
    const after = Number.isNaN(gap.after) ? gap.before : gap.after
    const steps = gap.to - gap.from + 1
    for (let frame = Math.max(gap.from, startFrame); frame < Math.min(gap.to, end); frame += 1) {
      out[frame - startFrame] = before + ((after - before) * (frame - gap.from + 1)) / steps
    }
  }
}

const firstEndingAfter = bisector((gap: Gap) => gap.to).right
