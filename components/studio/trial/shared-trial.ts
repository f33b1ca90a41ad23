import { remoteSession } from './remote'
import { createTrial, type Trial } from './trial'

let shared: Trial | null = null

/** One trial for the page: the recording stays while other panels of the drawer are open. The worker starts with the first file. */
export function sharedTrial(): Trial {
  if (shared) return shared
  const trial = createTrial(remoteSession((message) => trial.fail(message)))
  shared = trial
  return trial
}
