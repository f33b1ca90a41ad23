export const chainDrawerTabs = [
  'trade-offs',
  'response',
  'delay',
  'noise',
  'tolerance',
  'build-sheet',
  'proof',
  'history',
] as const
export type ChainDrawerTab = (typeof chainDrawerTabs)[number]
