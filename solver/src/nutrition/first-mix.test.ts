import { limitSchema, type Limit, type Requirement } from '@maslin/shared'
import { describe, expect, it } from 'vitest'
import book from '../../../data/first-mix.json'
import { suggestedFeeds, type FirstMixDefaults } from './defaults'
import { ceilingLimits, firstMixLimits, type FirstMixFeed, type FirstMixGroup } from './first-mix'
import { defaultSubstitution, fibreCapIntake } from './forage'

const defaults = book as FirstMixDefaults

const need = (nutrient: Requirement['needs'][number]['nutrient'], perHeadDay: number) =>
  ({ nutrient, kind: 'min', perHeadDay, source: 'a table', status: 'read' }) as const
const requirement: Requirement = {
  system: 'NRC 1985',
  intakeDryMatterKg: 2,
  needs: [
    need('totalDigestibleNutrients', 1240),
    need('metabolizableEnergy', 4.4),
    need('crudeProtein', 214),
    need('calcium', 7.6),
    need('phosphorus', 4.5),
    need('vitaminA', 5950),
  ],
  source: 'a table',
  status: 'read',
  notes: [],
}
const ewes: FirstMixGroup = { species: 'sheep', phase: 'latePregnancy', male: false }
const feed = (id: string, more: Partial<FirstMixFeed> = {}): FirstMixFeed => ({
  id,
  class: 'grain',
  dryMatter: 0.9,
  values: {},
  ...more,
})
const byId = (limits: Limit[]) => Object.fromEntries(limits.map((limit) => [limit.id, limit]))
/** limitSchema wants ids as the database gives them; the rest of a limit is checked as it is. */
const checked = (limits: Limit[]) => {
  for (const limit of limits) {
    if (limit.kind === 'feeds' && limit.of.by === 'feeds') continue
    expect(limitSchema.safeParse(limit).success, limit.id).toBe(true)
  }
  return byId(limits)
}

describe('firstMixLimits', () => {
  it('sets eight rows and the intake, one energy row among them', () => {
    const limits = firstMixLimits(defaults, ewes, requirement, { basis: 'perHead' })
    expect(limits.map(({ id }) => id)).toEqual([
      'energy',
      'protein',
      'calcium',
      'phosphorus',
      'calciumToPhosphorus',
      'forageShare',
      'nonFiberCarbohydrate',
      'fat',
      'intake',
    ])
    const rows = checked(limits)
    expect(rows.energy).toMatchObject({
      nutrient: 'metabolizableEnergy',
      measure: 'perHeadDay',
      min: 4.4,
      source: 'a table',
    })
    expect(rows.calciumToPhosphorus).toMatchObject({ min: 1.5 })
    expect(rows.calciumToPhosphorus?.max).toBeUndefined()
    expect(rows.forageShare).toMatchObject({ min: 0.4, within: 'diet', measure: 'shareOfDryMatter' })
    expect(rows.fat).toMatchObject({ max: 60, measure: 'perKgDryMatter' })
    expect(rows.intake).toMatchObject({ min: 1.5, max: 2 })
    for (const limit of limits) expect(limit.source, limit.id).not.toBe('')
  })

  it('puts the needs of a batch as concentrations at the expected intake, without an intake row', () => {
    const rows = checked(firstMixLimits(defaults, ewes, requirement, { basis: 'batch' }))
    expect(rows.energy).toMatchObject({ measure: 'perKgDryMatter', min: 2.2 })
    expect(rows.protein).toMatchObject({ measure: 'perKgDryMatter', min: 107 })
    expect(rows.intake).toBeUndefined()
  })

  it('takes starch where every feed knows it, else NFC', () => {
    const starchy = [
      feed('a', { values: { starch: { value: 500 } } }),
      feed('b', { values: { starch: { value: 20 } } }),
    ]
    expect(
      byId(firstMixLimits(defaults, ewes, requirement, { basis: 'perHead', feeds: starchy })).starch,
    ).toMatchObject({
      max: 200,
    })
    const mixed = [...starchy, feed('c')]
    const rows = byId(firstMixLimits(defaults, ewes, requirement, { basis: 'perHead', feeds: mixed }))
    expect(rows.starch).toBeUndefined()
    expect(rows.nonFiberCarbohydrate).toMatchObject({ max: 400 })
  })

  it('guards males against stones: Ca:P from 2 to 4 and phosphorus at most 0.40 %', () => {
    const males: FirstMixGroup = { species: 'sheep', phase: 'finishing', male: true }
    const rows = checked(firstMixLimits(defaults, males, requirement, { basis: 'perHead' }))
    expect(rows.calciumToPhosphorus).toMatchObject({ min: 2, max: 4 })
    expect(rows.phosphorus).toMatchObject({ min: 4.5, measure: 'perHeadDay' })
    expect(rows.phosphorus?.max).toBeUndefined()
    expect(rows.phosphorusMost).toMatchObject({ max: 4, measure: 'perKgDryMatter', status: 'practice' })
    expect(rows.forageShare).toMatchObject({ min: 0.15 })
  })

  it('does not cap phosphorus below the need', () => {
    const hungry = { ...requirement, intakeDryMatterKg: 1 }
    const males: FirstMixGroup = { species: 'sheep', phase: 'finishing', male: true }
    const rows = checked(firstMixLimits(defaults, males, hungry, { basis: 'perHead' }))
    expect(rows.phosphorusMost).toBeUndefined()
  })

  it('raises the protein of goats to the floor, with the floor as its source', () => {
    const does: FirstMixGroup = { species: 'goat', phase: 'latePregnancy', male: false }
    const rows = checked(firstMixLimits(defaults, does, requirement, { basis: 'perHead' }))
    expect(rows.protein).toMatchObject({ min: 240, status: 'practice' })
    const rich = { ...requirement, needs: [need('crudeProtein', 300)] }
    expect(byId(firstMixLimits(defaults, does, rich, { basis: 'perHead' })).protein).toMatchObject({
      min: 300,
      status: 'read',
    })
  })

  it('gives no row for a need that is not known', () => {
    const rows = byId(firstMixLimits(defaults, ewes, { ...requirement, needs: [] }, { basis: 'perHead' }))
    expect(rows.energy).toBeUndefined()
    expect(rows.calcium).toBeUndefined()
    expect(rows.calciumToPhosphorus).toBeDefined()
  })

  it('caps the intake beside hay at the table, or a fifth above what is eaten of the hay alone', () => {
    const beside = (baseIntakeKg: number) =>
      byId(firstMixLimits(defaults, ewes, requirement, { basis: 'besideForage', baseIntakeKg })).intake
    expect(beside(1.4)).toMatchObject({ max: 2 })
    expect(beside(1.4)?.min).toBeUndefined()
    expect(beside(1.9)).toMatchObject({ max: 1.9 * 1.2, status: 'practice' })
    expect(beside(2.1)).toMatchObject({ max: 2.1 * 1.2, status: 'practice' })
    expect(beside(2.1)?.min).toBeUndefined()
  })

  it('fixes the loose mineral of the species at its rate', () => {
    const mineral = feed('mineral-1', { bookKey: 'sheep-mineral', class: 'premix', dryMatter: 0.97 })
    const perHead = byId(
      firstMixLimits(defaults, ewes, requirement, { basis: 'perHead', feeds: [mineral] }),
    ).mineral
    expect(perHead).toMatchObject({ measure: 'kgAsFed', min: 0.01, max: 0.01 })
    const batch = byId(
      firstMixLimits(defaults, ewes, requirement, { basis: 'batch', feeds: [mineral] }),
    ).mineral
    expect(batch).toMatchObject({ measure: 'shareOfDryMatter' })
    expect(batch?.min).toBeCloseTo((0.01 * 0.97) / 2, 12)
  })
})

describe('the loose mineral of a small animal', () => {
  const kids: FirstMixGroup = { species: 'goat', phase: 'growing', male: true }
  const small = { ...requirement, intakeDryMatterKg: 0.6 }
  const mineral = feed('mineral-1', { bookKey: 'goat-mineral', class: 'premix', dryMatter: 0.96 })

  it('is 0.8 % of what it eats, not the rate of a grown one', () => {
    const rows = byId(firstMixLimits(defaults, kids, small, { basis: 'perHead', feeds: [mineral] }))
    expect(rows.mineral?.min).toBeCloseTo(0.005, 12)
    expect(rows.mineral?.max).toBeCloseTo(0.005, 12)
    const batch = byId(firstMixLimits(defaults, kids, small, { basis: 'batch', feeds: [mineral] }))
    expect(batch.mineral).toMatchObject({ min: 0.008, max: 0.008 })
  })

  it('brings no more than 0.3 mg added selenium per kg of diet, whatever the animal eats', () => {
    for (const intakeDryMatterKg of [0.4, 0.6, 1.2, 2, 3.5]) {
      const rows = byId(
        firstMixLimits(defaults, kids, { ...small, intakeDryMatterKg }, { basis: 'batch', feeds: [mineral] }),
      )
      expect((rows.mineral?.max ?? NaN) * 30).toBeLessThanOrEqual(0.3)
    }
  })
})

describe('ceilingLimits', () => {
  const hulls = feed('hulls', { class: 'byProduct' })
  const limestone = feed('lime', { class: 'mineral', bookKey: 'limestone' })
  const salt = feed('nacl', { class: 'mineral', bookKey: 'salt' })

  it('caps each by-product, and molasses', () => {
    const feeds = [hulls, feed('bran', { class: 'byProduct' }), feed('m', { class: 'molasses' })]
    const rows = byId(ceilingLimits(defaults, ewes, feeds))
    expect(Object.keys(rows)).toEqual(['byProducts-hulls', 'byProducts-bran', 'molasses'])
    expect(rows['byProducts-hulls']).toMatchObject({ max: 0.2, within: 'diet' })
    expect(rows.molasses).toMatchObject({ max: 0.05, measure: 'shareAsFed' })
  })

  it('keeps minerals together and salt from filling a mix', () => {
    const rows = byId(ceilingLimits(defaults, ewes, [limestone, salt]))
    expect(Object.keys(rows)).toEqual(['minerals', 'salt-nacl'])
    expect(rows.minerals).toMatchObject({ of: { by: 'class', class: 'mineral' }, max: 0.015, within: 'diet' })
    expect(rows['salt-nacl']).toMatchObject({ of: { by: 'feeds', feedIds: ['nacl'] }, max: 0.005 })
    expect(byId(ceilingLimits(defaults, { phase: 'finishing' }, [limestone])).minerals?.max).toBe(0.02)
  })

  it('lets no proposal loosen minerals, salt or the rate of the loose mineral', () => {
    const loose = feed('loose', { bookKey: 'sheep-mineral', class: 'premix' })
    const feeds = [limestone, salt, loose, hulls]
    const fixed = firstMixLimits(defaults, ewes, requirement, { basis: 'perHead', feeds }).filter(
      ({ negotiable }) => !negotiable,
    )
    expect(fixed.map(({ id }) => id)).toEqual(['mineral', 'minerals', 'salt-nacl'])
  })

  it('holds sulphur where a feed has more than the diet may, 0.3 % on grain and 0.4 % else', () => {
    const distillers = feed('d', { values: { sulfur: { value: 9 } } })
    expect(byId(ceilingLimits(defaults, ewes, [distillers])).sulfur).toMatchObject({ max: 4 })
    expect(byId(ceilingLimits(defaults, { phase: 'finishing' }, [distillers])).sulfur).toMatchObject({
      max: 3,
    })
    expect(ceilingLimits(defaults, ewes, [feed('b', { values: { sulfur: { value: 2 } } })])).toEqual([])
  })

  it('stands behind the first rows, only for feeds of the mix', () => {
    const limits = firstMixLimits(defaults, ewes, requirement, {
      basis: 'perHead',
      feeds: [hulls, limestone],
    })
    expect(checked(limits).minerals).toMatchObject({ max: 0.015 })
    expect(limits.slice(-2).map(({ id }) => id)).toEqual(['minerals', 'byProducts-hulls'])
  })
})

describe('forage', () => {
  it('substitution follows the phase, and in lactation the fibre of the forage', () => {
    expect(defaultSubstitution(defaults, 'latePregnancy', 600).value).toBe(0.63)
    expect(defaultSubstitution(defaults, 'maintenance').value).toBe(0.6)
    expect(defaultSubstitution(defaults, 'lactation', 700).value).toBe(0.42)
    expect(defaultSubstitution(defaults, 'lactation', 650).value).toBe(0.42)
    expect(defaultSubstitution(defaults, 'lactation', 600).value).toBe(0.65)
    expect(defaultSubstitution(defaults, 'lactation', 500).value).toBe(0.89)
    expect(defaultSubstitution(defaults, 'lactation').value).toBe(0.65)
  })

  it('fills the gut with fibre: 70 kg, 56 % NDF', () => {
    expect(fibreCapIntake(defaults, 70, 'latePregnancy', 560)).toBeCloseTo(1.5, 12)
    expect(fibreCapIntake(defaults, 70, 'lactation', 560)).toBeCloseTo(2.25, 12)
    expect(fibreCapIntake(defaults, 70, 'maintenance', undefined)).toBeUndefined()
  })
})

describe('suggestedFeeds', () => {
  it('gives grown males hay and mineral, no grain', () => {
    const found = suggestedFeeds(defaults, { species: 'sheep', phase: 'maintenance', male: true })
    expect(found?.feeds).not.toContain('barley-grain')
    expect(found?.feeds).toContain('sheep-mineral')
  })

  it('never suggests the goat mineral, which holds copper, for sheep', () => {
    for (const entry of defaults.suggestedFeeds.filter(({ species }) => species === 'sheep')) {
      expect(entry.feeds).not.toContain('goat-mineral')
    }
  })

  it('knows nothing for species it has no suggestion for', () => {
    expect(suggestedFeeds(defaults, { species: 'pig', phase: 'growing', male: false })).toBeUndefined()
  })
})
