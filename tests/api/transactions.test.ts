import { QueryTypes, type Transaction } from 'sequelize'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { startTestApp, type TestApp } from '../support/app'
import { farmApi, type FarmApi } from '../support/farmApi'
import { signUp, type Person } from '../support/people'

let t: TestApp
let owner: Person
let api: FarmApi
beforeAll(async () => {
  t = await startTestApp()
  owner = await signUp(t)
  api = farmApi(owner, owner.farmId)
})
afterAll(() => t.close())

const lockFarm = (id: string, transaction: Transaction) =>
  t.database.sequelize.query('SELECT id FROM farms WHERE id = ? FOR UPDATE', {
    replacements: [id],
    type: QueryTypes.SELECT,
    transaction,
  })

describe('a use case', () => {
  it('reads what is committed, and no snapshot of its start', async () => {
    const [row] = await t.database.transaction(async (transaction) => {
      await lockFarm(owner.farmId, transaction)
      return t.database.sequelize.query<{ level: string }>(
        `SELECT trx_isolation_level AS level FROM information_schema.INNODB_TRX
          WHERE trx_mysql_thread_id = CONNECTION_ID()`,
        { type: QueryTypes.SELECT, transaction },
      )
    })
    expect(row?.level).toBe('READ COMMITTED')
  })

  it('keeps nothing of a change whose trace cannot be written', async () => {
    const feed = await api.makeFeed({ name: 'Traced oats' })
    const { sequelize } = t.database
    await sequelize.query(
      "CREATE TRIGGER refuse_audit BEFORE INSERT ON audit_events FOR EACH ROW SIGNAL SQLSTATE '45000'",
    )
    try {
      expect((await api.patch(`/feeds/${feed.id}`, 1, { dryMatter: 0.5 })).status).toBe(500)
      expect((await api.delete(`/feeds/${feed.id}`, 1)).status).toBe(500)
      expect((await api.post('/suppliers', { name: 'Untraced Mill' })).status).toBe(500)
    } finally {
      await sequelize.query('DROP TRIGGER refuse_audit')
    }
    expect((await api.get(`/feeds/${feed.id}`)).body).toEqual(feed)
    expect(((await api.get('/suppliers')).body as { items: unknown[] }).items).toEqual([])
  })

  it('runs again when the server chose it to end a deadlock', async () => {
    const other = await signUp(t)
    const order = [owner.farmId, other.farmId]
    let runs = 0
    let waiting = 0
    let release: () => void = () => undefined
    const bothHold = new Promise<void>((resolve) => (release = resolve))
    const inOrder = (first = '', second = '') =>
      t.database.transaction(async (transaction) => {
        runs += 1
        await lockFarm(first, transaction)
        waiting += 1
        if (waiting === 2) release()
        await bothHold
        await lockFarm(second, transaction)
        return first
      })
    const done = await Promise.all([inOrder(...order), inOrder(...order.toReversed())])
    expect(done).toEqual(order)
    expect(runs).toBe(3)
  })

  it('answers that it is busy, not that it failed, when a row stays locked too long', async () => {
    let release: () => void = () => undefined
    const held = new Promise<void>((resolve) => (release = resolve))
    const holder = t.database.transaction(async (transaction) => {
      await lockFarm(owner.farmId, transaction)
      await held
    })
    const answer = await api.patch('', 1, { name: 'Waiting' })
    release()
    await holder
    expect(answer.body).toMatchObject({ status: 503, code: 'busy' })
    expect(answer.headers['retry-after']).toBe('1')
  })
})
