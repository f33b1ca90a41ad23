import { createHash } from 'node:crypto'
import { chmodSync, chownSync, existsSync, mkdirSync, realpathSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { run } from './run.mjs'
import { Trouble } from './trouble.mjs'

/**
 * The user that the database server runs as. PostgreSQL refuses to run as root, so that root starts it as the user that its package made;
 * anybody else runs it as themselves.
 * @returns {Promise<{ uid: number, gid: number } | undefined>} undefined: as ourselves
 */
export async function serverUser() {
  if (process.getuid?.() !== 0) return undefined
  const [uid, gid] = await Promise.all([run('id', ['-u', 'postgres']), run('id', ['-g', 'postgres'])])
  if (uid.code !== 0 || gid.code !== 0) {
    throw new Trouble(
      'PostgreSQL does not run as root and there is no user "postgres" to run it as; create one with "useradd --system postgres", or start as another user.',
    )
  }
  return { uid: Number(uid.stdout), gid: Number(gid.stdout) }
}

/**
 * Makes a folder that only its owner can look into; the server's user may pass through it, nobody else.
 * @param {string} folder
 * @param {{ gid: number } | undefined} user
 */
export function makePrivateFolder(folder, user) {
  mkdirSync(folder, { recursive: true, mode: 0o700 })
  if (user) chownSync(folder, 0, user.gid)
  chmodSync(folder, user ? 0o710 : 0o700)
}

/**
 * Makes the folder that the cluster lives in: `wanted` itself, or, when the server's user can't reach it (a checkout below a closed home
 * folder), one below /var/lib that stays the same for this checkout.
 *
 * @param {string} wanted
 * @param {{ uid: number, gid: number } | undefined} user
 * @param {string} [fallbackRoot]
 * @returns {Promise<{ home: string, moved: boolean }>}
 */
export async function databaseHome(wanted, user, fallbackRoot = '/var/lib') {
  const parent = dirname(wanted)
  makePrivateFolder(parent, user)
  if (!user) {
    mkdirSync(wanted, { recursive: true, mode: 0o700 })
    return { home: wanted, moved: false }
  }
  const mark = createHash('sha256').update(realpathSync(parent)).digest('hex').slice(0, 12)
  const fallback = join(fallbackRoot, `polewright-${mark}`)
  const reachable = (await run('test', ['-x', parent], { ...user, cwd: '/' })).code === 0
  const home = reachable ? wanted : fallback
  if (reachable && !existsSync(join(wanted, 'data')) && existsSync(join(fallback, 'data'))) {
    throw new Trouble(
      `The data of this checkout is in ${fallback}, from when its folder was closed to the user "postgres"; move that folder to ${wanted}, or delete it to begin anew.`,
    )
  }
  mkdirSync(home, { recursive: true, mode: 0o700 })
  chownSync(home, user.uid, user.gid)
  chmodSync(home, 0o700)
  return { home, moved: !reachable }
}
