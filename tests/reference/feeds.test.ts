import { execFileSync } from 'node:child_process'
import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { feedClassSchema, nutrientIds, valueStatusSchema, type NutrientId } from '@maslin/shared'
import { assumedHigh, withDerivedNutrients } from '@maslin/solver'
import { describe, expect, it } from 'vitest'
import { assumedHighs, readTable } from './tables'

const feeds = readTable('feeds.csv')
const values = readTable('feed-values.csv')
const sources = new Set(readTable('sources.csv').map((row) => row.key))
const valueOf = (feed: string, nutrient: NutrientId) =>
  values.find((row) => row.feed_key === feed && row.nutrient === nutrient)
const number = (feed: string, nutrient: NutrientId) => Number(valueOf(feed, nutrient)?.value ?? NaN)

describe('the book of feeds', () => {
  it('holds at least 90 feeds, each once, with known classes, sources and statuses', () => {
    expect(feeds.length).toBeGreaterThanOrEqual(90)
    expect(new Set(feeds.map((feed) => feed.key)).size).toBe(feeds.length)
    for (const feed of feeds) {
      expect(feed.key).toMatch(/^[a-z0-9]+(-[a-z0-9]+)*$/)
      feedClassSchema.parse(feed.class)
      valueStatusSchema.parse(feed.dm_status)
      expect(sources, feed.key).toContain(feed.dm_source_key)
      expect(Number(feed.dm_pct)).toBeGreaterThan(10)
      expect(Number(feed.dm_pct)).toBeLessThanOrEqual(100)
    }
  })

  it('names a source and a status for every value, once per nutrient and feed', () => {
    const keys = new Set(feeds.map((feed) => feed.key))
    const ids = new Set<string>(nutrientIds)
    const seen = new Set<string>()
    for (const row of values) {
      const id = `${row.feed_key} ${row.nutrient}`
      expect(seen, id).not.toContain(id)
      seen.add(id)
      expect(keys, id).toContain(row.feed_key)
      expect(ids, id).toContain(row.nutrient)
      expect(sources, id).toContain(row.source_key)
      expect(['read', 'memory', 'practice', 'derived'], id).toContain(row.status)
      expect(Number(row.value), id).toBeGreaterThanOrEqual(0)
      if (row.sd) expect(sources, id).toContain(row.sd_source_key)
    }
  })

  it('lists no pure trace salts, which poison in grams', () => {
    for (const feed of feeds)
      expect(feed.name?.toLowerCase()).not.toMatch(/selenite|copper sul|cobalt sul|iodate/)
  })

  it('marks what the animal rules look at', () => {
    const flag = (key: string, column: string) => feeds.find((feed) => feed.key === key)?.[column]
    expect(flag('salt-trace-mineral-copper', 'added_copper')).toBe('yes')
    expect(flag('sheep-mineral', 'added_copper')).toBe('no')
    expect(flag('urea', 'npn_fraction')).toBe('1')
    expect(flag('bone-meal-steamed', 'ruminant_origin')).toBe('yes')
    expect(flag('whey-dried', 'ruminant_origin')).toBe('exempt')
    expect(flag('corn-silage', 'forage')).toBe('yes')
  })
})

describe('published values', () => {
  it.each([
    // Feedipedia and INRAE-CIRAD-AFZ tables, percent of dry matter unless said
    ['wheat-bran', 'ash', 56],
    ['sunflower-meal-with-hulls', 'crudeProtein', 313],
    ['sunflower-meal-with-hulls', 'neutralDetergentFiber', 464],
    ['faba-beans', 'crudeProtein', 311],
    ['faba-beans', 'starch', 431],
    ['wheat-straw', 'sodium', 0.1],
    ['beet-pulp-dried', 'copper', 5],
    // Nutrient variability of distillers grains, 27 plants
    ['ddgs-corn-reduced-oil', 'crudeFat', 53.6],
    // Stoichiometry of sodium chloride
    ['salt', 'sodium', 393.4],
    ['salt', 'chloride', 606.6],
  ] as const)('%s %s is %d', (feed, nutrient, value) => {
    expect(number(feed, nutrient)).toBe(value)
    expect(valueOf(feed, nutrient)?.status).toBe('read')
  })

  it('puts as-fed tables on dry matter: timothy hay with 8.6 % protein at 88.9 % dry matter', () => {
    expect(number('timothy-hay-mid-bloom', 'crudeProtein')).toBeCloseTo((8.6 / 88.9) * 1000, 3)
    expect(number('orchardgrass-fresh', 'totalDigestibleNutrients')).toBeCloseTo((15.1 / 22.6) * 1000, 2)
  })

  it('puts pig and poultry columns on dry matter: corn with 3,420 kcal/kg and 0.26 % lysine as fed', () => {
    expect(number('corn-grain', 'metabolizableEnergySwine')).toBeCloseTo(3.42 / 0.88, 4)
    expect(number('corn-grain', 'lysine')).toBeCloseTo(2.6 / 0.88, 4)
  })

  it('knows a bushel by its test weight in kg: corn 56 lb, barley 48, oats 32, wheat 60', () => {
    const weight = (key: string) => Number(feeds.find((feed) => feed.key === key)?.test_weight_kg_per_bushel)
    for (const [key, pounds] of [
      ['corn-grain', 56],
      ['barley-grain', 48],
      ['oats-grain', 32],
      ['wheat-grain', 60],
    ] as const) {
      expect(weight(key)).toBeCloseTo(pounds * 0.45359237, 3)
    }
  })

  it('leaves unknown values out: no energy for faba beans, no copper for limestone', () => {
    expect(valueOf('faba-beans', 'metabolizableEnergy')).toBeUndefined()
    expect(valueOf('limestone', 'copper')).toBeUndefined()
  })
})

describe('derived values', () => {
  it('agree with the equations for every feed', () => {
    for (const feed of feeds) {
      const rows = values.filter((row) => row.feed_key === feed.key)
      const known = Object.fromEntries(
        rows
          .filter((row) => row.status !== 'derived')
          .map((row) => [
            row.nutrient,
            { value: Number(row.value), status: valueStatusSchema.parse(row.status) },
          ]),
      )
      const derived = withDerivedNutrients(known, (value) => ({ value, status: 'derived' as const }))
      for (const row of rows.filter((entry) => entry.source_key === 'energy-from-tdn')) {
        const again = derived[row.nutrient as NutrientId]?.value ?? NaN
        expect(Math.abs(again - Number(row.value)), `${feed.key} ${row.nutrient}`).toBeLessThan(2e-4)
      }
      for (const row of rows.filter((entry) => entry.source_key === 'nfc-by-difference')) {
        expect(derived.nonFiberCarbohydrate?.value, feed.key).toBeCloseTo(Number(row.value), 2)
      }
    }
  })
})

describe('assumed highs', () => {
  const script = fileURLToPath(new URL('../../data/make-assumed-highs.mjs', import.meta.url))

  it('are what the script makes of the feed files', () => {
    expect(() => execFileSync(process.execPath, [script, '--check'])).not.toThrow()
  })

  it('are the 90th percentile of the class, worked out here for copper of grains', () => {
    const grains = new Set(feeds.filter((feed) => feed.class === 'grain').map((feed) => feed.key))
    const known = values
      .filter((row) => row.nutrient === 'copper' && grains.has(row.feed_key ?? ''))
      .map((row) => Number(row.value))
      .sort((a, b) => a - b)
    const at = 0.9 * (known.length - 1)
    const low = known[Math.floor(at)] ?? NaN
    const high = known[Math.ceil(at)] ?? NaN
    const row = assumedHigh(assumedHighs(), 'grain', 'copper')
    expect(row?.value).toBeCloseTo(low + (high - low) * (at - Math.floor(at)), 4)
    expect(row).toMatchObject({ class: 'grain', n: known.length })
    expect(row?.name).toBe('90th percentile of the known values of class grain')
  })

  it('fall back to the whole library where a class knows fewer than five values', () => {
    expect(assumedHigh(assumedHighs(), 'molasses', 'copper')?.class).toBe('any')
  })

  it('rest on at least five values in a class', () => {
    const text = readFileSync(new URL('../../data/assumed-highs.csv', import.meta.url), 'utf8')
    expect(text.split('\n')[0]).toBe('class,nutrient,value,n,name')
    for (const row of assumedHighs()) if (row.class !== 'any') expect(row.n).toBeGreaterThanOrEqual(5)
  })
})
