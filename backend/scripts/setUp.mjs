import { join } from 'node:path'
import { ensurePrograms } from './debian.mjs'
import { takeDirectory } from './lifecycle.mjs'
import { keepMariaDb } from './mariadb.mjs'
import { checkNode, ensurePackages } from './packages.mjs'
import { dataDirectory } from './paths.mjs'
import { say, secondsSince } from './say.mjs'
import { ensureSecrets } from './secrets.mjs'
import { endLeftoverServer, requireFreePort, wantedPort } from './server.mjs'

/**
 * What every start needs before anything is built: the packages, a database, secrets, the port.
 * @param {import('./lifecycle.mjs').Lifecycle} lifecycle
 * @returns {Promise<{ directory: string, port: number, env: Record<string, string> }>} env: for the server
 */
export async function setUp(lifecycle) {
  checkNode()
  const port = wantedPort()
  const directory = dataDirectory()
  takeDirectory(directory, lifecycle)
  await endLeftoverServer(directory)
  await requireFreePort(port)
  await ensurePackages()
  const DATABASE_URL = process.env.DATABASE_URL || (await startDatabase(directory, lifecycle))
  return { directory, port, env: { DATABASE_URL, MASLIN_DATA_DIR: directory, ...ensureSecrets(directory) } }
}

/**
 * @param {string} directory
 * @param {import('./lifecycle.mjs').Lifecycle} lifecycle
 */
async function startDatabase(directory, lifecycle) {
  await ensurePrograms('mariadb', 'mariadbClient')
  const start = performance.now()
  const starting = keepMariaDb({
    directory: join(directory, 'mariadb'),
    onRestart: () => say('MariaDB ended unexpectedly; starting it again …'),
    onBack: () => say('MariaDB is back.'),
    onGivenUp: (error) => void lifecycle.fail(error),
  })
  // Also when asked to end while it still starts: it is not left behind.
  lifecycle.onEnd(async () => (await starting.catch(() => undefined))?.stop())
  const database = await starting
  say(`MariaDB runs on 127.0.0.1:${database.port}, started in ${secondsSince(start)}.`)
  return database.url
}
