import type { ImportPreview, PriceImport } from '@maslin/shared'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { startTestApp, type TestApp } from '../support/app'
import { farmApi, type FarmApi } from '../support/farmApi'
import { signUp } from '../support/people'

let t: TestApp
let api: FarmApi
beforeAll(async () => {
  t = await startTestApp()
  const owner = await signUp(t)
  api = farmApi(owner, owner.farmId)
  await api.makeFeed({ name: 'Barley grain' })
})
afterAll(() => t.close())

const heading = 'feed,supplier,package,price,date\n'

describe('a list made to keep the server busy', () => {
  // Each of these held the server for minutes and more while every cell was tried in every way.
  it.each([
    ['a package of spaces', `${heading}Barley grain,Mill,per${' '.repeat(20_000)}!,10,2026-01-02\n`],
    ['a price of spaces', `${heading}Barley grain,Mill,50 lb,1${' '.repeat(300_000)}!,2026-01-02\n`],
    ['a price of letters', `${heading}Barley grain,Mill,50 lb,${'a'.repeat(300_000)}1,2026-01-02\n`],
    ['a heading of spaces', `feed${' '.repeat(300_000)}1,package,price\nx,y,z\n`],
    ['a row of half a million cells', `${heading}${'x,'.repeat(500_000)}\n`],
    ['a heading of half a million cells', `${'rye,'.repeat(450_000)}\nx\n`],
  ])('%s is answered', { timeout: 10_000 }, async (_name, text) => {
    const answer = await api.post('/price-imports/preview', { text })
    expect(answer.status, JSON.stringify(answer.body).slice(0, 500)).toBe(200)
    expect((answer.body as ImportPreview).counts).toMatchObject({ new: 0, changed: 0 })
  })

  it('says what is wrong with a unit that is a word of the language', async () => {
    const text = 'feed,supplier,quantity,unit,price,date\nBarley grain,Mill,50,constructor,10,2026-01-02\n'
    const { rows } = (await api.post('/price-imports/preview', { text })).body as ImportPreview
    expect(rows[0]).toMatchObject({
      state: 'error',
      problems: [{ field: 'unit', code: 'unknownUnit', value: 'constructor' }],
    })
  })
})

describe('a list that the reader might leave before its end', () => {
  it('is refused, not read in part', async () => {
    const row = 'Barley grain,Mill,50 lb,10,2026-01-02\n'
    const text = `${heading}${row}${'\n'.repeat(45_000)}${row}`
    const answer = await api.post('/price-imports/preview', { text })
    expect(answer.body).toMatchObject({ status: 413, code: 'too_large' })
  })
})

describe('names that the database holds for equal', () => {
  it('are one supplier, whichever way the list spells it', async () => {
    await api.makeSupplier('Sørlie Mill')
    const text = `${heading}${[
      'Barley grain,Sorlie Mill,50 lb,10,2026-01-02',
      'Barley grain,Sør\u200blie Mill,25 kg,11,2026-01-02',
      'Barley grain,Strauß,50 lb,12,2026-01-02',
      'Barley grain,Strauss,25 kg,13,2026-01-02',
    ].join('\n')}\n`
    const { mapping } = (await api.post('/price-imports/preview', { text })).body as ImportPreview
    const applied = await api.post('/price-imports', { text, mapping }).set('Idempotency-Key', 'equal-names')
    expect(applied.status, JSON.stringify(applied.body)).toBe(201)
    const { items } = (await api.get('/suppliers')).body as { items: { name: string }[] }
    expect(items.map(({ name }) => name)).toEqual(['Sørlie Mill', 'Strauss'])
  })
})

it('answers no more left-out rows at once than one list may have', async () => {
  const wrong = 'Unknown feed,Mill,50 lb,10,2026-01-02\n'.repeat(9000)
  const fileNames = ['first.csv', 'second.csv', 'third.csv']
  for (const [at, fileName] of fileNames.entries()) {
    const text = `${heading}${wrong}Barley grain,Long Mill,50 lb,${at + 1},2026-02-02\n`
    const { mapping } = (await api.post('/price-imports/preview', { text })).body as ImportPreview
    const applied = api.post('/price-imports', { text, mapping, fileName })
    expect((await applied.set('Idempotency-Key', `long-list-${at}`)).status).toBe(201)
  }
  const { items } = (await api.get('/price-imports')).body as { items: PriceImport[] }
  expect(items.map(({ fileName }) => fileName)).toEqual(['third.csv', 'second.csv'])
})
