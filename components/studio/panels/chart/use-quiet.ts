'use client'

import { useEffect, useState } from 'react'

/** The value once it has stood still for a while: heavy work waits until a drag rests, so that the drag stays in the frame. */
export function useQuiet<Value>(value: Value, quietMilliseconds = 120): Value {
  const [quiet, setQuiet] = useState(value)
  useEffect(() => {
    const timer = setTimeout(() => setQuiet(() => value), quietMilliseconds)
    return () => clearTimeout(timer)
  }, [value, quietMilliseconds])
  return quiet
}
