import type { Instrumentation } from 'next'

/** Once for each server process, before its first request: an environment that can't be used ends it here, with one sentence. */
export async function register(): Promise<void> {
  if (process.env.NEXT_RUNTIME !== 'nodejs') return
  const { env, EnvironmentError } = await import('@/lib/env')
  try {
    env()
  } catch (error) {
    if (!(error instanceof EnvironmentError)) throw error
    process.stderr.write(`${error.message}\n`)
    process.exit(1)
  }
}

/** Every error that reached the framework, with the digest that the person was shown in its place. */
export const onRequestError: Instrumentation.onRequestError = async (error, request, context) => {
  if (process.env.NEXT_RUNTIME !== 'nodejs') return
  const { log } = await import('@/lib/log')
  const digest = error instanceof Error && 'digest' in error ? String(error.digest) : undefined
  // The query is left out: reset links carry their token there.
  const [path] = request.path.split('?', 1)
  log().error(
    { err: error, digest, method: request.method, path, route: context.routePath, kind: context.routeType },
    'request failed',
  )
}
