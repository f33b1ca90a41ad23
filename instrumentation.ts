import type { Instrumentation } from 'next'

// The framework compiles this file for a second runtime as well, which has neither processes nor our log; only this form of the condition
// keeps the imports out of there.

export async function register(): Promise<void> {
  if (process.env.NEXT_RUNTIME === 'nodejs') {
    const { demandEnvironment } = await import('@/lib/server-life')
    demandEnvironment()
  }
}

export const onRequestError: Instrumentation.onRequestError = async (...details) => {
  if (process.env.NEXT_RUNTIME === 'nodejs') {
    const { logRequestError } = await import('@/lib/server-life')
    await logRequestError(...details)
  }
}
