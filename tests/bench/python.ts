import { spawnSync } from 'node:child_process'

export interface PythonTimes {
  readonly version: string
  /** Milliseconds of processor time of each run. */
  readonly sosfilt: readonly number[]
  readonly sosfreqz: readonly number[]
}

const program = `
import json, sys, time
import numpy as np, scipy
from scipy import signal
given = json.load(sys.stdin)
sos = np.array(given['sos'])
freqz = getattr(signal, 'freqz_sos', None) or signal.sosfreqz
x = np.random.default_rng(1).standard_normal(given['samples'])
def timed(rounds, run):
    run()
    out = []
    for _ in range(rounds):
        start = time.process_time()
        run()
        out.append((time.process_time() - start) * 1e3)
    return out
print(json.dumps({
    'version': scipy.__version__,
    'sosfilt': timed(given['rounds'], lambda: signal.sosfilt(sos, x)),
    'sosfreqz': timed(given['rounds'], lambda: freqz(sos, given['points'])),
}))
`

/** Times of the same work in scipy.signal, or null where python3 or scipy isn't installed. */
export function timePython(given: {
  readonly sos: readonly (readonly number[])[]
  readonly samples: number
  readonly points: number
  readonly rounds: number
}): PythonTimes | null {
  const run = spawnSync('python3', ['-c', program], { input: JSON.stringify(given), encoding: 'utf8' })
  if (run.status !== 0) return null
  const parsed: PythonTimes = JSON.parse(run.stdout)
  return parsed
}
