import 'server-only'
import { hash, verify } from '@node-rs/argon2'
import { AppError } from '@/lib/errors'
import { commonPasswords } from './common-passwords'

/**
 * argon2id (the package's default) with 19 MiB, two passes, one lane: the floor that OWASP's password storage cheat sheet gives.
 * Stated here, so that an update of the package can't weaken it.
 */
const cost = { memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const

/** The same letters typed on another keyboard may arrive as other code points. */
const normalised = (password: string) => password.normalize('NFKC')

export function hashPassword(password: string): Promise<string> {
  return hash(normalised(password), cost)
}

let dummy: Promise<string> | undefined

/**
 * Checks a password against an account's hash, or against a hash of nothing when there is no such account, so that both answers take the
 * same work.
 */
export async function verifyPassword(passwordHash: string | null, password: string): Promise<boolean> {
  dummy ??= hashPassword('no account has this hash')
  const matches = await verify(passwordHash ?? (await dummy), normalised(password))
  return passwordHash !== null && matches
}

const sequences = [
  'abcdefghijklmnopqrstuvwxyz',
  '01234567890',
  'qwertyuiop',
  'asdfghjkl',
  'zxcvbnm',
  'qwertzuiop',
  'azertyuiop',
]

/** One character over and over, or a run along the alphabet, the digits or a row of keys, forwards or back. */
function isRun(text: string): boolean {
  if (new Set(text).size <= 2) return true
  const backwards = [...text].reverse().join('')
  return sequences.some((row) => {
    const long = row.repeat(Math.ceil(text.length / row.length) + 1)
    return long.includes(text) || long.includes(backwards)
  })
}

/** Letters that are often written as digits and signs. */
const plainLetters = (text: string) =>
  text.replace(
    /[0134578@$!]/g,
    (sign) =>
      ({ '0': 'o', '1': 'l', '3': 'e', '4': 'a', '5': 's', '7': 't', '8': 'b', '@': 'a', $: 's', '!': 'i' })[sign] ??
      sign,
  )

/** Throws when a new password is one of the first that anybody would try. Says what to do instead, in one sentence. */
export function refuseCommonPassword(password: string, email: string): void {
  const text = normalised(password).toLowerCase()
  const [mailbox = '', domain = ''] = email.toLowerCase().split('@')
  const company = domain.split('.')[0] ?? ''
  const ownWords = [email.toLowerCase(), mailbox, domain, company].filter((word) => word.length >= 3)
  // "Footbridge2026!" is the word with what people put after it.
  const stem = text.replace(/[\d\W_]+$/u, '')
  const shapes = [text, stem, plainLetters(text), plainLetters(stem)]
  const isCommon =
    isRun(text) ||
    shapes.some((shape) => commonPasswords.has(shape)) ||
    shapes.some((shape) => ownWords.includes(shape))
  if (isCommon)
    throw new AppError(
      'weak-password',
      'That password is among the first that anybody would try. A few unrelated words make a good one.',
      {
        field: 'password',
      },
    )
}
