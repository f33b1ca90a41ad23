import 'server-only'
import type { Instrumentation } from 'next'
import { EnvironmentError, env } from './env'
import { log } from './log'

/** An environment that can't be used ends the process here, before its first request, with one sentence. */
export function demandEnvironment(): void {
  try {
    env()
  } catch (error) {
    if (!(error instanceof EnvironmentError)) throw error
    process.stderr.write(`${error.message}\n`)
    process.exit(1)
  }
}

/** Logs an error that reached the framework, with the digest that the person was shown in its place. */
export const logRequestError: Instrumentation.onRequestError = (error, request, context) => {
  const digest = error instanceof Error && 'digest' in error ? String(error.digest) : undefined
  // The query is left out: a link in a mail may carry its token there.
  const [path] = request.path.split('?', 1)
  log().error(
    { err: error, digest, method: request.method, path, route: context.routePath, kind: context.routeType },
    'request failed',
  )
}
