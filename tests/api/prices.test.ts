import { offerSchema, type Offer, type Price } from '@maslin/shared'
import { QueryTypes } from 'sequelize'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { pricesAsOf } from '../../backend/src/services/offers'
import { inFarm } from '../../backend/src/repositories/inFarm'
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

async function feedAndSupplier(feed: Parameters<FarmApi['makeFeed']>[0] = {}) {
  const [feedRow, supplier] = [await api.makeFeed(feed), await api.makeSupplier()]
  return { feedId: feedRow.id, supplierId: supplier.id }
}

describe('an offer', () => {
  it.each([
    {
      name: 'a 50 lb bag',
      given: { packageQuantity: 50, packageUnit: 'lb', price: '11.40' },
      // 50 × 0.45359237 kg; 11.40 / 22.6796185
      expect: { packageKg: 22.6796185, perKgAsFed: '0.502654', perKgDryMatter: '0.571198' },
    },
    {
      name: 'a tonne with freight',
      given: { packageQuantity: 1, packageUnit: 'tonne', price: '240', freight: '22.5' },
      expect: { packageKg: 1000, perKgAsFed: '0.2625', perKgDryMatter: '0.298295' },
    },
    {
      name: 'a short ton',
      given: { packageQuantity: 1, packageUnit: 'shortTon', price: '300' },
      expect: { packageKg: 907.18474, perKgAsFed: '0.330693', perKgDryMatter: '0.375788' },
    },
    {
      name: 'a hundredweight',
      given: { packageQuantity: 1, packageUnit: 'cwt', price: '15' },
      expect: { packageKg: 45.359237, perKgAsFed: '0.330693', perKgDryMatter: '0.375788' },
    },
    {
      name: 'a bushel by the feed’s test weight',
      given: { packageQuantity: 2, packageUnit: 'bushel', price: '10' },
      expect: { packageKg: 43.6, perKgAsFed: '0.229358', perKgDryMatter: '0.260634' },
    },
  ] as const)('$name costs what its weight says, as fed and dry', async ({ given, expect: expected }) => {
    const ids = await feedAndSupplier({ dryMatter: 0.88, testWeightKg: 21.8 })
    const answer = await api.post('/offers', { ...ids, ...given, date: '2026-01-05' })
    expect(answer.status).toBe(201)
    const { packageKg, current } = offerSchema.parse(answer.body)
    expect(packageKg).toBeCloseTo(expected.packageKg, 9)
    expect(current).toMatchObject({
      perKgAsFed: expected.perKgAsFed,
      perKgDryMatter: expected.perKgDryMatter,
    })
  })

  it('has no price per weight where a bushel of the feed has no known weight', async () => {
    const ids = await feedAndSupplier()
    const { body } = await api.post('/offers', {
      ...ids,
      packageQuantity: 1,
      packageUnit: 'bushel',
      price: '5',
    })
    expect(body).not.toHaveProperty('packageKg')
    expect((body as Offer).current).toEqual({ price: '5', date: expect.any(String) as string })
  })

  it('exists once per supplier, feed and package', async () => {
    const ids = await feedAndSupplier()
    const offer = await api.makeOffer(ids)
    const again = await api.post('/offers', { ...ids, packageQuantity: 50, packageUnit: 'lb' })
    expect(again.body).toMatchObject({ status: 409, code: 'conflict', errors: [{ path: 'packageQuantity' }] })
    const other = await api.makeOffer({ ...ids, packageQuantity: 25 })
    expect((await api.patch(`/offers/${other.id}`, 1, { packageQuantity: 50 })).body).toMatchObject({
      code: 'conflict',
    })
    expect(
      (await api.patch(`/offers/${offer.id}`, 1, { packageQuantity: 50, freight: '2' })).body,
    ).toMatchObject({
      freight: '2',
      version: 2,
    })
  })

  it('keeps money exact: nothing passes through a float', async () => {
    const ids = await feedAndSupplier()
    const { id } = await api.makeOffer({ ...ids, price: '0.1', freight: '0.2' })
    expect(
      ((await api.get(`/offers?feedId=${ids.feedId}&asOf=2026-01-01`)).body as { items: Offer[] }).items,
    ).toMatchObject([{ id, freight: '0.2', current: { price: '0.1' } }])
    const large = await api.post(`/offers/${id}/prices`, { date: '2026-01-02', price: '123456789.1234' })
    expect((large.body as Offer).current?.price).toBe('123456789.1234')
  })

  it.each(['-1', '1e3', '1.23456', 'NaN', '', 12, '1234567890'])('refuses the price %j', async (price) => {
    const ids = await feedAndSupplier()
    const answer = await api.post('/offers', { ...ids, packageQuantity: 1, packageUnit: 'kg', price })
    expect(answer.status).toBe(400)
    expect((answer.body as { errors: { path: string }[] }).errors.map(({ path }) => path)).toEqual(['price'])
  })
})

describe('a price that no feed has', () => {
  const perGram = { packageQuantity: 1, packageUnit: 'g', price: '10001', date: '2026-01-05' } as const
  const refused = { status: 400, errors: [{ path: 'price', code: 'too_much_per_kg' }] }

  it('is refused with the offer, later, and when the package shrinks', async () => {
    const ids = await feedAndSupplier()
    expect((await api.post('/offers', { ...ids, ...perGram })).body).toMatchObject(refused)
    const { id } = await api.makeOffer({ ...ids, ...perGram, price: '9999' })
    const dear = await api.post(`/offers/${id}/prices`, { date: '2026-02-01', price: '10001' })
    expect(dear.body).toMatchObject(refused)
    expect((await api.patch(`/offers/${id}`, 1, { packageQuantity: 0.9 })).body).toMatchObject(refused)
    const { items } = (await api.get(`/offers/${id}/prices`)).body as { items: Price[] }
    expect(items.map(({ price }) => price)).toEqual(['9999'])
  })
})

describe('prices by day', () => {
  it('answer with the latest one on or before the day', async () => {
    const ids = await feedAndSupplier()
    const { id } = await api.makeOffer({ ...ids, price: '10', date: '2026-01-10' })
    await api.post(`/offers/${id}/prices`, { date: '2026-03-10', price: '12' })
    await api.post(`/offers/${id}/prices`, { date: '2026-02-10', price: '11' })
    const on = async (asOf: string) => {
      const { items } = (await api.get(`/offers?feedId=${ids.feedId}&asOf=${asOf}`)).body as {
        items: Offer[]
      }
      return items[0]?.current?.price
    }
    expect(await on('2026-01-09')).toBeUndefined()
    expect(await on('2026-01-10')).toBe('10')
    expect(await on('2026-03-09')).toBe('11')
    expect(await on('2026-03-10')).toBe('12')
    const history = (await api.get(`/offers/${id}/prices`)).body as { items: Price[] }
    expect(history.items.map(({ date, price }) => [date, price])).toEqual([
      ['2026-03-10', '12'],
      ['2026-02-10', '11'],
      ['2026-01-10', '10'],
    ])
  })

  it('replace one another on the same day, with a trace', async () => {
    const ids = await feedAndSupplier()
    const { id } = await api.makeOffer({ ...ids, price: '10', date: '2026-01-10' })
    expect((await api.post(`/offers/${id}/prices`, { date: '2026-01-10', price: '10.5' })).status).toBe(201)
    const { items } = (await api.get(`/offers/${id}/prices`)).body as { items: Price[] }
    expect(items.map(({ price }) => price)).toEqual(['10.5'])
    const [event] = await t.database.sequelize.query<{
      before_state: unknown
      after_state: unknown
      user_id: string
    }>(
      `SELECT before_state, after_state, user_id FROM audit_events
        WHERE farm_id = ? AND entity = 'price' AND action = 'update' ORDER BY id DESC LIMIT 1`,
      { replacements: [owner.farmId], type: QueryTypes.SELECT },
    )
    expect(event?.user_id).toBe(owner.userId)
    expect(event?.before_state).toMatchObject({ price: '10' })
    expect(event?.after_state).toMatchObject({ price: '10.5' })
  })

  it('are set once when two people set one day at once', async () => {
    const ids = await feedAndSupplier()
    const { id } = await api.makeOffer({ ...ids, price: '10', date: '2026-01-10' })
    const answers = await Promise.all(
      ['11', '12', '13'].map((price) => api.post(`/offers/${id}/prices`, { date: '2026-05-01', price })),
    )
    expect(answers.map(({ status }) => status)).toEqual([201, 201, 201])
    const { items } = (await api.get(`/offers/${id}/prices`)).body as { items: Price[] }
    expect(items.filter(({ date }) => date === '2026-05-01')).toHaveLength(1)
  })

  it('go with their offer, and stay on record', async () => {
    const ids = await feedAndSupplier()
    const { id } = await api.makeOffer({ ...ids, price: '10', date: '2026-01-10' })
    expect((await api.delete(`/offers/${id}`, 1)).status).toBe(204)
    const [event] = await t.database.sequelize.query<{ before_state: unknown }>(
      "SELECT before_state FROM audit_events WHERE farm_id = ? AND action = 'delete' AND entity_id = ?",
      { replacements: [owner.farmId, id], type: QueryTypes.SELECT },
    )
    expect(event?.before_state).toMatchObject({
      prices: [{ date: '2026-01-10', price: '10' }],
    })
  })
})

describe('prices as of a day, for solving', () => {
  it('give each feed its offers, cheapest per kg first, freight counted, unweighable ones left out', async () => {
    const { feedId, supplierId } = await feedAndSupplier()
    const bag = await api.makeOffer({ feedId, supplierId, price: '10', date: '2026-01-01' })
    const tonne = await api.makeOffer({
      ...{ feedId, supplierId, packageQuantity: 1, packageUnit: 'tonne' },
      ...{ price: '430', freight: '20', date: '2026-01-01' },
    })
    await api.makeOffer({
      feedId,
      supplierId,
      packageQuantity: 1,
      packageUnit: 'bushel',
      price: '1',
      date: '2026-01-01',
    })
    const found = await t.database.transaction((transaction) =>
      pricesAsOf(
        inFarm(t.database, owner.farmId, transaction, { userId: null, requestId: 'test' }),
        '2026-01-01',
      ),
    )
    expect(found.get(feedId)?.map(({ offerId, perKgAsFed }) => [offerId, perKgAsFed])).toEqual([
      [bag.id, '0.440925'],
      [tonne.id, '0.45'],
    ])
  })
})

describe('suppliers', () => {
  it('have a name of their own, and stay while they offer something', async () => {
    const supplier = await api.makeSupplier('Lower Mill')
    expect((await api.post('/suppliers', { name: 'LOWER mill' })).body).toMatchObject({ code: 'name_taken' })
    const { id: feedId } = await api.makeFeed()
    const offer = await api.makeOffer({ feedId, supplierId: supplier.id })
    expect((await api.delete(`/suppliers/${supplier.id}`, 1)).body).toMatchObject({ code: 'in_use' })
    await api.delete(`/offers/${offer.id}`, 1)
    expect((await api.delete(`/suppliers/${supplier.id}`, 1)).status).toBe(204)
  })
})

describe('today', () => {
  const dayFromNow = (days: number) => new Date(Date.now() + days * 86_400_000).toISOString().slice(0, 10)
  const currentFor = async (feedId: string, clientDay?: string) => {
    const request = api.get(`/offers?feedId=${feedId}`)
    if (clientDay !== undefined) request.set('Client-Day', clientDay)
    return ((await request).body as { items: Offer[] }).items[0]?.current
  }

  it('is the day of the person’s calendar, which the server’s may not have reached yet', async () => {
    const { feedId, supplierId } = await feedAndSupplier()
    await api.makeOffer({ feedId, supplierId, price: '10', date: dayFromNow(1) })
    expect(await currentFor(feedId)).toBeUndefined()
    expect(await currentFor(feedId, dayFromNow(1))).toMatchObject({ date: dayFromNow(1), price: '10' })
  })

  it.each([dayFromNow(3), dayFromNow(-3), 'tomorrow', '9999-99-99'])(
    'is not the %s of a wrong clock',
    async (day) => {
      const { feedId, supplierId } = await feedAndSupplier()
      await api.makeOffer({ feedId, supplierId, price: '10', date: dayFromNow(0) })
      await api.makeOffer({ feedId, supplierId, packageQuantity: 25, price: '9', date: dayFromNow(2) })
      expect(await currentFor(feedId, day)).toMatchObject({ date: dayFromNow(0) })
    },
  )
})

it.each(['0026-12-01', '0000-01-01', '2126-12-01'])('no price is of %s', async (date) => {
  const { feedId, supplierId } = await feedAndSupplier()
  const offer = await api.makeOffer({ feedId, supplierId })
  const refused = { status: 400, errors: [{ path: 'date', code: 'out_of_range' }] }
  expect((await api.post(`/offers/${offer.id}/prices`, { date, price: '1' })).body).toMatchObject(refused)
  const another = { feedId, supplierId, packageQuantity: 1, packageUnit: 'kg', price: '1', date }
  expect((await api.post('/offers', another)).body).toMatchObject(refused)
})
