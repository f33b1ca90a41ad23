import * as z from 'zod'

/*
 * What the account forms send; the same schemas check it in the browser and on the server. Unknown keys are refused.
 */

/** Room for any sentence, and an end to how much work one request can make. */
const PASSWORD_MAX_BYTES = 256
export const PASSWORD_MIN_LENGTH = 8

const bytes = (text: string) => new TextEncoder().encode(text).length

const email = z
  .string()
  .trim()
  .toLowerCase()
  .max(254, 'An e-mail address has at most 254 characters.')
  .pipe(z.email('That is not an e-mail address; one looks like name@company.example.'))

/** When one is set. Length alone is asked for here; common ones are refused by the server, which keeps the list. */
const newPassword = z
  .string()
  .refine((text) => [...text].length >= PASSWORD_MIN_LENGTH, `Use at least ${PASSWORD_MIN_LENGTH} characters.`)
  .refine((text) => bytes(text) <= PASSWORD_MAX_BYTES, `Use at most ${PASSWORD_MAX_BYTES} bytes.`)

/** When one is shown: whatever was set before must still get in. */
const password = z
  .string()
  .min(1, 'Enter your password.')
  .refine((text) => bytes(text) <= 4 * PASSWORD_MAX_BYTES, 'That is longer than any password here.')

/** No control characters or line breaks, which could forge lines in mails and files; none that turn the direction; something to see. */
export const singleLine = (what: string, max: number) =>
  z
    .string()
    .trim()
    .min(1, `Enter ${what}.`)
    .max(max, `Use at most ${max} characters.`)
    .refine(
      (text) => !/[\p{Cc}\p{Cs}\u2028\u2029\u061c\u200e\u200f\u202a-\u202e\u2066-\u2069]/u.test(text),
      'Use a single line without control characters.',
    )
    .refine((text) => /[\p{L}\p{N}\p{P}\p{S}]/u.test(text), `Enter ${what}.`)

/** A path of ours to go to afterwards. Anything that a browser could read as another site is dropped, not refused. */
const next = z
  .string()
  .max(500)
  .optional()
  .transform((path) => (path !== undefined && /^\/(?![/\\])[^\\\p{Cc}]*$/u.test(path) ? path : undefined))

export const signUpSchema = z.strictObject({
  email,
  label: singleLine('how others will see you, such as “designer, footbridge team”', 80),
  password: newPassword,
})

export const signInSchema = z.strictObject({ email, password, next })

export const askResetSchema = z.strictObject({ email })

export const resetSchema = z.strictObject({
  token: z
    .string()
    .regex(/^[A-Za-z0-9_-]{43}$/, 'This link is incomplete. Open it from the mail again, or ask for a new one.'),
  password: newPassword,
})

export const changePasswordSchema = z.strictObject({ current: password, password: newPassword })

export const endSessionSchema = z.strictObject({ session: z.string().regex(/^[0-9a-f]{64}$/) })
