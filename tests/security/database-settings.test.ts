import { afterAll, beforeAll, expect, it } from 'vitest'
import { openDatabase } from '../../backend/src/database/database'
import { checkServerSettings } from '../../backend/src/database/settings'
import { createTestDatabase, type TestDatabase } from '../support/database'

let database: TestDatabase
beforeAll(async () => {
  database = await createTestDatabase()
})
afterAll(() => database.drop())

/** Checks a server whose connections begin in this mode. */
async function checkIn(mode: string): Promise<unknown> {
  const opened = openDatabase(database.url, { poolSize: 1 })
  try {
    await opened.sequelize.query('SET SESSION sql_mode = ?', { replacements: [mode] })
    return await checkServerSettings(opened)
  } finally {
    await opened.close()
  }
}

it('takes a strict server', async () => {
  await expect(checkIn('STRICT_TRANS_TABLES')).resolves.toMatchObject({ durable: expect.any(Boolean) })
})

it.each([
  ['', 'STRICT_TRANS_TABLES'],
  // Texts are escaped with backslashes: where those mean nothing, a quotation mark in a name would end the text.
  ['STRICT_TRANS_TABLES,NO_BACKSLASH_ESCAPES', 'NO_BACKSLASH_ESCAPES'],
])('refuses a server in the mode %j', async (mode, named) => {
  await expect(checkIn(mode)).rejects.toThrow(named)
})
