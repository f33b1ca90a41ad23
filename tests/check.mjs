import { endRunning } from '../lib/launch/run.mjs'
import { runStaticChecks } from './runner/checks.mjs'
import { createTally, finish } from './runner/tally.mjs'

/** npm run check: everything that can be known without running the product. The test run begins with the same. */
process.on('SIGINT', () => {
  endRunning()
  process.exit(130)
})
const tally = createTally()
await runStaticChecks(tally)
finish(tally)
