import type { Problem } from '@/lib/designs/types'

/** A server action as the forms see it; one that goes on to another page answers with nothing. */
export type Send = (
  input: unknown,
) => Promise<{ readonly ok: true; readonly value: unknown } | { readonly ok: false; readonly problem: Problem }>
