import type { Offer, Price } from '@maslin/shared'
import { QueryTypes } from 'sequelize'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { startTestApp, type TestApp } from '../support/app'
import { farmApi, type FarmApi } from '../support/farmApi'
import { farmScopeTap, namesFarm } from '../support/farmScopeTap'
import { signUp, type Person } from '../support/people'

let t: TestApp
let here: Person
let there: Person
let mine: FarmApi
let theirs: FarmApi

beforeAll(async () => {
  t = await startTestApp()
  here = await signUp(t, 'Odell Marsh')
  there = await signUp(t, 'Sten Farrow')
  mine = farmApi(here, here.farmId)
  theirs = farmApi(there, there.farmId)
})
afterAll(() => t.close())

describe('two farms', () => {
  it('may use the same names', async () => {
    await mine.makeFeed({ name: 'Barley' })
    await theirs.makeFeed({ name: 'Barley' })
    expect(
      (await mine.post('/feeds', { name: 'barley', class: 'grain', dryMatter: 0.9, forage: false })).body,
    ).toMatchObject({
      status: 409,
      code: 'name_taken',
    })
  })

  it('see their own rows only', async () => {
    const feed = await theirs.makeFeed()
    const listed = (await mine.get('/feeds')).body as { items: { id: string }[] }
    expect(listed.items.map(({ id }) => id)).not.toContain(feed.id)
  })

  it('cannot point at one another’s rows', async () => {
    const [feed, supplier] = [await theirs.makeFeed(), await theirs.makeSupplier()]
    const [ownFeed, ownSupplier] = [await mine.makeFeed(), await mine.makeSupplier()]
    const offer = { packageQuantity: 1, packageUnit: 'kg' }
    const withTheirFeed = await mine.post('/offers', {
      ...offer,
      feedId: feed.id,
      supplierId: ownSupplier.id,
    })
    expect(withTheirFeed.body).toMatchObject({ status: 400, errors: [{ path: 'feedId', code: 'unknown' }] })
    const withTheirSupplier = await mine.post('/offers', {
      ...offer,
      feedId: ownFeed.id,
      supplierId: supplier.id,
    })
    expect(withTheirSupplier.body).toMatchObject({
      status: 400,
      errors: [{ path: 'supplierId', code: 'unknown' }],
    })
  })

  it('cannot match names of a list to one another’s feeds', async () => {
    const feed = await theirs.makeFeed()
    const answer = await mine.post('/price-imports/preview', {
      text: 'feed,package,price,date\nMystery,50 lb,10,2026-01-02\n',
      supplierName: 'Mill',
      feedMatches: { Mystery: feed.id },
    })
    expect(answer.body).toMatchObject({
      counts: { error: 1 },
      rows: [{ problems: [{ code: 'unknownFeed' }] }],
    })
  })

  it('keep their prices apart', async () => {
    const offers: Offer[] = []
    for (const api of [mine, theirs]) {
      const [feed, supplier] = [await api.makeFeed(), await api.makeSupplier()]
      offers.push(await api.makeOffer({ feedId: feed.id, supplierId: supplier.id }))
    }
    const [own, other] = offers
    expect((await mine.post(`/offers/${other?.id}/prices`, { date: '2026-02-01', price: '1' })).status).toBe(
      404,
    )
    const kept = (await theirs.get(`/offers/${other?.id}/prices`)).body as { items: Price[] }
    expect(kept.items.map(({ price }) => price)).toEqual(['10'])
    expect(((await mine.get(`/offers/${own?.id}/prices`)).body as { items: Price[] }).items).toHaveLength(1)
  })
})

describe('the database itself', () => {
  it('refuses a row that points into another farm', async () => {
    const [feed, supplier] = [await theirs.makeFeed(), await mine.makeSupplier()]
    const insert = t.database.sequelize.query(
      `INSERT INTO offers (id, farm_id, version, created_at, updated_at, supplier_id, feed_id, package_quantity, package_unit)
       VALUES (UUID(), ?, 1, NOW(3), NOW(3), ?, ?, 1, 'kg')`,
      { replacements: [here.farmId, supplier.id, feed.id] },
    )
    await expect(insert).rejects.toThrow(/foreign key constraint/i)
  })

  it('gives every table of a farm its farm, a key with it, and references that carry it', async () => {
    const tables = await t.database.sequelize.query<{ name: string; farm: number; keyed: number }>(
      `SELECT tables.TABLE_NAME AS name,
              (SELECT COUNT(*) FROM information_schema.COLUMNS AS columns
                WHERE columns.TABLE_SCHEMA = DATABASE() AND columns.TABLE_NAME = tables.TABLE_NAME
                  AND columns.COLUMN_NAME = 'farm_id') AS farm,
              (SELECT COUNT(*) FROM information_schema.STATISTICS AS statistics
                WHERE statistics.TABLE_SCHEMA = DATABASE() AND statistics.TABLE_NAME = tables.TABLE_NAME
                  AND statistics.NON_UNIQUE = 0 AND statistics.SEQ_IN_INDEX = 1
                  AND statistics.COLUMN_NAME = 'farm_id') AS keyed
         FROM information_schema.TABLES AS tables WHERE tables.TABLE_SCHEMA = DATABASE()`,
      { type: QueryTypes.SELECT },
    )
    const shared = [
      'migrations',
      'users',
      'sessions',
      'refresh_tokens',
      'farms',
      'book_feeds',
      'book_loads',
      'book_tables',
    ]
    for (const { name, farm, keyed } of tables) {
      expect(farm === 1, name).toBe(!shared.includes(name))
      if (farm) expect(keyed, `${name} needs a unique key that begins with the farm`).toBeGreaterThan(0)
    }
    const references = await t.database.sequelize.query<{ key: string; target: string; columns: string }>(
      `SELECT CONCAT(TABLE_NAME, '.', CONSTRAINT_NAME) AS \`key\`, REFERENCED_TABLE_NAME AS target,
              GROUP_CONCAT(COLUMN_NAME ORDER BY ORDINAL_POSITION) AS columns
         FROM information_schema.KEY_COLUMN_USAGE
        WHERE TABLE_SCHEMA = DATABASE() AND REFERENCED_TABLE_NAME IS NOT NULL
        GROUP BY TABLE_NAME, CONSTRAINT_NAME, REFERENCED_TABLE_NAME`,
      { type: QueryTypes.SELECT },
    )
    expect(references.length).toBeGreaterThan(10)
    for (const { key, target, columns } of references) {
      if (!shared.includes(target)) expect(columns, key).toMatch(/^farm_id,/)
    }
  })
})

describe('the watch on statements', () => {
  it('saw none without the farm in all of the above', () => expect(t.scopeViolations).toEqual([]))

  it.each([
    ['SELECT `farm_id`, `name` FROM `feeds` AS `feeds` WHERE `id` = ?', false],
    ['SELECT `name` FROM `feeds` AS `feeds`', false],
    ['UPDATE `feeds` SET `farm_id`=? WHERE `id` = ?', false],
    ['DELETE FROM `feeds`', false],
    ['INSERT INTO `feeds` (`id`,`name`) VALUES (?,?)', false],
    ["SELECT `name` FROM `feeds` AS `feeds` WHERE `feeds`.`id` = 'a' AND `feeds`.`farm_id` = 'b'", true],
    ['UPDATE `feeds` SET `name`=? WHERE `id` = ? AND `farm_id` = ?', true],
    ['INSERT INTO `feeds` (`id`,`farm_id`) VALUES (?,?)', true],
  ])('%s: %s', (sql, named) => expect(namesFarm(sql)).toBe(named))

  it('fails a statement that a farm’s table is read by without its farm', async () => {
    const tap = farmScopeTap()
    await tap.learnTables(t.database)
    expect(() => tap.onStatement('SELECT * FROM feeds')).toThrow(/does not name the farm/)
    expect(() => tap.onStatement("SELECT * FROM memberships WHERE `user_id` = 'x'")).not.toThrow()
    expect(() => tap.onStatement('SELECT * FROM users')).not.toThrow()
    expect(tap.violations).toHaveLength(1)
  })
})
