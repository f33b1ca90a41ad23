import 'server-only'
import { pino } from 'pino'
import { env } from './env'

let logger: pino.Logger | undefined

/** What must never reach a log, wherever in a record it stands. */
const secrets = ['password', 'passwordHash', 'token', 'tokenHash', 'cookie', 'authorization', 'secret']

/** drizzle writes the values of a failed statement into its error: hashes, addresses, whole specs. The statement is enough. */
const withoutValues = (text: string) => text.replace(/\nparams:[^\n]*/g, '')

export function loggedError(error: Error): Record<string, unknown> {
  const told = Object.entries(pino.stdSerializers.err(error)).filter(([name]) => name !== 'params')
  return Object.fromEntries(
    told.map(([name, value]) => [name, typeof value === 'string' ? withoutValues(value) : value]),
  )
}

/** The server's log: one JSON object a line on standard output. */
export function log(): pino.Logger {
  logger ??= pino({
    level: env().LOG_LEVEL,
    base: null,
    timestamp: pino.stdTimeFunctions.isoTime,
    redact: { paths: secrets.flatMap((name) => [name, `*.${name}`, `*.*.${name}`]), censor: '[hidden]' },
  })
  return logger
}
