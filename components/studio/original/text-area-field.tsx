import { useId, type TextareaHTMLAttributes } from 'react'
import { classNames } from '@/lib/format/class-names'

/** Some lines of numbers, with what is wrong with them underneath. */
export function TextAreaField({
  label,
  hint,
  problems,
  ...area
}: { label: string; hint: string; problems: readonly string[] } & TextareaHTMLAttributes<HTMLTextAreaElement>) {
  const id = useId()
  return (
    <div className="flex min-w-0 flex-col gap-1">
      <label htmlFor={id} className="text-[13px] font-medium text-ink">
        {label}
      </label>
      <textarea
        id={id}
        rows={5}
        spellCheck={false}
        autoComplete="off"
        aria-invalid={problems.length > 0 ? true : undefined}
        aria-describedby={`${id}-hint ${id}-problems`}
        className={classNames(
          'numeric w-full rounded border border-graph-strong bg-sheet px-2.5 py-1.5 text-[13px] text-ink hover:border-pencil',
          problems.length > 0 && 'border-vermilion',
        )}
        {...area}
      />
      <p id={`${id}-hint`} className="text-[13px] text-pencil">
        {hint}
      </p>
      <ul id={`${id}-problems`} role="alert" className="text-[13px] text-vermilion empty:hidden">
        {problems.slice(0, 8).map((problem) => (
          <li key={problem}>{problem}</li>
        ))}
        {problems.length > 8 ? <li>… and {problems.length - 8} more.</li> : null}
      </ul>
    </div>
  )
}
