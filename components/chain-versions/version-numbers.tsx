import Link from 'next/link'

/** The versions of a chain side by side, the one on the page marked; nothing where there is but one. */
export function VersionNumbers({
  path,
  numbers,
  current,
}: {
  path: string
  numbers: readonly number[]
  current: number
}) {
  if (numbers.length < 2) return null
  return (
    <nav aria-label="Versions of this chain" className="mt-2">
      <ul className="flex flex-wrap gap-1 text-[13px]">
        {numbers.map((number) => (
          <li key={number}>
            <Link
              href={`${path}/${number}`}
              aria-label={`Version ${number}`}
              aria-current={number === current ? 'page' : undefined}
              className="numeric flex min-h-6 min-w-6 items-center justify-center border border-graph-strong px-1.5 hover:border-ink aria-[current=page]:border-ink aria-[current=page]:bg-spruce-wash aria-[current=page]:font-semibold"
            >
              {number}
            </Link>
          </li>
        ))}
      </ul>
    </nav>
  )
}
