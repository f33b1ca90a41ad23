import { useEffect, useRef, useState } from 'react'

/** A value as it is; while it `moves`, only as it was at the last of a row of looks, so that what follows it needn't run at every step. */
export function useUnhurried<Value>(value: Value, moves: boolean, everyMs: number): Value {
  const latest = useRef(value)
  const [seen, setSeen] = useState(value)
  // Kept up with at rest, so that a movement starts from what was shown before it.
  if (!moves && seen !== value) setSeen(value)

  useEffect(() => {
    latest.current = value
  }, [value])
  useEffect(() => {
    if (!moves) return
    const timer = setInterval(() => setSeen(latest.current), everyMs)
    return () => clearInterval(timer)
  }, [moves, everyMs])

  return moves ? seen : value
}
