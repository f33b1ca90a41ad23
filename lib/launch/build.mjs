import { createHash } from 'node:crypto'
import { existsSync, readFileSync, readdirSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { nextCommand, root } from './places.mjs'
import { run } from './run.mjs'
import { Trouble, troubleInOutput } from './trouble.mjs'

/** All that goes into a build. The start command's own scripts, db's seed and the tests do not. */
const folders = ['app', 'components', 'lib', 'dsp', 'db', 'fonts', 'public']
const files = [
  'instrumentation.ts',
  'next.config.mjs',
  'package-lock.json',
  'package.json',
  'postcss.config.mjs',
  'proxy.ts',
  'tailwind.config.ts',
  'tsconfig.json',
]
const leftOut = new Set(['lib/launch', 'db/seed', 'db/cluster.mjs', 'db/migrate.ts'])

/**
 * A fingerprint of the sources, from their names and bytes; dates don't count, since a fresh checkout or a switch of branches changes them.
 *
 * @param {string} [folder] the checkout
 * @returns {string} SHA-256 in hex
 */
export function sourceHash(folder = root) {
  const hash = createHash('sha256').update(`node ${process.versions.modules}\n`)
  const visit = (/** @type {string} */ path) => {
    const full = join(folder, path)
    if (leftOut.has(path)) return
    for (const entry of readdirSync(full, { withFileTypes: true }).sort((a, b) => (a.name < b.name ? -1 : 1))) {
      const inside = `${path}/${entry.name}`
      if (entry.isDirectory()) visit(inside)
      else if (entry.isFile() && !leftOut.has(inside)) add(inside)
    }
  }
  const add = (/** @type {string} */ path) => {
    const bytes = readFileSync(join(folder, path))
    hash.update(`${path}\0${bytes.length}\0`).update(bytes)
  }
  for (const name of folders) if (existsSync(join(folder, name))) visit(name)
  for (const name of files) if (existsSync(join(folder, name))) add(name)
  return hash.digest('hex')
}

const stampFile = (/** @type {string} */ folder, /** @type {string} */ dist) =>
  join(folder, dist, 'polewright-build.json')

/**
 * Whether a finished build of just these sources is there.
 * @param {string} hash
 * @param {string} dist the build's folder, relative to the checkout
 * @param {string} [folder] the checkout
 */
export function buildIsCurrent(hash, dist, folder = root) {
  const stamp = stampFile(folder, dist)
  if (!existsSync(stamp) || !existsSync(join(folder, dist, 'BUILD_ID'))) return false
  try {
    return JSON.parse(readFileSync(stamp, 'utf8')).sources === hash
  } catch (error) {
    if (error instanceof SyntaxError) return false
    throw error
  }
}

/**
 * @param {string} hash
 * @param {string} dist
 * @param {string} [folder]
 */
export function writeBuildStamp(hash, dist, folder = root) {
  writeFileSync(stampFile(folder, dist), `${JSON.stringify({ sources: hash })}\n`)
}

/**
 * Builds the app for production.
 * @param {{ dist: string, hash: string, logFile: string }} options
 * @returns {Promise<void>}
 * @throws {Trouble} with the first error of the build
 */
export async function build({ dist, hash, logFile }) {
  // A development NODE_ENV would make a build that does not work; the app's own variables are of no use to a build and must not be kept in it.
  const own = /^(DATABASE_URL|SMTP_URL|MAILBOX_DIR|APP_ORIGIN|MAIL_FROM|NODE_OPTIONS)$/
  const env = Object.fromEntries(Object.entries(process.env).filter(([name]) => !own.test(name)))
  const built = await run(process.execPath, [nextCommand, 'build'], {
    cwd: root,
    env: { ...env, NODE_ENV: 'production', POLEWRIGHT_DIST: dist, NEXT_TELEMETRY_DISABLED: '1', NO_COLOR: '1' },
    endable: true,
  })
  writeFileSync(logFile, built.output, { mode: 0o600 })
  if (built.code === 0) return writeBuildStamp(hash, dist)
  // The first line after the summary that names a mistake, such as "Module not found: Can't resolve 'x'".
  const mistake = /^(?:Error: (?!Turbopack build failed)|Module not found: |Type error: ).*$/m.exec(built.output)?.[0]
  const reason =
    troubleInOutput(built.output, join(root, dist)) ??
    `The build failed${mistake ? ` (${mistake})` : ''}; what it said is in ${logFile}.`
  throw new Trouble(reason, new Error(built.output.slice(-6000)))
}
