/** Runs a search to its end. */
export function finish<Result>(steps: Generator<number, Result>): Result {
  for (;;) {
    const next = steps.next()
    if (next.done === true) return next.value
  }
}
