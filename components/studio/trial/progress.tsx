import { Button } from '@/components/ui/button'
import { classNames } from '@/lib/format/class-names'
import type { Task } from './store'
import { formatBytes, formatCount } from './words'

/** How far a long task is, and the way to stop it. */
export function Progress({ task, onCancel, slim = false }: { task: Task; onCancel(): void; slim?: boolean }) {
  const percent = task.total > 0 ? Math.min(100, Math.round((100 * task.done) / task.total)) : 0
  const amount = (value: number) =>
    task.unit === 'bytes' ? formatBytes(value) : formatCount(Math.round(value), 'sample', 'samples')
  const figures = task.total > 0 ? `${amount(task.done)} of ${amount(task.total)}` : 'beginning'
  return (
    <div
      className={classNames('flex flex-wrap items-center gap-x-4 gap-y-1', slim ? 'text-[13px]' : 'py-3 text-[14px]')}
    >
      <span className="min-w-0 break-words">{task.words}</span>
      <div
        role="progressbar"
        aria-label={task.words}
        aria-valuemin={0}
        aria-valuemax={100}
        aria-valuenow={percent}
        aria-valuetext={figures}
        className="h-2 w-48 max-w-full border border-graph-strong bg-sheet"
      >
        <div className="h-full bg-spruce" style={{ width: `${percent}%` }} />
      </div>
      <span className="numeric text-[12px] text-pencil">{figures}</span>
      <Button small onClick={onCancel}>
        Cancel
      </Button>
    </div>
  )
}
