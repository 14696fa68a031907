import { readFileSync } from 'node:fs'
import {
  animalSchema,
  feedCreateSchema,
  moneySchema,
  nutrientIds,
  packageUnitSchema,
  parseWeight,
  roleSchema,
} from '@maslin/shared'
import { lookUpRequirement, suggestedFeeds } from '@maslin/solver'
import Papa from 'papaparse'
import { describe, expect, it } from 'vitest'
import { firstMixDefaults, readJson, readTable, requirementTables } from './tables'

interface DemoFarm {
  name: string
  members: { ref: string; name: string; email: string; role: string }[]
  bookFeeds: string[]
  ownFeeds: {
    ref: string
    name: string
    class: string
    forage: boolean
    dryMatter: number
    source: string
    status: string
    values: Record<string, number>
  }[]
  suppliers: { name: string }[]
  offers: {
    supplier: string
    feed: string
    packageQuantity: number
    packageUnit: string
    prices: { date: string; price: string }[]
  }[]
  groups: { name: string; heads: number; animal: unknown; baseDiet: { feed: string }[] }[]
}

const { farms } = readJson('demo/farms.json') as { farms: DemoFarm[] }
const book = readTable('feeds.csv')
const bookKeys = new Set(book.map((feed) => feed.key))
const names = new Set(book.map((feed) => feed.name))
const tables = requirementTables()

describe.each(farms)('demo farm $name', (farm) => {
  const known = new Set([...farm.bookFeeds, ...farm.ownFeeds.map((feed) => feed.ref)])

  it('invents its people at addresses that reach nobody', () => {
    for (const { email, role } of farm.members) {
      expect(email).toMatch(/@example\.test$/)
      roleSchema.parse(role)
    }
  })

  it('takes its feeds from the book and its own analyses from the nutrient list', () => {
    for (const key of farm.bookFeeds) expect(bookKeys).toContain(key)
    for (const { name, class: feedClass, forage, dryMatter, values, source, status } of farm.ownFeeds) {
      for (const nutrient of Object.keys(values)) expect(nutrientIds).toContain(nutrient)
      feedCreateSchema.parse({
        name,
        class: feedClass,
        forage,
        dryMatter,
        values: Object.fromEntries(
          Object.entries(values).map(([nutrient, value]) => [nutrient, { value, source, status }]),
        ),
      })
    }
  })

  it('prices feeds it keeps, from suppliers it knows, in rising dates up to 24 November 2026', () => {
    const suppliers = farm.suppliers.map((supplier) => supplier.name)
    for (const offer of farm.offers) {
      expect(known).toContain(offer.feed)
      expect(suppliers).toContain(offer.supplier)
      packageUnitSchema.parse(offer.packageUnit)
      const dates = offer.prices.map((price) => price.date)
      expect([...dates].sort()).toEqual(dates)
      expect(dates.at(-1)?.localeCompare('2026-11-24')).toBeLessThanOrEqual(0)
      for (const { price } of offer.prices) moneySchema.parse(price)
    }
  })

  it('keeps groups whose needs the tables know', () => {
    for (const group of farm.groups) {
      const found = lookUpRequirement(tables, animalSchema.parse(group.animal))
      expect(found?.outsideTable, group.name).toBe(false)
      for (const item of group.baseDiet) expect(known).toContain(item.feed)
    }
  })
})

describe('defaults of a first mix', () => {
  it('suggest book feeds only, for every stage of sheep and goats', () => {
    const defaults = firstMixDefaults()
    for (const stage of tables.stages) {
      const found = suggestedFeeds(defaults, stage)
      expect(found?.males, `${stage.class} ${stage.stage}`).toBe(stage.male)
      for (const key of [...(found?.feeds ?? []), ...(found?.forages ?? [])]) expect(bookKeys).toContain(key)
    }
  })
})

describe('example price lists', () => {
  const read = (name: string) => {
    const text = readFileSync(new URL(`../../data/price-lists/${name}`, import.meta.url), 'utf8')
    return Papa.parse<string[]>(text.trim()).data.slice(1)
  }

  it.each(['tarn-hollow-mill.csv', 'tarn-hollow-mill-new-prices.csv', 'ashgarth-farm-supply.csv'])(
    '%s names book feeds, packages and prices that can be read',
    (name) => {
      for (const [feed = '', weight = '', price = ''] of read(name)) {
        expect(names).toContain(feed)
        expect(parseWeight(weight).ok, weight).toBe(true)
        expect(Number(price.replace(',', '.'))).toBeGreaterThan(0)
      }
    },
  )

  it('brings new prices for some rows and the same for others', () => {
    const old = read('tarn-hollow-mill.csv')
    const changed = read('tarn-hollow-mill-new-prices.csv').filter((row, at) => row[2] !== old[at]?.[2])
    expect(changed.length).toBeGreaterThan(2)
    expect(changed.length).toBeLessThan(old.length)
  })

  it('has a list with good and bad rows', () => {
    const rows = read('quillet-feed-store-with-errors.csv')
    const good = rows.filter(
      ([feed = '', , quantity = '', unit = '', price = '']) =>
        names.has(feed) && parseWeight(`${quantity} ${unit}`).ok && Number(price) > 0 && Number(quantity) > 0,
    )
    expect(good.length).toBeGreaterThan(1)
    expect(good.length).toBeLessThan(rows.length - 4)
  })
})
