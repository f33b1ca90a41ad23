import 'server-only'
import { createHash } from 'node:crypto'
import type { Design } from '@/dsp'
import { canonicalText, coefficientsOf, type StoredCoefficients } from './stored-coefficients'

/* The checksum of a version: SHA-256 of its canonical coefficients. The text itself is made in the browser too; see there. */

export * from './stored-coefficients'

export const checksumOfStored = (stored: StoredCoefficients): string =>
  createHash('sha256').update(canonicalText(stored), 'utf8').digest('hex')

export const checksumOf = (design: Pick<Design, 'analog' | 'digital'>): string =>
  checksumOfStored(coefficientsOf(design))
