import { existsSync, readdirSync } from 'node:fs'
import { setTimeout as pause } from 'node:timers/promises'
import { run } from './run.mjs'
import { Trouble, troubleInOutput } from './trouble.mjs'

/** Whether packages can be installed here: Debian or its kin, and the right to do so. */
export function isDebianRoot() {
  return process.getuid?.() === 0 && existsSync('/usr/bin/apt-get')
}

const quiet = () => ({ ...process.env, DEBIAN_FRONTEND: 'noninteractive', LC_ALL: 'C.UTF-8' })

/** A machine fresh from its image has no package lists, and an install from none finds nothing. */
function listsAreEmpty() {
  const folder = '/var/lib/apt/lists'
  return !existsSync(folder) || !readdirSync(folder).some((name) => name.includes('_Packages'))
}

/**
 * apt waits for dpkg's lock by itself, but not for the lock on its lists.
 * @param {readonly string[]} args
 */
async function whenUnlocked(args) {
  for (let tries = 0; ; tries++) {
    const result = await run('apt-get', args, { env: quiet(), timeoutSeconds: 1200 })
    if (result.code === 0 || tries >= 60 || !/Could not get lock|Unable to lock/.test(result.output)) return result
    await pause(5000)
  }
}

/**
 * Installs Debian packages; waits for another installation to finish instead of failing on its lock.
 * @param {readonly string[]} packages
 * @param {{ recommends?: boolean }} [options]
 * @returns {Promise<void>}
 */
export async function aptInstall(packages, { recommends = false } = {}) {
  const patience = [
    '-o',
    'DPkg::Lock::Timeout=300',
    '-o',
    'Acquire::Retries=3',
    '-o',
    'Dpkg::Options::=--force-confold',
  ]
  const update = () => whenUnlocked(['-q', ...patience, 'update'])
  const install = () =>
    whenUnlocked(['-q', ...patience, 'install', '-y', ...(recommends ? [] : ['--no-install-recommends']), ...packages])
  const fresh = listsAreEmpty()
  let updated = fresh ? await update() : undefined
  let result = await install()
  // Old lists name package files that the mirror no longer keeps.
  if (result.code !== 0 && !updated) {
    updated = await update()
    result = await install()
  }
  if (result.code === 0) return
  // Without lists an install only says that there is no such package; why there are none, the update said.
  const failed = updated && updated.code !== 0 ? updated : result
  const firstError = failed.output.split('\n').find((line) => line.startsWith('E:'))
  const output = `${updated?.output ?? ''}\n${result.output}`
  const reason =
    troubleInOutput(output, '/var') ?? firstError?.slice(2).trim() ?? `apt-get ended with code ${failed.code}.`
  throw new Trouble(`Installing ${packages.join(', ')} failed: ${reason}`, new Error(output.slice(-4000)))
}
