import { existsSync, mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { buildBackend } from '../../backend/scripts/build.mjs'
import { buildFrontend } from '../../backend/scripts/frontend.mjs'
import { inProject } from '../../backend/scripts/paths.mjs'
import { freePort } from '../../backend/scripts/ports.mjs'
import { startServer } from '../../backend/scripts/server.mjs'
import { createTestDatabase, type TestDatabase } from './database'

/** Maslin as it is shipped, running on a database, a data directory and a port of one test file's own. */
export interface Application {
  /** `http://127.0.0.1:port`, without a slash at the end. */
  origin: string
  database: TestDatabase
  /** Who may sign in to the demo farms; empty without them. */
  signIns: { farm: string; name: string; role: string; email: string; password: string }[]
  /** What the server has logged so far. */
  log(): string
  stop(): Promise<void>
}

export interface ApplicationOptions {
  /** Load the demo farm; default true. */
  demo?: boolean
  /** Further settings, as the README names them. */
  env?: Record<string, string>
}

/**
 * Builds what has changed, starts the server and waits until it is ready.
 * @throws when it cannot be built or does not become ready, with the end of its log
 */
export async function startApplication({
  demo = true,
  env = {},
}: ApplicationOptions = {}): Promise<Application> {
  await Promise.all([buildFrontend(), buildBackend()])
  const database = await createTestDatabase()
  const directory = mkdtempSync(join(tmpdir(), 'maslin-application-'))
  const port = await freePort()
  const server = startServer({
    directory,
    port,
    command: ['--enable-source-maps', inProject('backend/dist/server.js')],
    env: {
      NODE_ENV: 'production',
      DATABASE_URL: database.url,
      MASLIN_DATA_DIR: directory,
      MASLIN_DEMO: demo ? 'on' : 'off',
      JWT_SECRET: 'a secret of the tests alone, long enough to be taken',
      RATE_LIMITS: 'off',
      HOST: '127.0.0.1',
      PUBLIC_URL: '',
      ...env,
    },
    toStdout: false,
  })
  const stop = async () => {
    await server.stop()
    await database.drop()
    rmSync(directory, { recursive: true, force: true })
  }
  try {
    await server.ready()
  } catch (error) {
    await stop()
    throw error
  }
  const signInsFile = join(directory, 'demo-sign-ins.json')
  return {
    origin: `http://127.0.0.1:${port}`,
    database,
    signIns: existsSync(signInsFile) ? JSON.parse(readFileSync(signInsFile, 'utf8')) : [],
    log: () => readFileSync(join(directory, 'server.log'), 'utf8'),
    stop,
  }
}
