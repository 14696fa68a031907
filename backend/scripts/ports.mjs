import { createServer } from 'node:net'

/**
 * Tries to listen on a port, and lets go of it at once.
 * @param {number} port 0 for any
 * @param {string} host
 * @returns {Promise<number | undefined>} the port, or undefined when it is taken or not ours to use
 */
function tryPort(port, host) {
  return new Promise((resolve) => {
    const server = createServer()
    server.once('error', (/** @type {NodeJS.ErrnoException} */ error) =>
      // A machine without this kind of address has nobody listening on it either.
      resolve(error.code === 'EADDRNOTAVAIL' || error.code === 'EAFNOSUPPORT' ? port : undefined),
    )
    server.listen({ port, host, exclusive: true }, () => {
      const address = server.address()
      const found = typeof address === 'object' && address ? address.port : undefined
      server.close(() => resolve(found))
    })
  })
}

/**
 * Whether nobody listens on a port, neither on loopback nor on every address.
 * @param {number} port
 */
export async function portIsFree(port) {
  for (const host of ['127.0.0.1', '0.0.0.0', '::']) {
    if ((await tryPort(port, host)) === undefined) return false
  }
  return true
}

/**
 * The first of the wished-for ports that is free, else any free one.
 * @param {...(number | undefined)} wishes
 * @returns {Promise<number>}
 */
export async function freePort(...wishes) {
  for (const port of wishes) {
    if (port && (await portIsFree(port))) return port
  }
  const port = await tryPort(0, '127.0.0.1')
  if (!port) throw new Error('No free port on 127.0.0.1')
  return port
}
