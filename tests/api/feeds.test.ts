import {
  bookFeedSchema,
  feedSchema,
  feedSummarySchema,
  type BookFeed,
  type Feed,
  type FeedSummary,
} from '@maslin/shared'
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

const protein = { value: 120, low: 110, high: 130, sd: 4, source: 'laboratory report', status: 'laboratory' }

describe('the book', () => {
  it('holds at least sixty feeds, every value with its source and status', async () => {
    const { items } = (await owner.visitor.get('/api/v1/book/feeds')).body as { items: BookFeed[] }
    expect(items.length).toBeGreaterThanOrEqual(60)
    for (const feed of items) {
      bookFeedSchema.parse(feed)
      expect(feed.dryMatterSource, feed.key).not.toBe('')
      for (const value of Object.values(feed.values)) expect(value.source, feed.key).not.toBe('')
    }
    expect(new Set(items.map((feed) => feed.name.toLowerCase())).size).toBe(items.length)
  })
})

describe('copying from the book', () => {
  it('copies whole feeds once, and leaves a copy that was edited as it is', async () => {
    const { items: book } = (await owner.visitor.get('/api/v1/book/feeds')).body as { items: BookFeed[] }
    const bookKeys = ['barley-grain', 'oats-grain']
    const copied = (await api.post('/feeds/copies', { bookKeys })).body as {
      items: Feed[]
      skipped: string[]
    }
    expect(copied.skipped).toEqual([])
    for (const feed of copied.items) {
      const original = book.find((it) => it.key === feed.bookKey) as BookFeed
      const { name, class: feedClass, dryMatter, dryMatterSource, values } = original
      const expected = { name, class: feedClass, dryMatter, dryMatterSource, values }
      expect(feed).toMatchObject({ ...expected, archived: false, version: 1 })
    }
    const [barley] = copied.items
    await api.patch(`/feeds/${barley?.id}`, 1, { dryMatter: 0.86 })
    const again = (await api.post('/feeds/copies', { bookKeys: [...bookKeys, 'wheat-grain'] }))
      .body as typeof copied
    expect(again.skipped).toEqual(bookKeys)
    expect(again.items.map((feed) => feed.bookKey)).toEqual(['wheat-grain'])
    expect((await api.get(`/feeds/${barley?.id}`)).body).toMatchObject({ dryMatter: 0.86, version: 2 })
  })

  it('copies none where one is unknown', async () => {
    const answer = await api.post('/feeds/copies', { bookKeys: ['salt', 'moon-dust'] })
    expect(answer.body).toMatchObject({ status: 400, errors: [{ path: 'bookKeys.1', code: 'unknown' }] })
    const { items } = (await api.get('/feeds')).body as { items: Feed[] }
    expect(items.map((feed) => feed.bookKey)).not.toContain('salt')
  })
})

describe('a feed of the farm’s own', () => {
  it('comes back as it was given, unknown values absent', async () => {
    const fields = {
      name: 'Ridge meadow hay, second cut',
      class: 'dryForage',
      dryMatter: 0.871,
      dryMatterSource: 'laboratory report',
      dryMatterStatus: 'laboratory',
      forage: true,
      testWeightKg: 21.8,
      bulkDensityKgPerL: 0.12,
      note: 'barn two',
      values: { crudeProtein: protein, copper: { value: 0, source: '', status: 'typed' } },
    }
    const created = await api.post('/feeds', fields)
    expect(created.status).toBe(201)
    expect(feedSchema.parse(created.body)).toMatchObject(fields)
    const { id } = created.body as Feed
    expect((await api.get(`/feeds/${id}`)).body).toEqual(created.body)
    expect(Object.keys((created.body as Feed).values)).toEqual(['crudeProtein', 'copper'])
  })

  it('forgets a value that is left out of the new set, and keeps all where none are sent', async () => {
    const { id } = await api.makeFeed({
      values: { crudeProtein: protein as never, calcium: protein as never },
    })
    const renamed = await api.patch(`/feeds/${id}`, 1, { name: 'Renamed oats' })
    expect(Object.keys((renamed.body as Feed).values).sort()).toEqual(['calcium', 'crudeProtein'])
    const { body } = await api.patch(`/feeds/${id}`, 2, { values: { calcium: { ...protein, value: 5 } } })
    expect(body).toMatchObject({ version: 3, values: { calcium: { value: 5 } } })
    expect((await api.get(`/feeds/${id}`)).body).toEqual(body)
  })

  it('is refused with every wrong value named', async () => {
    const answer = await api.post('/feeds', {
      name: 'Wrong',
      class: 'stone',
      dryMatter: 12,
      forage: 'yes',
      values: { crudeProtein: { value: -1, source: '', status: 'typed' }, gold: protein },
    })
    expect(answer.status).toBe(400)
    const errors = (answer.body as { errors: { path: string; code: string }[] }).errors
    expect(errors.map(({ path }) => path).sort()).toEqual([
      'class',
      'dryMatter',
      'forage',
      'values.crudeProtein.value',
      'values.gold',
    ])
  })

  it('cannot take the name of another one', async () => {
    await api.makeFeed({ name: 'Flaked maize' })
    const { id } = await api.makeFeed()
    expect((await api.patch(`/feeds/${id}`, 1, { name: 'FLAKED MAIZE' })).body).toMatchObject({
      code: 'name_taken',
    })
    expect((await api.patch(`/feeds/${id}`, 1, { name: 'Flaked maize, fine' })).status).toBe(200)
  })

  it('cannot be removed while an offer names it, but archived', async () => {
    const [feed, supplier] = [await api.makeFeed(), await api.makeSupplier()]
    const offer = await api.makeOffer({ feedId: feed.id, supplierId: supplier.id })
    expect((await api.delete(`/feeds/${feed.id}`, 1)).body).toMatchObject({ status: 409, code: 'in_use' })
    expect((await api.patch(`/feeds/${feed.id}`, 1, { archived: true })).body).toMatchObject({
      archived: true,
    })
    const { items } = (await api.get('/feeds')).body as { items: FeedSummary[] }
    expect(items.find(({ id }) => id === feed.id)).toMatchObject({ archived: true })
    await api.delete(`/offers/${offer.id}`, 1)
    expect((await api.delete(`/feeds/${feed.id}`, 2)).status).toBe(204)
    expect((await api.get(`/feeds/${feed.id}`)).status).toBe(404)
  })

  it('is listed with its cheapest price on the day asked for', async () => {
    const feed = await api.makeFeed()
    const cheap = await api.makeSupplier()
    const dear = await api.makeSupplier()
    await api.makeOffer({ feedId: feed.id, supplierId: dear.id, price: '11', date: '2026-01-01' })
    const offer = await api.makeOffer({
      feedId: feed.id,
      supplierId: cheap.id,
      price: '10',
      date: '2026-02-01',
    })
    const priceOn = async (asOf: string) => {
      const { items } = (await api.get(`/feeds?asOf=${asOf}`)).body as { items: FeedSummary[] }
      return feedSummarySchema.parse(items.find(({ id }) => id === feed.id)).price
    }
    expect(await priceOn('2025-12-31')).toBeUndefined()
    expect(await priceOn('2026-01-31')).toMatchObject({ supplierName: dear.name, date: '2026-01-01' })
    expect(await priceOn('2026-02-01')).toEqual({
      offerId: offer.id,
      supplierName: cheap.name,
      // 10 / (50 × 0.45359237 kg)
      perKgAsFed: '0.440925',
      date: '2026-02-01',
    })
  })
})
