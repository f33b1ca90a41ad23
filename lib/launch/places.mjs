import { join, resolve } from 'node:path'
import { fileURLToPath } from 'node:url'

/** The checkout. */
export const root = fileURLToPath(new URL('../../', import.meta.url))

/**
 * Where the start command keeps everything that it makes, apart from the build. POLEWRIGHT_DATA moves it.
 * @param {NodeJS.ProcessEnv} [env]
 */
export function dataPlaces(env = process.env) {
  const data = resolve(root, env.POLEWRIGHT_DATA || '.data')
  return {
    data,
    postgres: join(data, 'postgres'),
    mailbox: join(data, 'mailbox'),
    lock: join(data, 'running.json'),
    appLog: join(data, 'app.log'),
    mailLog: join(data, 'mailbox.log'),
    installLog: join(data, 'install.log'),
    buildLog: join(data, 'build.log'),
  }
}

/**
 * The build's folder, relative to the checkout, as next.config.mjs reads it.
 * @param {NodeJS.ProcessEnv} [env]
 */
export const distFolder = (env = process.env) => env.POLEWRIGHT_DIST || '.next'

/** The command of the framework: its script is run by node itself, since a wrapper such as npx would leave the server behind when killed. */
export const nextCommand = join(root, 'node_modules/next/dist/bin/next')
