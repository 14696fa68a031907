import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import type { BaseDietItem, Feed, Group, NutrientId, Stage } from '@maslin/shared'
import type { FirstMixDefaults } from '@maslin/solver'
import { describe, expect, it } from 'vitest'
import { expectedIntake, resolveBaseDiet, solverFeed } from './formulationInput'

const defaults = JSON.parse(
  readFileSync(fileURLToPath(new URL('../../../data/first-mix.json', import.meta.url)), 'utf8'),
) as FirstMixDefaults

const HAY = '01900000-0000-7000-8000-000000000001'
const SILAGE = '01900000-0000-7000-8000-000000000002'

const feed = (values: Partial<Record<NutrientId, number>>, changes: Partial<Feed> = {}): Feed => ({
  id: HAY,
  name: 'Hay',
  class: 'dryForage',
  dryMatter: 0.88,
  dryMatterSource: '',
  dryMatterStatus: 'laboratory',
  forage: true,
  ruminantOrigin: 'no',
  nonProteinNitrogen: 0,
  addedCopper: false,
  ionophore: false,
  archived: false,
  version: 1,
  updatedAt: '2026-01-01T00:00:00.000Z',
  values: Object.fromEntries(
    Object.entries(values).map(([nutrient, value]) => [
      nutrient,
      { value, source: 'report', status: 'laboratory' as const },
    ]),
  ),
  ...changes,
})

const group = (baseDiet: BaseDietItem[], changes: Partial<Group> = {}): Group => ({
  id: HAY,
  name: 'Ewes',
  animal: { species: 'sheep', class: 'ewe', stage: 'x', bodyWeightKg: 70, equidsCanReach: false },
  heads: 10,
  baseDiet,
  needOverrides: [],
  version: 1,
  updatedAt: '2026-01-01T00:00:00.000Z',
  ...changes,
})

const freeHay: BaseDietItem = { feedId: HAY, mode: 'freeChoice', wasteShare: 0 }

describe('resolveBaseDiet', () => {
  const resolve = (
    phase: Stage['phase'],
    items: BaseDietItem[],
    ndf?: number,
    changes: Partial<Group> = {},
  ) =>
    resolveBaseDiet({
      group: group(items, changes),
      stage: { phase } as Stage,
      feeds: new Map([[HAY, feed(ndf === undefined ? {} : { neutralDetergentFiber: ndf })]]),
      defaults,
    })

  it.each([
    { phase: 'latePregnancy' as const, ndf: 600, kg: (0.012 * 70) / 0.6, rate: 0.63 },
    { phase: 'maintenance' as const, ndf: 600, kg: (0.014 * 70) / 0.6, rate: 0.6 },
    { phase: 'lactation' as const, ndf: 700, kg: (0.018 * 70) / 0.7, rate: 0.42 },
    { phase: 'lactation' as const, ndf: 600, kg: (0.018 * 70) / 0.6, rate: 0.65 },
    { phase: 'lactation' as const, ndf: 500, kg: (0.018 * 70) / 0.5, rate: 0.89 },
  ])(
    'fills the gut with hay of NDF $ndf g/kg in $phase: share of body weight ÷ fibre',
    ({ phase, ndf, kg, rate }) => {
      const [item] = resolve(phase, [freeHay], ndf)
      expect(item).toMatchObject({ origin: 'fibreCap', substitutionRate: rate })
      expect(item?.dryMatterKg).toBeCloseTo(kg, 12)
    },
  )

  it('takes the table’s intake where the fibre is unknown, else 2.5 % of body weight', () => {
    const requirement = { intakeDryMatterKg: 1.8 } as NonNullable<Group['requirement']>
    expect(resolve('maintenance', [freeHay], undefined, { requirement })[0]).toMatchObject({
      dryMatterKg: 1.8,
      origin: 'table',
    })
    expect(resolve('maintenance', [freeHay])[0]).toMatchObject({ dryMatterKg: 1.75, origin: 'default' })
  })

  it('leaves room for the rations, which give way to nothing', () => {
    const ration: BaseDietItem = {
      feedId: SILAGE,
      mode: 'fixed',
      dryMatterKg: 0.5,
      wasteShare: 0.1,
      substitutionRate: 0.9,
    }
    const [fixed, free] = resolve('maintenance', [ration, freeHay], 700)
    expect(fixed).toMatchObject({ dryMatterKg: 0.5, substitutionRate: 0, origin: 'typed', wasteShare: 0.1 })
    expect(free?.dryMatterKg).toBeCloseTo(1.4 - 0.5, 12)
    const [, none] = resolve('maintenance', [{ ...ration, dryMatterKg: 9 }, freeHay], 700)
    expect(none?.dryMatterKg).toBe(0)
  })

  it('takes the keeper’s figures as they are', () => {
    const [item] = resolve('lactation', [{ ...freeHay, dryMatterKg: 2.2, substitutionRate: 0.3 }], 500)
    expect(item).toMatchObject({ dryMatterKg: 2.2, substitutionRate: 0.3, origin: 'typed' })
  })
})

describe('expectedIntake', () => {
  it('is the keeper’s, else the table’s, else a share of body weight', () => {
    const requirement = { intakeDryMatterKg: 1.8 } as NonNullable<Group['requirement']>
    const intakeOverride = { dryMatterKg: 1.6, reason: 'weighed' }
    expect(expectedIntake(group([], { requirement, intakeOverride }))).toBe(1.6)
    expect(expectedIntake(group([], { requirement }))).toBe(1.8)
    expect(expectedIntake(group([]))).toBeCloseTo(1.75, 12)
  })
})

describe('solverFeed', () => {
  it('adds what follows from other values, marked as derived, and leaves unknown values out', () => {
    const { values } = solverFeed(feed({ totalDigestibleNutrients: 600 }))
    expect(values.metabolizableEnergy?.status).toBe('derived')
    expect(values.metabolizableEnergy?.value).toBeGreaterThan(2)
    expect(values).not.toHaveProperty('copper')
  })

  it('keeps a measured value and its interval', () => {
    const given = feed({ totalDigestibleNutrients: 600 })
    const measured = {
      value: 2.3,
      low: 2.1,
      high: 2.5,
      sd: 0.1,
      source: 'report',
      status: 'laboratory' as const,
    }
    given.values.metabolizableEnergy = measured
    expect(solverFeed(given).values.metabolizableEnergy).toEqual({
      value: 2.3,
      low: 2.1,
      high: 2.5,
      status: 'laboratory',
    })
  })
})
