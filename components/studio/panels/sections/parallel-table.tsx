import type { ParallelForm } from '@/dsp'
import { fullDigits } from './written'
import { NumberTable } from './number-table'

/** The sum of sections that the method yields by itself; every term runs on the input. */
export function ParallelTable({ parallel: { direct, terms } }: { parallel: ParallelForm }) {
  return (
    <>
      <p className="text-[13px] text-pencil">
        The same filter as a sum: every term runs on the input, and their outputs are added
        {direct === 0 ? '.' : ' to '}
        {direct === 0 ? null : <span className="numeric text-ink">{fullDigits(direct)}·x.</span>}
      </p>
      <NumberTable
        label="Terms of the parallel form"
        columns={['b0', 'b1', 'b2', 'a1', 'a2']}
        rows={terms.map(({ b0, b1, b2, a1, a2 }, index) => ({ name: String(index + 1), values: [b0, b1, b2, a1, a2] }))}
      />
    </>
  )
}
