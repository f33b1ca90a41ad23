import 'server-only'
import { createHash, randomBytes } from 'node:crypto'

/** 256 random bits, in 43 characters that need no escaping anywhere. */
export const newToken = (): string => randomBytes(32).toString('base64url')

/** What is stored instead of a token. Random tokens need no salt and no slow hash: there is nothing to guess. */
export const hashToken = (token: string): string => createHash('sha256').update(token, 'utf8').digest('hex')
