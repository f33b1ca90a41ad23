import { createServer } from 'node:net'
import { Trouble } from './trouble.mjs'

/**
 * Whether a port on loopback can be listened on now.
 * @param {number} port
 * @returns {Promise<'free' | 'taken' | 'forbidden'>}
 */
export function portState(port) {
  return new Promise((resolve, reject) => {
    const probe = createServer()
    probe.once('error', (error) => {
      const code = 'code' in error ? error.code : ''
      if (code === 'EADDRINUSE') resolve('taken')
      else if (code === 'EACCES') resolve('forbidden')
      else reject(error)
    })
    probe.listen({ port, host: '127.0.0.1', exclusive: true }, () => probe.close(() => resolve('free')))
  })
}

/**
 * A port on loopback that nobody uses: the remembered one when it is free, else one that the system picks.
 * @param {number} [remembered]
 * @returns {Promise<number>}
 */
export async function freePort(remembered) {
  if (remembered !== undefined && (await portState(remembered)) === 'free') return remembered
  return new Promise((resolve, reject) => {
    const probe = createServer()
    probe.once('error', reject)
    probe.listen({ port: 0, host: '127.0.0.1' }, () => {
      const address = probe.address()
      const port = typeof address === 'object' && address ? address.port : 0
      probe.close(() => resolve(port))
    })
  })
}

/**
 * Reads the PORT variable.
 * @param {string | undefined} text
 * @param {number} fallback
 * @returns {number}
 */
export function readPort(text, fallback) {
  if (text === undefined || text.trim() === '') return fallback
  const port = Number(text)
  if (/^\d+$/.test(text.trim()) && port >= 1 && port <= 65535) return port
  throw new Trouble(`PORT is "${text}"; it must be a whole number from 1 to 65535, such as ${fallback}.`)
}

/**
 * Refuses a port that can't be served on, with the port to try instead.
 * @param {number} port
 * @returns {Promise<void>}
 */
export async function demandPort(port) {
  const state = await portState(port)
  if (state === 'free') return
  if (state === 'forbidden')
    throw new Trouble(
      `This user may not listen on port ${port} (ports below 1024 are reserved); try PORT=3000 npm start.`,
    )
  let other = port
  do other = other >= 65535 ? 1024 : other + 1
  while ((await portState(other)) !== 'free')
  throw new Trouble(`Port ${port} is taken by another program; stop it, or start with PORT=${other} npm start.`)
}
