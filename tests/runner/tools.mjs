import { accessSync, constants } from 'node:fs'
import { delimiter, join } from 'node:path'
import { aptInstall, isDebianRoot } from '../../lib/launch/debian.mjs'
import { Trouble } from '../../lib/launch/trouble.mjs'

/** @param {string} path */
function isProgram(path) {
  try {
    accessSync(path, constants.X_OK)
    return true
  } catch {
    return false
  }
}

/** @param {readonly string[]} names */
function onPath(names) {
  const folders = [...(process.env.PATH ?? '').split(delimiter), '/usr/bin'].filter((folder) => folder !== '')
  return names.flatMap((name) => folders.map((folder) => join(folder, name))).find(isProgram)
}

/**
 * @param {() => string | undefined} find
 * @param {readonly string[]} packages
 * @param {string} what
 */
async function demand(find, packages, what) {
  const found = find()
  if (found) return found
  if (!isDebianRoot())
    throw new Trouble(`${what} is missing; run "sudo apt-get install ${packages.join(' ')}" and try again.`)
  process.stdout.write(`${what} is missing: installing ${packages.join(', ')}\n`)
  await aptInstall(packages)
  const installed = find()
  if (!installed) throw new Trouble(`${packages.join(', ')} was installed, but no program came of it.`)
  return installed
}

/** The browser that the browser tests drive: CHROMIUM_PATH's or Debian's, installed when this user may. */
export function demandChromium() {
  const given = process.env.CHROMIUM_PATH
  if (given && !isProgram(given)) throw new Trouble(`CHROMIUM_PATH names ${given}, which is no program.`)
  return demand(() => given || onPath(['chromium', 'chromium-browser']), ['chromium'], 'Chromium')
}

/** The C compiler that the tests of exported headers use. */
export function demandCompiler() {
  return demand(() => onPath(['cc']), ['gcc', 'libc6-dev'], 'A C compiler (cc)')
}
