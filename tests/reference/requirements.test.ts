import { lookUpRequirement, type RequirementQuery } from '@maslin/solver'
import type { NutrientId } from '@maslin/shared'
import { describe, expect, it } from 'vitest'
import { requirementTables } from './tables'

const tables = requirementTables()
const ewe = (
  stage: string,
  bodyWeightKg: number,
  more: Partial<RequirementQuery> = {},
): RequirementQuery => ({
  species: 'sheep',
  class: 'ewe',
  stage,
  bodyWeightKg,
  ...more,
})
const doe = (
  stage: string,
  bodyWeightKg: number,
  more: Partial<RequirementQuery> = {},
): RequirementQuery => ({
  ...ewe(stage, bodyWeightKg, more),
  species: 'goat',
  class: 'doe',
})

function lookUp(query: RequirementQuery) {
  const found = lookUpRequirement(tables, query)
  if (!found) throw new Error(`nothing found for ${query.class} ${query.stage}`)
  const amount = (nutrient: NutrientId) => found.needs.find((need) => need.nutrient === nutrient)?.perHeadDay
  return { ...found, amount }
}

describe('NRC 1985 (Sheep), Table 1, at its own weights', () => {
  it.each([
    // weight, intake kg, TDN g, ME Mcal, protein g, Ca g, P g, vitamin A IU, vitamin E IU
    [50, 1.0, 550, 2.0, 95, 2.0, 1.8, 2350, 15],
    [60, 1.1, 610, 2.2, 104, 2.3, 2.1, 2820, 16],
    [70, 1.2, 660, 2.4, 113, 2.5, 2.4, 3290, 18],
    [80, 1.3, 720, 2.6, 122, 2.7, 2.8, 3760, 20],
    [90, 1.4, 780, 2.8, 131, 2.9, 3.1, 4230, 21],
  ])('maintenance of a %d kg ewe', (weight, intake, tdn, me, protein, calcium, phosphorus, a, e) => {
    const found = lookUp(ewe('maintenance', weight))
    expect(found.intakeDryMatterKg).toBe(intake)
    expect(found.amount('totalDigestibleNutrients')).toBe(tdn)
    expect(found.amount('metabolizableEnergy')).toBe(me)
    expect(found.amount('crudeProtein')).toBe(protein)
    expect(found.amount('calcium')).toBe(calcium)
    expect(found.amount('phosphorus')).toBe(phosphorus)
    expect(found.amount('vitaminA')).toBe(a)
    expect(found.amount('vitaminE')).toBe(e)
    expect(found).toMatchObject({ system: 'NRC 1985', status: 'read', outsideTable: false })
    expect(found.source).toContain('NRC Nutrient Requirements of Sheep')
  })

  it.each([
    [50, 1.6, 3.4, 150, 5.3],
    [70, 1.8, 3.8, 164, 5.7],
    [90, 2.0, 4.2, 177, 6.1],
  ])('flushing of a %d kg ewe', (weight, intake, me, protein, calcium) => {
    const found = lookUp(ewe('flushing', weight))
    expect(found.intakeDryMatterKg).toBe(intake)
    expect(found.amount('metabolizableEnergy')).toBe(me)
    expect(found.amount('crudeProtein')).toBe(protein)
    expect(found.amount('calcium')).toBe(calcium)
  })

  it('twins ask for more than a single in the last four weeks', () => {
    const single = lookUp(ewe('latePregnancy', 70, { litter: 1 }))
    const twins = lookUp(ewe('latePregnancy', 70, { litter: 2 }))
    expect(single.amount('metabolizableEnergy')).toBe(3.8)
    expect(twins.amount('metabolizableEnergy')).toBe(4.4)
    expect(twins.amount('crudeProtein')).toBe(214)
    expect(twins.intakeDryMatterKg).toBe(1.9)
    expect(twins.status).toBe('memory')
  })

  it('triplets stand outside the table, and the answer says so', () => {
    const found = lookUp(ewe('latePregnancy', 70, { litter: 3 }))
    expect(found.amount('metabolizableEnergy')).toBe(4.4)
    expect(found.outsideTable).toBe(true)
    expect(found.notes).toContainEqual({ code: 'outsideTable', params: { of: 'litter', value: 3 } })
  })

  it('without a litter the smallest stands, and the answer says so', () => {
    const found = lookUp(ewe('latePregnancy', 70))
    expect(found.needs).toEqual(lookUp(ewe('latePregnancy', 70, { litter: 1 })).needs)
    expect(found.notes).toContainEqual({ code: 'smallestLitter', params: {} })
    expect(lookUp(ewe('latePregnancy', 70, { litter: 1 })).notes).toEqual([])
  })

  it('late lactation shares the rows that the table prints for both', () => {
    expect(lookUp(ewe('lateLactation', 70, { litter: 1 })).needs).toEqual(
      lookUp(ewe('latePregnancy', 70, { litter: 1 })).needs,
    )
  })

  it('lies on the line between two weights, and says between which', () => {
    const found = lookUp(ewe('maintenance', 65))
    expect(found.interpolatedBetween).toEqual([60, 70])
    expect(found.intakeDryMatterKg).toBeCloseTo(1.15, 12)
    expect(found.amount('metabolizableEnergy')).toBeCloseTo(2.3, 12)
    expect(found.notes.map((note) => note.code)).toContain('interpolated')
  })

  it('never extrapolates: outside the table the nearest row stands, with a note', () => {
    const heavy = lookUp(ewe('maintenance', 110))
    expect(heavy.needs).toEqual(lookUp(ewe('maintenance', 90)).needs)
    expect(heavy.outsideTable).toBe(true)
    expect(heavy.notes.find((note) => note.code === 'outsideTable')?.params).toMatchObject({
      low: 50,
      high: 90,
    })
  })

  it('rows made for another class say so', () => {
    const wether = lookUp({ ...ewe('maintenance', 62), class: 'wether' })
    expect(wether.notes.map((note) => note.code)).toContain('otherStage')
  })

  it('rams ask for 15 % more energy and protein than the rows they borrow, and name the factor', () => {
    const ram = lookUp({ ...ewe('maintenance', 80), class: 'ram' })
    expect(ram.amount('metabolizableEnergy')).toBeCloseTo(1.15 * 2.6, 12)
    expect(ram.amount('calcium')).toBe(2.7)
    expect(ram.needs.find((need) => need.nutrient === 'metabolizableEnergy')?.source).toContain('CSIRO')
  })

  it('lambs carry the gain the table was made for', () => {
    const lamb = lookUp({ ...ewe('finishing', 40), class: 'lamb' })
    expect(lamb.notes).toContainEqual({ code: 'tableGain', params: { gainG: 275 } })
  })
})

describe('NRC 1981 (Goats)', () => {
  it.each([
    // weight, intake kg, TDN g, ME Mcal, protein g, Ca g, P g
    [10, 0.28, 159, 0.57, 22, 1, 0.7],
    [50, 0.95, 530, 1.91, 75, 3, 2.1],
    [100, 1.6, 891, 3.21, 126, 5, 3.5],
  ])('maintenance at %d kg', (weight, intake, tdn, me, protein, calcium, phosphorus) => {
    const found = lookUp(doe('maintenance', weight))
    expect(found.intakeDryMatterKg).toBe(intake)
    expect(found.amount('totalDigestibleNutrients')).toBe(tdn)
    expect(found.amount('metabolizableEnergy')).toBe(me)
    expect(found.amount('crudeProtein')).toBe(protein)
    expect(found.amount('calcium')).toBe(calcium)
    expect(found.amount('phosphorus')).toBe(phosphorus)
  })

  it.each([
    ['maintenancePasture', 'nrc1981-goat-light-activity'],
    ['maintenanceHill', 'nrc1981-goat-medium-activity'],
    ['maintenanceRange', 'nrc1981-goat-high-activity'],
  ])('%s agrees with the printed activity rows to their last digit', (stage, table) => {
    const rows = tables.rows.filter((row) => row.table === table)
    expect(rows).toHaveLength(3)
    for (const row of rows) {
      const found = lookUp(doe(stage, row.bodyWeightKg ?? NaN))
      expect(Math.abs(found.intakeDryMatterKg - (row.intakeDryMatterKg ?? NaN))).toBeLessThanOrEqual(0.011)
      for (const [nutrient, tolerance] of [
        ['totalDigestibleNutrients', 1.01],
        ['metabolizableEnergy', 0.011],
        ['crudeProtein', 1.01],
      ] as const) {
        expect(
          Math.abs((found.amount(nutrient) ?? NaN) - (row.amounts[nutrient] ?? NaN)),
        ).toBeLessThanOrEqual(tolerance)
      }
    }
  })

  it.each([
    // published rows added up: weight, stage, milk, ME, protein, Ca, P
    [50, 'latePregnancy', undefined, 3.33, 157, 5, 3.5],
    [70, 'latePregnancy', undefined, 3.87, 178, 6, 4.2],
    [50, 'lactationFat35', 2, 4.37, 211, 7, 4.9],
    [60, 'lactationFat40', 3, 5.94, 302, 12, 8.4],
    [70, 'lactationFat40', 4, 7.45, 384, 16, 11.2],
  ])('%d kg, %s, adds the rows up', (weight, stage, milkKg, me, protein, calcium, phosphorus) => {
    const found = lookUp(doe(stage, weight, milkKg === undefined ? {} : { milkKg }))
    expect(found.amount('metabolizableEnergy')).toBeCloseTo(me, 6)
    expect(found.amount('crudeProtein')).toBeCloseTo(protein, 6)
    expect(found.amount('calcium')).toBeCloseTo(calcium, 6)
    expect(found.amount('phosphorus')).toBeCloseTo(phosphorus, 6)
    expect(found.needs.find((need) => need.nutrient === 'crudeProtein')?.status).toBe('derived')
    expect(found.notes.map((note) => note.code)).toContain('sumOfRows')
  })

  it('a milking doe without a milk figure has no requirement, rather than that of a dry one', () => {
    expect(lookUpRequirement(tables, doe('lactationFat35', 60))).toBeUndefined()
  })

  it('kids default to the later protein and calcium; the older system stays at hand', () => {
    const kid: RequirementQuery = { ...doe('growing', 20, { dailyGainG: 100 }), class: 'kidMeat' }
    const later = lookUp(kid)
    const older = lookUp({ ...kid, system: 'NRC 1981' })
    expect(later.system).toBe('NRC 2007')
    expect(later.amount('crudeProtein')).toBeCloseTo(98.6, 1)
    expect(older.amount('crudeProtein')).toBeCloseTo(66, 6)
    expect(older.amount('metabolizableEnergy')).toBeCloseTo(1.68, 6)
    expect(older.amount('calcium')).toBeCloseTo(2, 6)
    expect(later.amount('calcium')).toBeGreaterThan(3.5)
    expect(later.source).toContain('Luo')
  })

  it('kids eat no more than 80 g dry matter per kg of W^0.75, and the source of that is named', () => {
    const kid = (bodyWeightKg: number, dailyGainG: number) =>
      lookUp({ ...doe('growing', bodyWeightKg, { dailyGainG }), class: 'kidMeat' })
    const small = kid(10, 150)
    expect(small.intakeDryMatterKg).toBeCloseTo(0.08 * 10 ** 0.75, 12)
    expect(small.source).toContain('per kg of W^0.75')
    const slow = kid(30, 0)
    expect(slow.intakeDryMatterKg).toBe(0.65)
    expect(slow.source).not.toContain('per kg of W^0.75')
  })

  it('gain beyond the table takes its last row and says so', () => {
    const kid: RequirementQuery = {
      ...doe('growing', 20, { dailyGainG: 250 }),
      class: 'kidMeat',
      system: 'NRC 1981',
    }
    const found = lookUp(kid)
    expect(found.outsideTable).toBe(true)
    expect(found.amount('crudeProtein')).toBeCloseTo(38 + 42, 6)
  })
})

describe('the requirement files', () => {
  it('name a known source and table for every row and stage', () => {
    for (const row of tables.rows) expect(tables.sources[row.sourceKey], row.key).toBeTruthy()
    expect(new Set(tables.rows.map((row) => row.key)).size).toBe(tables.rows.length)
    const known = new Set(tables.rows.map((row) => row.table))
    for (const stage of tables.stages) {
      for (const table of [stage.table, ...stage.additions]) expect(known, stage.stage).toContain(table)
    }
  })

  it('give every offered stage a requirement with energy, protein, calcium and phosphorus', () => {
    for (const stage of tables.stages) {
      const rows = tables.rows.filter((row) => row.table === stage.table && row.bodyWeightKg !== undefined)
      const found = lookUp({
        species: stage.species,
        class: stage.class,
        stage: stage.stage,
        system: stage.system,
        bodyWeightKg: stage.weightLowKg ?? rows[0]?.bodyWeightKg ?? NaN,
        ...(stage.litterFrom ? { litter: stage.litterFrom } : {}),
        milkKg: 2,
        dailyGainG: 80,
      })
      for (const nutrient of ['metabolizableEnergy', 'crudeProtein', 'calcium', 'phosphorus'] as const) {
        expect(found.amount(nutrient), `${stage.class} ${stage.stage} ${nutrient}`).toBeGreaterThan(0)
      }
    }
  })

  it('leave calcium and phosphorus printed to one digit of a pound out', () => {
    for (const key of ['psu-sheep', 'psu-goats']) {
      const row = tables.rows.find((entry) => entry.sourceKey === key)
      expect(row?.amounts.crudeProtein).toBeGreaterThan(0)
      expect(row?.amounts.calcium).toBeUndefined()
      expect(row?.note).toContain('left out')
    }
  })
})
