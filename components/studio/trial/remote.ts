import { proxy, releaseProxy, wrap, type Remote } from 'comlink'
import type { Progress, TrialApi } from './api'

/**
 * The session in a worker of its own, started when it is first asked. A worker that dies is reported once, and the next question
 * starts another.
 */
export function remoteSession(onDeath: (message: string) => void): TrialApi {
  let remote: Remote<TrialApi> | null = null

  function session(): Remote<TrialApi> {
    if (remote) return remote
    const worker = new Worker(new URL('./trial.worker.ts', import.meta.url), { type: 'module' })
    const wrapped = wrap<TrialApi>(worker)
    worker.addEventListener('error', (event) => {
      event.preventDefault()
      worker.terminate()
      wrapped[releaseProxy]()
      remote = null
      onDeath(
        `The part that reads recordings stopped${event.message ? `: ${event.message}` : ''}. Choose the recording again.`,
      )
    })
    remote = wrapped
    return wrapped
  }

  const told = (progress: Progress) => proxy(progress)
  return {
    open: (file, name, progress) => session().open(file, name, told(progress)),
    openDemo: (sampleRateHz, progress) => session().openDemo(sampleRateHz, told(progress)),
    changePlan: (change) => session().changePlan(change),
    readTable: (progress) => session().readTable(told(progress)),
    resample: (progress) => session().resample(told(progress)),
    run: (request, progress) => session().run(request, told(progress)),
    window: (request) => session().window(request),
    delay: (channel) => session().delay(channel),
    spectrum: (request) => session().spectrum(request),
    save: (request, progress) => session().save(request, told(progress)),
    cancel: async () => remote?.cancel(),
    close: async () => remote?.close(),
  }
}
