import {
  importPreviewSchema,
  priceImportSchema,
  type ImportPreview,
  type Offer,
  type Price,
  type PriceImport,
} from '@maslin/shared'
import { randomUUID } from 'node:crypto'
import { readFileSync } from 'node:fs'
import { QueryTypes } from 'sequelize'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { startTestApp, type TestApp } from '../support/app'
import { farmApi, type FarmApi } from '../support/farmApi'
import { signUp } from '../support/people'

let t: TestApp
let api: FarmApi
beforeAll(async () => {
  t = await startTestApp()
})
afterAll(() => t.close())
beforeEach(async () => {
  const owner = await signUp(t)
  api = farmApi(owner, owner.farmId)
  for (const name of ['Barley grain', 'Oats grain']) await api.makeFeed({ name })
})

const list = (rows: string[]) => ['feed,supplier,package,price,date', ...rows, ''].join('\n')

async function preview(text: string, more: object = {}): Promise<ImportPreview> {
  const answer = await api.post('/price-imports/preview', { text, ...more })
  expect(answer.status, JSON.stringify(answer.body)).toBe(200)
  return importPreviewSchema.parse(answer.body)
}

/** Applies a list as its preview read it. */
async function apply(text: string, more: object = {}, key = randomUUID()) {
  const { mapping } = await preview(text, more)
  return api.post('/price-imports', { text, mapping, ...more }).set('Idempotency-Key', key)
}

const offers = async (asOf = '2026-12-31') =>
  ((await api.get(`/offers?asOf=${asOf}`)).body as { items: Offer[] }).items

describe('a list that is new to the farm', () => {
  it('is shown row by row, and nothing is saved by looking', async () => {
    const shown = await preview(
      list(['Barley grain,Tarn Mill,50 lb,$12.80,2026-01-05', 'oats GRAIN,Tarn Mill,1 ton,280,2026-01-05']),
    )
    expect(shown.counts).toEqual({ new: 2, changed: 0, same: 0, error: 0, leftOut: 0 })
    expect(shown.missingFields).toEqual([])
    expect(shown.rows[0]).toMatchObject({
      line: 2,
      state: 'new',
      read: {
        feedName: 'Barley grain',
        supplierName: 'Tarn Mill',
        newSupplier: true,
        packageQuantity: 50,
        packageUnit: 'lb',
        price: '12.8',
        date: '2026-01-05',
        perKgAsFed: '0.564383',
      },
    })
    expect(shown.rows[1]).toMatchObject({
      read: { feedName: 'Oats grain', packageUnit: 'shortTon', packageKg: 907.18474 },
    })
    expect(await offers()).toEqual([])
  })

  it('is applied whole: supplier, offers and dated prices', async () => {
    const answer = await apply(
      list(['Barley grain,Tarn Mill,50 lb,12.80,2026-01-05', 'Oats grain,Tarn Mill,50 lb,13.95,2026-01-05']),
    )
    expect(answer.status, JSON.stringify(answer.body)).toBe(201)
    expect(priceImportSchema.parse(answer.body)).toMatchObject({
      counts: { new: 2 },
      leftOut: [],
      createdBy: 'Wren Hollins',
    })
    expect(
      (await offers()).map(({ feedName, supplierName, current }) => [feedName, supplierName, current?.price]),
    ).toEqual([
      ['Barley grain', 'Tarn Mill', '12.8'],
      ['Oats grain', 'Tarn Mill', '13.95'],
    ])
    const { items } = (await api.get('/price-imports')).body as { items: PriceImport[] }
    expect(items).toEqual([answer.body])
  })
})

describe('a list that comes again', () => {
  const first = list([
    'Barley grain,Tarn Mill,50 lb,12.80,2026-01-05',
    'Oats grain,Tarn Mill,50 lb,13.95,2026-01-05',
  ])

  it('shows what changed and what did not', async () => {
    await apply(first)
    const next = list([
      'Barley grain,Tarn Mill,50 lb,13.10,2026-02-05',
      'Oats grain,Tarn Mill,50 lb,13.95,2026-02-05',
      'Oats grain,Tarn Mill,25 lb,7.50,2026-02-05',
    ])
    const shown = await preview(next)
    expect(shown.rows.map(({ state, read }) => [state, read?.before])).toEqual([
      ['changed', { price: '12.8', date: '2026-01-05' }],
      ['same', { price: '13.95', date: '2026-01-05' }],
      ['new', undefined],
    ])
    expect((await apply(next)).body).toMatchObject({ counts: { new: 1, changed: 1, same: 1 } })
    const barley = (await offers('2026-02-05')).find(({ feedName }) => feedName === 'Barley grain')
    expect(barley?.current?.price).toBe('13.1')
    expect(
      (await offers('2026-02-04')).find(({ feedName }) => feedName === 'Barley grain')?.current?.price,
    ).toBe('12.8')
  })

  it('has nothing to apply when every price is known', async () => {
    await apply(first)
    expect((await apply(first)).body).toMatchObject({ status: 409, code: 'nothing_to_apply' })
  })

  it('keeps the day of a price that is confirmed, so that a list between cannot hide it', async () => {
    await apply(list(['Barley grain,Tarn Mill,50 lb,10,2026-01-01']))
    await apply(list(['Barley grain,Tarn Mill,50 lb,10,2026-03-01']))
    await apply(list(['Barley grain,Tarn Mill,50 lb,12,2026-02-01']))
    expect((await offers('2026-02-15'))[0]?.current?.price).toBe('12')
    expect((await offers('2026-03-15'))[0]?.current?.price).toBe('10')
  })

  it('replaces a price of the same day', async () => {
    await apply(first)
    const shown = await apply(list(['Barley grain,Tarn Mill,50 lb,12.90,2026-01-05']))
    expect(shown.body).toMatchObject({ counts: { changed: 1 } })
    const [barley] = await offers()
    const { items } = (await api.get(`/offers/${barley?.id}/prices`)).body as { items: Price[] }
    expect(items.map(({ price, source }) => [price, source])).toEqual([['12.9', 'import']])
  })

  it('replaces many at once, each with its trace', async () => {
    const days = Array.from({ length: 700 }, (_, at) =>
      new Date(Date.UTC(2024, 0, 1 + at)).toISOString().slice(0, 10),
    )
    const priced = (price: number) => list(days.map((day) => `Barley grain,Tarn Mill,50 lb,${price},${day}`))
    await apply(priced(10))
    expect((await apply(priced(11))).body).toMatchObject({ counts: { changed: 700 } })
    const [barley] = await offers()
    const { items } = (await api.get(`/offers/${barley?.id}/prices`)).body as { items: Price[] }
    expect(items).toHaveLength(700)
    expect(new Set(items.map(({ price }) => price))).toEqual(new Set(['11']))
    const [event] = await t.database.sequelize.query<{ replaced: number }>(
      `SELECT JSON_LENGTH(before_state, '$.replaced') AS replaced FROM audit_events
        WHERE farm_id = ? AND action = 'import' ORDER BY id DESC LIMIT 1`,
      { replacements: [api.farmId], type: QueryTypes.SELECT },
    )
    expect(event?.replaced).toBe(700)
  })

  it('compares the days of one list with each other, in whatever order they stand', async () => {
    const shown = await preview(
      list([
        'Barley grain,Tarn Mill,50 lb,11,2026-03-01',
        'Barley grain,Tarn Mill,50 lb,10,2026-01-01',
        'Barley grain,Tarn Mill,50 lb,10,2026-02-01',
      ]),
    )
    expect(shown.rows.map(({ state }) => state)).toEqual(['changed', 'new', 'same'])
  })
})

describe('rows that cannot be used', () => {
  it.each([
    ['Moon dust,Tarn Mill,50 lb,1,2026-01-05', 'feed', 'unknownFeed', 'Moon dust'],
    [',Tarn Mill,50 lb,1,2026-01-05', 'feed', 'missingFeed', ''],
    ['Barley grain,,50 lb,1,2026-01-05', 'supplier', 'missingSupplier', ''],
    ['Barley grain,Tarn Mill,,1,2026-01-05', 'package', 'missingPackage', ''],
    ['Barley grain,Tarn Mill,50 sacks,1,2026-01-05', 'package', 'unknownUnit', '50 sacks'],
    ['Barley grain,Tarn Mill,fifty lb,1,2026-01-05', 'package', 'unknownUnit', 'fifty lb'],
    ['Barley grain,Tarn Mill,50,1,2026-01-05', 'package', 'unreadablePackage', '50'],
    ['Barley grain,Tarn Mill,0 lb,1,2026-01-05', 'package', 'unreadablePackage', '0 lb'],
    ['Barley grain,Tarn Mill,1 bu,1,2026-01-05', 'package', 'noTestWeight', '1 bu'],
    ['Barley grain,Tarn Mill,50 lb,,2026-01-05', 'price', 'missingPrice', ''],
    ['Barley grain,Tarn Mill,50 lb,call us,2026-01-05', 'price', 'unreadablePrice', 'call us'],
    ['Barley grain,Tarn Mill,50 lb,-5,2026-01-05', 'price', 'negativePrice', '-5'],
    ['Barley grain,Tarn Mill,50 lb,0.00,2026-01-05', 'price', 'zeroPrice', '0.00'],
    ['Barley grain,Tarn Mill,50 lb,9999999999,2026-01-05', 'price', 'priceTooLarge', '9999999999'],
    ['Barley grain,Tarn Mill,1 g,10001,2026-01-05', 'price', 'priceTooLarge', '10001'],
    ['Barley grain,Tarn Mill,50 lb,1,', 'date', 'missingDate', ''],
    ['Barley grain,Tarn Mill,50 lb,1,2026-02-30', 'date', 'unreadableDate', '2026-02-30'],
    ['Barley grain,Tarn Mill,50 lb,1,2099-01-01', 'date', 'futureDate', '2099-01-01'],
    ['Barley grain,Tarn Mill,50 lb,1,2026-01-05,and more', 'feed', 'tooManyCells', 'and more'],
    [`Barley grain,${'x'.repeat(121)},50 lb,1,2026-01-05`, 'supplier', 'textTooLong', 'x'.repeat(121)],
  ])('%s: %s %s', async (row, field, code, value) => {
    const good = 'Oats grain,Tarn Mill,50 lb,13.95,2026-01-05'
    const shown = await preview(list([good, row]))
    expect(shown.rows[0]?.state).toBe('new')
    expect(shown.rows[1]).toMatchObject({
      line: 3,
      state: 'error',
      cells: row.replace(/,+$/, '').split(','),
      problems: [{ field, code, value }],
    })
    expect(shown.rows[1]).not.toHaveProperty('read')
  })

  it('say everything that is wrong with them', async () => {
    const shown = await preview(list(['Moon dust,Tarn Mill,50 sacks,free,never']))
    expect(shown.rows[0]?.problems.map(({ code }) => code)).toEqual([
      'unknownFeed',
      'unknownUnit',
      'unreadablePrice',
      'unreadableDate',
    ])
  })

  it('name the line they repeat', async () => {
    const row = 'Barley grain,Tarn Mill,50 lb,12.80,2026-01-05'
    const shown = await preview(list([row, 'Barley Grain,TARN MILL,50 lbs,12.90,2026-01-05', row]))
    expect(shown.rows.map(({ state, problems }) => [state, problems[0]?.code, problems[0]?.value])).toEqual([
      ['new', undefined, undefined],
      ['error', 'duplicateRow', '2'],
      ['error', 'duplicateRow', '2'],
    ])
  })

  it('stay listed with the import while the good rows are applied', async () => {
    const answer = await apply(
      list(['Barley grain,Tarn Mill,50 lb,12.80,2026-01-05', 'Moon dust,Tarn Mill,50 lb,1,2026-01-05']),
    )
    expect(answer.body).toMatchObject({
      counts: { new: 1, error: 1 },
      leftOut: [{ line: 3, state: 'error', problems: [{ code: 'unknownFeed' }] }],
    })
    expect(await offers()).toHaveLength(1)
  })
})

describe('names matched by hand', () => {
  it('are suggested, taken, or leave their rows out', async () => {
    const rows = ['Barley grains,Tarn Mill,50 lb,12.80,2026-01-05', 'Cat food,Tarn Mill,50 lb,30,2026-01-05']
    const shown = await preview(list(rows))
    expect(shown.unknownFeeds.map(({ name }) => name)).toEqual(['Barley grains', 'Cat food'])
    const [suggestion] = shown.unknownFeeds[0]?.suggestions ?? []
    expect(suggestion?.name).toBe('Barley grain')
    const feedMatches = { 'Barley grains': suggestion?.feedId, 'Cat food': null }
    const matched = await preview(list(rows), { feedMatches })
    expect(matched.rows.map(({ state }) => state)).toEqual(['new', 'leftOut'])
    const answer = await apply(list(rows), { feedMatches })
    expect(answer.body).toMatchObject({
      counts: { new: 1, leftOut: 1 },
      leftOut: [{ line: 3, state: 'leftOut' }],
    })
  })
})

describe('a list without some columns', () => {
  it('takes supplier and date from the request', async () => {
    const more = { supplierName: 'Tarn Mill', date: '2026-01-05' }
    const text = 'feed,per,price\nBarley grain,ton,200\n'
    expect((await preview(text, more)).rows[0]).toMatchObject({
      read: { packageUnit: 'shortTon', packageQuantity: 1, ...more },
    })
  })

  it('says which are missing, and cannot be applied', async () => {
    const text = 'feed,price,colour\nBarley grain,12,gold\n'
    const shown = await preview(text)
    expect(shown.missingFields).toEqual(['supplier', 'package', 'date'])
    expect(shown.unusedColumns).toEqual(['colour'])
    const answer = await apply(text)
    expect(answer.body).toMatchObject({
      status: 400,
      errors: [{ path: 'mapping.columns.supplier', code: 'missing_column' }],
    })
  })

  it('is read as the corrected columns say', async () => {
    const text = 'a;b;c;d;e\nBarley grain;Tarn Mill;50 lb;12,80;6/1/2026\n'
    const mapping = {
      header: true,
      delimiter: ';',
      decimal: ',',
      dateOrder: 'dmy',
      columns: { feed: 0, supplier: 1, package: 2, price: 3, date: 4 },
    }
    expect((await preview(text, { mapping })).rows[0]).toMatchObject({
      read: { price: '12.8', date: '2026-01-06' },
    })
  })
})

describe('applying', () => {
  const text = list(['Barley grain,Tarn Mill,50 lb,12.80,2026-01-05'])

  it('twice with one key answers the same and changes nothing', async () => {
    const key = randomUUID()
    const first = await apply(text, {}, key)
    const second = await apply(text, {}, key)
    expect([first.status, second.status]).toEqual([201, 201])
    expect(second.body).toEqual(first.body)
    expect(((await api.get('/price-imports')).body as { items: PriceImport[] }).items).toHaveLength(1)
  })

  it('at the same moment with one key happens once', async () => {
    const key = randomUUID()
    const answers = await Promise.all([1, 2, 3].map(() => apply(text, {}, key)))
    expect(answers.map(({ status }) => status)).toEqual([201, 201, 201])
    expect(new Set(answers.map(({ body }) => (body as PriceImport).id)).size).toBe(1)
  })

  it('another list with a used key is refused', async () => {
    const key = randomUUID()
    await apply(text, {}, key)
    const other = await apply(list(['Oats grain,Tarn Mill,50 lb,1,2026-01-05']), {}, key)
    expect(other.body).toMatchObject({ status: 409, code: 'idempotency_mismatch' })
    expect(await offers()).toHaveLength(1)
  })

  it('needs a key', async () => {
    const { mapping } = await preview(text)
    const answer = await api.post('/price-imports', { text, mapping })
    expect(answer.body).toMatchObject({
      status: 400,
      errors: [{ path: 'header.Idempotency-Key', code: 'required' }],
    })
  })

  it('keeps nothing when the database fails half-way', async () => {
    const { sequelize } = t.database
    await sequelize.query(
      "CREATE TRIGGER refuse_price BEFORE INSERT ON prices FOR EACH ROW IF NEW.price = 66.6 THEN SIGNAL SQLSTATE '45000'; END IF",
    )
    try {
      const rows = [
        'Barley grain,Tarn Mill,50 lb,12.80,2026-01-05',
        'Oats grain,Tarn Mill,50 lb,66.60,2026-01-05',
      ]
      expect((await apply(list(rows))).body).toMatchObject({ status: 500, code: 'internal_error' })
    } finally {
      await sequelize.query('DROP TRIGGER refuse_price')
    }
    expect(await offers()).toEqual([])
    expect(((await api.get('/suppliers')).body as { items: unknown[] }).items).toEqual([])
    expect(((await api.get('/price-imports')).body as { items: unknown[] }).items).toEqual([])
  })
})

describe('files that are no price list', () => {
  it.each([
    { name: 'empty', text: '', status: 400, code: 'invalid_input' },
    { name: 'blank', text: '\n  \n', status: 422, code: 'unreadable_file', error: 'empty_file' },
    {
      name: 'binary',
      text: 'PK\u0003\u0004\u0000\u0000',
      status: 422,
      code: 'unreadable_file',
      error: 'binary_file',
    },
    { name: 'too large', text: 'x'.repeat(2_000_001), status: 413, code: 'too_large' },
    { name: 'far too large', text: 'x'.repeat(10_000_000), status: 413, code: 'too_large' },
  ])('are refused: $name', async ({ text, status, code, error }) => {
    for (const path of ['/price-imports/preview', '/price-imports']) {
      const mapping = {
        header: true,
        delimiter: ',',
        decimal: '.',
        dateOrder: 'ymd',
        columns: { feed: 0, supplier: 1, package: 2, price: 3, date: 4 },
      }
      const answer = await api.post(path, { text, mapping }).set('Idempotency-Key', randomUUID())
      expect(answer.body).toMatchObject({ status, code, ...(error ? { errors: [{ code: error }] } : {}) })
    }
    expect(((await api.get('/price-imports')).body as { items: unknown[] }).items).toEqual([])
  })

  it('are shown as what they are: prose has no columns and no good row', async () => {
    const shown = await preview('Dear keeper,\nthe prices went up again.\nYours, the mill\n')
    expect(shown.missingFields.length).toBeGreaterThan(0)
    expect(shown.rows.every(({ state }) => state === 'error')).toBe(true)
  })
})

describe('the example lists', () => {
  const read = (name: string) => readFileSync(`data/price-lists/${name}.csv`, 'utf8')

  it.each([
    ['tarn-hollow-mill', { supplierName: 'Tarn Hollow Mill' }],
    ['ashgarth-farm-supply', { supplierName: 'Ashgarth Farm Supply' }],
    ['quillet-feed-store', {}],
  ])('%s is recognised, column by column', async (name, more) => {
    const shown = await preview(read(name), more)
    expect(shown.missingFields).toEqual([])
    const codes = new Set(shown.rows.flatMap(({ problems }) => problems.map(({ code }) => code)))
    // This farm keeps only a few of the feeds; nothing else is wrong.
    expect([...codes].filter((code) => code !== 'unknownFeed' && code !== 'noTestWeight')).toEqual([])
  })

  it('are small beside the longest list, which is read and applied too', async () => {
    const row = (at: number) => `Barley grain,Supplier ${at % 700},${1 + (at % 3)} kg,${1 + at},2026-01-05`
    const rows = Array.from({ length: 19_999 }, (_, at) => row(at))
    const shown = await preview(list(rows))
    expect(shown.counts).toMatchObject({ new: 2100, error: 17_899 })
    expect((await apply(list(rows.slice(0, 2500)))).body).toMatchObject({ counts: { new: 2100, error: 400 } })
  })
})
