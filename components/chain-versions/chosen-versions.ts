import type { ChainVersionSummary } from '@/lib/chains/types'

export interface ChosenVersions {
  readonly left: ChainVersionSummary
  readonly right: ChainVersionSummary
}

type Query = Readonly<Record<string, string | readonly string[] | undefined>>

/** The two versions that an address asks for; what it doesn't say, or says wrongly, is the newest and the one that it came from. */
export function chosenVersions(query: Query, versions: readonly ChainVersionSummary[]): ChosenVersions | null {
  const asked = (side: 'left' | 'right') => versions.find(({ number }) => String(number) === query[side])
  const right = asked('right') ?? versions[0]
  if (!right) return null
  const left = asked('left') ?? versions.find(({ number }) => number === right.parentNumber) ?? right
  return { left, right }
}
