import { existsSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { run } from './run.mjs'
import { Trouble, troubleInOutput } from './trouble.mjs'

/**
 * Whether node_modules holds what the lock asks for. npm keeps its own account of what it installed, written last, so that an interrupted or
 * an older installation shows; packages for other systems are absent rightly.
 *
 * @param {string} folder the checkout
 * @returns {boolean}
 */
export function packagesAreCurrent(folder) {
  const installed = readPackages(join(folder, 'node_modules/.package-lock.json'))
  const wanted = readPackages(join(folder, 'package-lock.json'))
  if (!installed || !wanted) return false
  return Object.entries(wanted).every(([path, entry]) => {
    if (path === '') return true
    const there = installed[path]
    if (!there) return entry.optional === true
    return there.version === entry.version && there.integrity === entry.integrity
  })
}

/**
 * @param {string} path
 * @returns {Record<string, { version?: string, integrity?: string, optional?: boolean }> | undefined}
 */
function readPackages(path) {
  if (!existsSync(path)) return undefined
  try {
    return JSON.parse(readFileSync(path, 'utf8')).packages
  } catch (error) {
    if (error instanceof SyntaxError) return undefined
    throw error
  }
}

/**
 * Installs the packages of the lock, those for building and testing included: NODE_ENV=production would make npm leave them out.
 * @param {string} folder the checkout
 * @param {string} logFile where npm's own words go when it fails
 * @returns {Promise<void>}
 */
export async function installPackages(folder, logFile) {
  const args = ['ci', '--include=dev', '--no-audit', '--no-fund', '--loglevel=error']
  const ended = await npm(args, folder)
  if (ended.code === 0) return
  writeFileSync(logFile, ended.output, { mode: 0o600 })
  if (ended.code === 127)
    throw new Trouble('npm was not found; it comes with Node.js, so install Node.js 20 or newer from its own package.')
  const known = troubleInOutput(ended.output, join(folder, 'node_modules'))
  const offline = /ENOTFOUND|EAI_AGAIN|ECONNREFUSED|ETIMEDOUT|ECONNRESET/.test(ended.output)
  throw new Trouble(
    known ??
      (offline
        ? 'The npm registry could not be reached, so the packages are not installed; check the network and start again.'
        : `npm could not install the packages; what it said is in ${logFile}.`),
    new Error(ended.output.slice(-4000)),
  )
}

/**
 * @param {readonly string[]} args
 * @param {string} cwd
 */
function npm(args, cwd) {
  // Under `npm start` this names npm's own script, which need not be on PATH.
  const script = process.env.npm_execpath
  const options = { cwd, endable: true }
  return script && /npm-cli\.c?js$/.test(script)
    ? run(process.execPath, [script, ...args], options)
    : run('npm', args, options)
}
