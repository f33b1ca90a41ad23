/**
 * A queue of one: what is asked for while something runs waits for it, without holding anything else up. What fails makes way like what
 * succeeds.
 */
export function oneAtATime(): <Value>(work: () => Promise<Value>) => Promise<Value> {
  let last: Promise<unknown> = Promise.resolve()
  return (work) => {
    const done = last.then(work)
    last = done.catch(() => undefined)
    return done
  }
}
