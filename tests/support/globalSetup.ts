import { startTestServer } from './testServer.mjs'

/**
 * Gives tests that need MariaDB a server, where the test run has not brought one: so that a single file can be
 * run by itself.
 */
export default async function setup(): Promise<(() => Promise<void>) | undefined> {
  if (process.env.TEST_DATABASE_URL) return undefined
  const server = await startTestServer()
  process.env.TEST_DATABASE_URL = server.url
  return async () => {
    delete process.env.TEST_DATABASE_URL
    await server.stop()
  }
}
