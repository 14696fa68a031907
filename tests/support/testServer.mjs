// @ts-check
import { mkdtempSync, readdirSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { ensurePrograms } from '../../backend/scripts/debian.mjs'
import { startMariaDb } from '../../backend/scripts/mariadb.mjs'
import { commandOf, endProcess, processesWith } from '../../backend/scripts/processes.mjs'

const prefix = 'maslin-test-'

/**
 * Starts a MariaDB for one test run, in a directory that goes with it.
 * @returns {Promise<{ url: string, stop: () => Promise<void> }>} url: of an account that may create databases
 */
export async function startTestServer() {
  await ensurePrograms('mariadb', 'mariadbClient')
  await removeLeftovers()
  const directory = mkdtempSync(join(tmpdir(), `${prefix}${process.pid}-`))
  const server = await startMariaDb({ directory, preferredPort: 3317, forTests: true })
  return {
    url: server.url,
    stop: async () => {
      await server.stop()
      rmSync(directory, { recursive: true, force: true })
    },
  }
}

/** Removes the servers and directories of test runs that were killed before they could do it themselves. */
async function removeLeftovers() {
  for (const name of readdirSync(tmpdir()).filter((it) => it.startsWith(prefix))) {
    const owner = Number(name.slice(prefix.length).split('-')[0])
    if (!owner || commandOf(owner) !== undefined) continue
    const directory = join(tmpdir(), name)
    for (const pid of processesWith('mariadbd', `--datadir=${directory}/`)) await endProcess(pid, 10_000)
    rmSync(directory, { recursive: true, force: true })
  }
}
