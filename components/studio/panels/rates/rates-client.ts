import { wrap, type Remote } from 'comlink'
import type { RatesService } from './rates-service'

interface Connection {
  readonly worker: Worker
  readonly remote: Remote<RatesService>
  /** Rejects when the worker can't be loaded or has broken down. */
  readonly broken: Promise<never>
}

export interface RatesClient extends RatesService {
  end(): void
}

/** The rates service in a worker, which starts with the first question and ends with `end`; it can be asked again after that. */
export function ratesClient(): RatesClient {
  let connection: Connection | null = null
  const connected = () => (connection ??= connect())
  const either = <Answer>(ask: (remote: Remote<RatesService>) => Promise<Answer>): Promise<Answer> => {
    const { remote, broken } = connected()
    return Promise.race([ask(remote), broken])
  }
  return {
    sweep: (ticket, question) => either((remote) => remote.sweep(ticket, question)),
    spot: (ticket, question) => either((remote) => remote.spot(ticket, question)),
    lowest: (ticket, question) => either((remote) => remote.lowest(ticket, question)),
    end() {
      connection?.worker.terminate()
      connection = null
    },
  }
}

function connect(): Connection {
  const worker = new Worker(new URL('./rates.worker.ts', import.meta.url), { type: 'module' })
  const broken = new Promise<never>((_, reject) => {
    worker.onerror = (event) =>
      reject(new Error(`The rates worker failed: ${event.message || 'it could not be loaded'}.`))
  })
  // Every question races with it and so hears of it; without a question there is nobody to tell.
  broken.catch(() => undefined)
  return { worker, remote: wrap<RatesService>(worker), broken }
}
