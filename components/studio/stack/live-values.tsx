import { useEffect, useState } from 'react'

const REST_MS = 350

/** Says the values once the crosshair rests; `words` is null while it is moved by a pointer, which nobody wants read out. */
export function LiveValues({ words }: { words: string | null }) {
  const [said, setSaid] = useState('')
  useEffect(() => {
    if (words === null) return
    const timer = setTimeout(() => setSaid(words), REST_MS)
    return () => clearTimeout(timer)
  }, [words])
  return (
    <p role="status" aria-live="polite" className="sr-only">
      {said}
    </p>
  )
}
