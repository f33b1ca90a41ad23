import { databaseAnswers } from '@/db/queries/health'
import { ENGINE_VERSION } from '@/dsp'
import { log } from '@/lib/log'

// Asked of the running server each time; a build must not answer it once and for all.
export const dynamic = 'force-dynamic'

const headers = { 'Cache-Control': 'no-store' }

/** Whether this process can serve: 200 once the database answers, 503 until then. For the start command and for load balancers. */
export async function GET(): Promise<Response> {
  try {
    await databaseAnswers()
    return Response.json({ status: 'ready', engine: ENGINE_VERSION }, { headers })
  } catch (error) {
    // The reason is for the log alone: it may name hosts and users.
    log().warn({ err: error }, 'health: the database does not answer')
    return Response.json({ status: 'the database does not answer' }, { status: 503, headers })
  }
}
