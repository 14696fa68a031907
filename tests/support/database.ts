import { randomBytes } from 'node:crypto'
import { createConnection, type Connection } from 'mariadb'

/** A database of one test file's own, empty at first. */
export interface TestDatabase {
  /** `mariadb://` address with account and password, as DATABASE_URL takes it. */
  url: string
  name: string
  /** Removes it with everything in it. */
  drop(): Promise<void>
}

/**
 * Makes an empty database on the test run's MariaDB.
 * @throws when TEST_DATABASE_URL is not set, which the projects' global set-up takes care of
 */
export async function createTestDatabase(): Promise<TestDatabase> {
  const name = `maslin_test_${randomBytes(6).toString('hex')}`
  await asAdministrator((connection) => connection.query(`CREATE DATABASE ${name}`))
  const url = serverUrl()
  url.pathname = `/${name}`
  return {
    url: url.href,
    name,
    drop: async () => {
      await asAdministrator((connection) => connection.query(`DROP DATABASE IF EXISTS ${name}`))
    },
  }
}

/** Runs statements as the account that may do everything on the test server. */
export async function asAdministrator<T>(work: (connection: Connection) => Promise<T>): Promise<T> {
  const url = serverUrl()
  const connection = await createConnection({
    host: url.hostname,
    port: Number(url.port),
    user: decodeURIComponent(url.username),
    password: decodeURIComponent(url.password),
  })
  try {
    return await work(connection)
  } finally {
    await connection.end()
  }
}

function serverUrl(): URL {
  const url = process.env.TEST_DATABASE_URL
  if (!url)
    throw new Error('TEST_DATABASE_URL is not set: run this through Vitest, whose set-up starts a server.')
  return new URL(url)
}
