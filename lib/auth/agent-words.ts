const browsers = [
  ['Firefox', /Firefox\//],
  ['Edge', /Edg\//],
  ['Opera', /OPR\//],
  ['Chrome', /Chrom(e|ium)\//],
  ['Safari', /Safari\//],
] as const

const systems = [
  ['Android', /Android/],
  ['iOS', /iPhone|iPad/],
  ['Windows', /Windows/],
  ['macOS', /Mac OS X|Macintosh/],
  ['Linux', /Linux/],
] as const

/** A browser's own name for itself, in few words: enough to tell one's sessions apart. */
export function agentWords(agent: string): string {
  const browser = browsers.find(([, pattern]) => pattern.test(agent))?.[0]
  const system = systems.find(([, pattern]) => pattern.test(agent))?.[0]
  if (browser && system) return `${browser} on ${system}`
  return browser ?? system ?? 'Unknown browser'
}
