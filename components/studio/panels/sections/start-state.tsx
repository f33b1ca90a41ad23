import { NumberTable } from './number-table'

/** The state of each section after an endless input of 1; times the first sample, it starts a run without a transient. */
export function StartState({ start }: { start: Float64Array | null }) {
  if (!start)
    return (
      <p className="text-[14px] text-pencil">A section integrates, so there is no steady state; start from zero.</p>
    )
  return (
    <>
      <p className="text-[13px] text-pencil">
        State after an endless input of 1; times the first sample, it starts a run without a transient.{' '}
        <span className="numeric block">y = b0·x + s₁, s₁ ← b1·x − a1·y + s₂, s₂ ← b2·x − a2·y</span>
      </p>
      <NumberTable
        label="Initial state of each section"
        columns={['s₁', 's₂']}
        rows={Array.from({ length: start.length / 2 }, (_, index) => ({
          name: String(index + 1),
          values: [start[2 * index] ?? 0, start[2 * index + 1] ?? 0],
        }))}
      />
    </>
  )
}
