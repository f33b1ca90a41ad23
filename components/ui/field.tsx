import { useId, type InputHTMLAttributes, type ReactNode, type Ref, type SelectHTMLAttributes } from 'react'
import { classNames } from '@/lib/format/class-names'

interface FieldFrameProps {
  readonly label: string
  readonly hint?: ReactNode
  readonly error?: string | undefined
}

const box =
  'w-full min-h-9 border border-graph-strong rounded bg-sheet px-2.5 py-1 text-ink hover:border-pencil aria-invalid:border-vermilion'

/** A labelled text input; its hint and its error are tied to it for readers who can't see them. */
export function TextField({
  label,
  hint,
  error,
  ref,
  className,
  ...input
}: FieldFrameProps & InputHTMLAttributes<HTMLInputElement> & { ref?: Ref<HTMLInputElement> }) {
  const id = useId()
  return (
    <Frame id={id} label={label} hint={hint} error={error}>
      <input
        id={id}
        ref={ref}
        className={classNames(box, className)}
        aria-invalid={error ? true : undefined}
        aria-describedby={describedBy(id, hint, error)}
        {...input}
      />
    </Frame>
  )
}

/** A labelled choice of a few; the browser's own list, which every keyboard and reader knows. */
export function SelectField({
  label,
  hint,
  error,
  ref,
  className,
  children,
  ...select
}: FieldFrameProps & SelectHTMLAttributes<HTMLSelectElement> & { ref?: Ref<HTMLSelectElement> }) {
  const id = useId()
  return (
    <Frame id={id} label={label} hint={hint} error={error}>
      <select
        id={id}
        ref={ref}
        className={classNames(box, className)}
        aria-invalid={error ? true : undefined}
        aria-describedby={describedBy(id, hint, error)}
        {...select}
      >
        {children}
      </select>
    </Frame>
  )
}

function Frame({ id, label, hint, error, children }: FieldFrameProps & { id: string; children: ReactNode }) {
  return (
    <div className="flex flex-col gap-1">
      <label htmlFor={id} className="text-[13px] font-medium text-ink">
        {label}
      </label>
      {children}
      {hint ? (
        <p id={`${id}-hint`} className="text-[13px] text-pencil">
          {hint}
        </p>
      ) : null}
      {error ? (
        <p id={`${id}-error`} role="alert" className="text-[13px] text-vermilion">
          {error}
        </p>
      ) : null}
    </div>
  )
}

function describedBy(id: string, hint: ReactNode, error: string | undefined): string | undefined {
  const ids = [hint ? `${id}-hint` : '', error ? `${id}-error` : ''].filter(Boolean).join(' ')
  return ids === '' ? undefined : ids
}
