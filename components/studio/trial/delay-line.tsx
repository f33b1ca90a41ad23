import { isFirDesign } from '@/dsp'
import { formatDb, formatHz } from '@/lib/format/quantity'
import type { EdgeLevel, RunSummary } from './shapes'
import type { TrialView } from './store'
import { formatCount, formatDelay } from './words'
import type { ZeroPhaseWay } from './zero-phase'

const PREDICTED = 'Where the cross-correlation should peak: the spectrum of what went in, times the design’s response.'
const MEASURED = 'Where the cross-correlation of before and after peaks.'

/** Measured against predicted delay, and what a run without delay means. */
export function DelayLine({ state }: { state: TrialView }) {
  const { delay, run, settings } = state
  if (!run) return null
  const isRun = run.request.channels.includes(settings.shown)
  return (
    <div className="flex flex-col gap-1 text-[14px]">
      <div aria-live="polite" className="flex flex-wrap gap-x-6 gap-y-1">
        {!isRun ? <span className="text-pencil">This channel was not run.</span> : null}
        {isRun && delay && delay.measuredSeconds === null ? (
          <span className="text-pencil">No delay can be measured: before or after never changes.</span>
        ) : null}
        {isRun && delay && delay.measuredSeconds !== null && delay.predictedSeconds !== null ? (
          <>
            <Figure label="Delay measured" value={formatDelay(delay.measuredSeconds)} title={MEASURED} />
            <Figure label="predicted" value={formatDelay(delay.predictedSeconds)} title={PREDICTED} />
            <Figure label="difference" value={formatDelay(delay.measuredSeconds - delay.predictedSeconds)} />
          </>
        ) : null}
        {run.request.mode === 'causal' ? (
          <Figure
            label="Start-up"
            value={formatDelay(run.settlingFrames / run.request.spec.sampleRateHz)}
            title="Until the response to a step stays within 1 % of where it ends (of its largest value, where it ends at 0)."
          />
        ) : null}
      </div>
      {isRun && delay && delay.measuredSeconds !== null ? (
        <p className="text-[12px] text-pencil">
          Measured: the peak of the cross-correlation over {formatCount(delay.frames, 'sample', 'samples')}. Predicted:{' '}
          {predictedWords[run.zeroPhase ?? 'causal']}
        </p>
      ) : null}
      {run.zeroPhase ? <ZeroPhaseNote run={run} way={run.zeroPhase} /> : null}
    </div>
  )
}

const predictedWords = {
  causal: 'the peak that the input’s spectrum times the design’s response should give.',
  'forward-backward': 'the peak that the input’s spectrum times the squared magnitude should give, which is 0.',
  'delay-removed':
    'the peak that the input’s spectrum times the design’s response should give, less the delay that was taken off.',
} as const satisfies Record<ZeroPhaseWay | 'causal', string>

function ZeroPhaseNote({ run, way }: { run: RunSummary; way: ZeroPhaseWay }) {
  return (
    <p className="border-l-2 border-ochre pl-3 text-[13px]">
      Offline only. {way === 'forward-backward' ? twiceWords(run) : onceWords(run)} Needs at least {run.leastFrames}{' '}
      samples; the {run.extensionFrames} at either end (hatched) rest on the extension.
    </p>
  )
}

const twiceWords = ({ edges }: RunSummary): string =>
  `The magnitude acts twice, the phase not at all${edges.length > 0 ? `: ${edges.map(edgeWords).join(', ')}` : ''}.`

function onceWords({ request: { spec }, extensionFrames }: RunSummary): string {
  const turns = isFirDesign(spec) && spec.fir.response === 'differentiator'
  const delay = `${formatCount(extensionFrames, 'sample', 'samples')} (${formatDelay(extensionFrames / spec.sampleRateHz)})`
  return `The delay of ${delay} is taken off; the magnitude acts once, as in real time.${
    turns ? ' The quarter turn of a differentiator stays: it is its work.' : ''
  }`
}

const edgeWords = (edge: EdgeLevel): string =>
  `${formatDb(edge.zeroPhaseDb)} at ${formatHz(edge.hz)} instead of ${formatDb(edge.onceDb)}`

function Figure({ label, value, title }: { label: string; value: string; title?: string }) {
  return (
    <span title={title}>
      {label} <span className="numeric font-medium">{value}</span>
    </span>
  )
}
