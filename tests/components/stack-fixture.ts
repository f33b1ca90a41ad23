import { deriveTraces, deriveTrust } from '@/components/studio/derive'
import { versionsOf } from '../helpers/versions-of'
import { stackFrame } from '@/components/studio/stack/frame'
import { usualView, type StackView } from '@/components/studio/view'
import type { FamilyDesign } from '@/dsp'

/* A design as the stack is handed it: everything derived from the spec, as on the page. */

export const plainSpec: FamilyDesign = {
  format: 1,
  analog: { family: 'butterworth', response: 'lowpass', order: 4, edgesHz: [120] },
  sampleRateHz: 600,
  how: { method: 'bilinear', hold: 'edges' },
  budget: { magnitudeDb: 0.1, phaseDegrees: 1, removeDelay: false },
}

export const ellipticSpec: FamilyDesign = {
  ...plainSpec,
  analog: { family: 'elliptic', response: 'bandpass', order: 3, edgesHz: [400, 900], rippleDb: 0.5, attenuationDb: 50 },
  sampleRateHz: 4000,
  how: { method: 'bilinear', hold: 600 },
}

export function stackOf(spec: FamilyDesign, change: Partial<StackView> = {}, width = 946) {
  const view: StackView = { ...usualView(spec), hidden: [], ...change }
  const versions = versionsOf(spec)
  const traces = deriveTraces(spec, versions, view)
  const trusted = deriveTrust(spec, versions)
  const frame = stackFrame(spec, traces, view, width, null)
  return { spec, view, versions, traces, trusted, frame, input: { spec, traces, trusted, view, grounds: [] } }
}
