import { cpSync, mkdirSync, mkdtempSync, readdirSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { nextCommand, root } from '../../lib/launch/places.mjs'
import { run } from '../../lib/launch/run.mjs'
import { Failure } from './tally.mjs'

/** The test run's own build folder; next.config.mjs reads it. */
export const testDist = '.next-test'

/**
 * The environment of a tool: without what would make it speak to the person's own servers.
 * @param {NodeJS.ProcessEnv} [more]
 */
export function toolEnvironment(more = {}) {
  const kept = Object.entries(process.env).filter(
    ([name]) =>
      !/^(DATABASE_URL|SMTP_URL|MAILBOX_DIR|APP_ORIGIN|PORT|NODE_ENV|NODE_OPTIONS|LOG_LEVEL|POLEWRIGHT_.*)$/.test(name),
  )
  return {
    ...Object.fromEntries(kept),
    POLEWRIGHT_DIST: testDist,
    NEXT_TELEMETRY_DISABLED: '1',
    NO_COLOR: '1',
    ...more,
  }
}

/**
 * Runs a tool of node_modules and demands that it ends well.
 * @param {string} script below node_modules
 * @param {...string} args
 */
async function tool(script, ...args) {
  const path = script.startsWith('/') ? script : join(root, 'node_modules', script)
  const done = await run(process.execPath, [path, ...args], {
    cwd: root,
    env: toolEnvironment(),
    endable: true,
    timeoutSeconds: 900,
  })
  if (done.code !== 0)
    throw new Failure(done.output.trim() || `${script} ended with code ${done.code} and said nothing`)
  return done
}

async function types() {
  // The framework's own types of the routes, fresh: those of an earlier build may name pages that are gone.
  rmSync(join(root, testDist, 'types'), { recursive: true, force: true })
  await tool(nextCommand, 'typegen')
  await tool('typescript/bin/tsc', '--noEmit', '-p', '.')
}

async function importRules() {
  const folders = ['app', 'components', 'lib', 'dsp', 'db', 'proxy.ts', 'instrumentation.ts']
  const there = new Set(readdirSync(root))
  const args = [
    '--config',
    '.dependency-cruiser.cjs',
    '--output-type',
    'json',
    ...folders.filter((name) => there.has(name)),
  ]
  const path = join(root, 'node_modules/dependency-cruiser/bin/dependency-cruise.mjs')
  const done = await run(process.execPath, [path, ...args], {
    cwd: root,
    env: toolEnvironment(),
    endable: true,
    timeoutSeconds: 600,
  })
  /** @type {{ summary: { totalCruised: number, error: number, violations: { rule: { name: string }, from: string, to: string }[] } }} */
  const { summary } = parse(done)
  // With a compiler it doesn't know, the tool finds no module and is content.
  const ours = folders.filter((name) => there.has(name)).length
  if (summary.totalCruised <= ours) throw new Failure(`only ${summary.totalCruised} modules were seen`)
  if (summary.error > 0 || done.code !== 0)
    throw new Failure(
      summary.violations.map(({ rule, from, to }) => `${rule.name}: ${from} → ${to}`).join('\n') || done.output,
    )
}

/** @param {{ stdout: string, output: string }} done */
function parse(done) {
  try {
    return JSON.parse(done.stdout)
  } catch (error) {
    throw new Failure(done.output.trim(), { cause: error })
  }
}

/** Generates into a copy: whatever is added there is a change of the schema that has no migration yet. */
async function migrationsCurrent() {
  const scratch = join(root, '.test-data')
  mkdirSync(scratch, { recursive: true })
  const copy = mkdtempSync(join(scratch, 'drizzle-'))
  try {
    cpSync(join(root, 'drizzle'), copy, { recursive: true })
    const before = readdirSync(copy).sort().join()
    const out = copy.slice(root.length).replace(/^\/*/, './')
    await tool('drizzle-kit/bin.cjs', 'generate', '--dialect=postgresql', '--schema=./db/schema/*.ts', `--out=${out}`)
    const added = readdirSync(copy).sort().join()
    if (added !== before)
      throw new Failure('db/schema has changes without a migration; run npm run db:generate and commit what it writes')
  } finally {
    rmSync(copy, { recursive: true, force: true })
  }
}

/** Everything that can be known without running the product, in order. */
export const staticChecks = /** @type {const} */ ([
  ['formatting (prettier)', () => tool('prettier/bin/prettier.cjs', '--check', '--log-level=warn', '.')],
  ['types (tsc)', types],
  ['lint (eslint)', () => tool('eslint/bin/eslint.js', '--max-warnings=0', '.')],
  ['import rules (dependency-cruiser)', importRules],
  ['dead code (knip)', () => tool('knip/bin/knip.js', '--no-progress')],
  ['migrations are consistent (drizzle-kit check)', () => tool('drizzle-kit/bin.cjs', 'check')],
  ['migrations hold the whole schema (drizzle-kit generate)', migrationsCurrent],
])

/** @param {import('./tally.mjs').Tally} tally */
export async function runStaticChecks(tally) {
  for (const [what, action] of staticChecks) await tally.check(what, action)
}
