import { accessSync, constants, existsSync, mkdirSync, readFileSync, readdirSync, writeFileSync } from 'node:fs'
import { delimiter, join } from 'node:path'
import { aptInstall, isDebianRoot } from './debian.mjs'
import { run } from './run.mjs'
import { Trouble } from './trouble.mjs'

/** Where Debian keeps each major version's server programs. */
const debianFolder = '/usr/lib/postgresql'

/** @param {string} path */
function isProgram(path) {
  try {
    accessSync(path, constants.X_OK)
    return true
  } catch {
    return false
  }
}

/** @param {string} folder */
const holdsServer = (folder) => ['initdb', 'pg_ctl', 'postgres'].every((name) => isProgram(join(folder, name)))

/**
 * Finds the server's programs: the highest version under Debian's folder, else a folder on PATH.
 *
 * @param {{ major?: string, folder?: string, path?: string }} [where] `major` asks for exactly that version, since a data folder can be
 *   opened only by the version that made it; `folder` and `path` are for the tests
 * @returns {string | undefined} the folder of the programs
 */
export function findPostgres({ major, folder = debianFolder, path = process.env.PATH ?? '' } = {}) {
  const versions = existsSync(folder) ? readdirSync(folder).filter((name) => /^\d+(\.\d+)?$/.test(name)) : []
  versions.sort((one, other) => Number(other) - Number(one))
  const wanted = major === undefined ? versions : versions.filter((name) => name === major)
  const installed = wanted.map((name) => join(folder, name, 'bin')).find(holdsServer)
  if (installed) return installed
  return path.split(delimiter).find((entry) => entry !== '' && holdsServer(entry))
}

/**
 * The major version of a server's programs, as its data folders write it ("15").
 * @param {string} binaries
 * @returns {Promise<string>}
 */
export async function postgresMajor(binaries) {
  const { stdout } = await run(join(binaries, 'postgres'), ['--version'], { timeoutSeconds: 20 })
  const found = /\(PostgreSQL\) (\d+)/.exec(stdout)
  if (!found?.[1])
    throw new Trouble(`${join(binaries, 'postgres')} does not say its version; is PostgreSQL installed properly?`)
  return found[1]
}

/**
 * Finds PostgreSQL, and installs Debian's package when it is missing and this user may.
 * @param {(line: string) => void} say
 * @param {{ find?: () => string | undefined, mayInstall?: boolean }} [here] for the tests
 * @returns {Promise<string>} the folder of the programs
 */
export async function demandPostgres(say, { find = findPostgres, mayInstall = isDebianRoot() } = {}) {
  const found = find()
  if (found) return found
  if (!mayInstall) {
    throw new Trouble(
      'No PostgreSQL server is installed; run "sudo apt-get install postgresql" and start again, or set DATABASE_URL to a server that runs.',
    )
  }
  say('PostgreSQL is missing: installing the system’s package')
  // Debian's package would start a cluster of its own on port 5432, as a service that nobody asked for.
  mkdirSync('/etc/postgresql-common', { recursive: true })
  const settings = '/etc/postgresql-common/createcluster.conf'
  const written = existsSync(settings) ? readFileSync(settings, 'utf8') : ''
  if (!/^\s*create_main_cluster\s*=/m.test(written)) writeFileSync(settings, `${written}create_main_cluster = false\n`)
  await aptInstall(['postgresql'], { recommends: false })
  const installed = find()
  if (!installed)
    throw new Trouble('PostgreSQL was installed, but its server programs were not found; look in /usr/lib/postgresql.')
  return installed
}
