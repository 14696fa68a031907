import type { FormulationInput, Limit, NutrientId, Requirement, SolverFeed, Stage } from '@maslin/shared'
import {
  availableStages,
  ceilingLimits,
  defaultSubstitution,
  fibreCapIntake,
  firstMixLimits,
  lookUpRequirement,
  solveMix,
  suggestedFeeds,
  type FirstMixFeed,
} from '@maslin/solver'
import { describe, expect, it } from 'vitest'
import { feed, mix } from '../../solver/src/formulation/testing/builders'
import { assumedHighs, firstMixDefaults, readTable, requirementTables } from './tables'

/**
 * First mixes of the suggested book feeds at prices made to tempt: minerals and by-products cost next to nothing, hay and
 * grain much. What comes out must still be a diet.
 */

const defaults = firstMixDefaults()
const tables = requirementTables()
const book = readTable('feeds.csv')
const values = readTable('feed-values.csv')

type BookFeed = SolverFeed & FirstMixFeed & { bookKey: string }

const priceOf = (key: string, feedClass: string): number =>
  ({ mineral: 0.001, byProduct: 0.01, premix: 2, dryForage: 0.35 })[feedClass] ??
  (key === 'soybean-meal-44' ? 0.45 : 0.3)

const feeds: BookFeed[] = book.map((row, place) => {
  const key = row.key ?? ''
  const known = values
    .filter((entry) => entry.feed_key === key)
    .map((entry) => [entry.nutrient, Number(entry.value)] as [NutrientId, number])
  return {
    ...feed(`f${place}`, Number(row.dm_pct) / 100, priceOf(key, row.class ?? ''), Object.fromEntries(known), {
      class: row.class as SolverFeed['class'],
      forage: row.forage === 'yes',
    }),
    bookKey: key,
  }
})

const highs: FormulationInput['assumedHighs'] = {}
for (const { class: of, nutrient, value, name } of assumedHighs())
  (highs[of] ??= {})[nutrient] = { value, basis: name }

const animalOf = (stage: Stage) => ({
  species: stage.species,
  class: stage.class,
  stage: stage.stage,
  bodyWeightKg: stage.weights.lowKg * 0.3 + stage.weights.highKg * 0.7,
  litter: 1,
  milkKg: 1.5,
  dailyGainG: 80,
})

/** The first mix of a stage as the whole feed, with or without the ceilings. */
async function firstBatch(stage: Stage, requirement: Requirement, withCeilings = true) {
  const suggestion = suggestedFeeds(defaults, stage)
  const keys = [...(suggestion?.forages ?? []), ...(suggestion?.feeds ?? [])]
  const chosen = [...new Set(keys)].map((key) => feeds.find(({ bookKey }) => bookKey === key)!)
  const ceilings = new Set(ceilingLimits(defaults, stage, chosen).map(({ id }) => id))
  const limits: Limit[] = firstMixLimits(defaults, stage, requirement, {
    basis: 'batch',
    feeds: chosen,
  }).filter(({ id }) => withCeilings || !ceilings.has(id))
  const { intakeDryMatterKg } = requirement
  const { input } = mix('batch')
    .with(...chosen.map(({ bookKey: _, ...solverFeed }) => solverFeed))
    .limit(...limits)
    .assume(highs)
    .group({ species: stage.species, male: stage.male, young: stage.young, intakeDryMatterKg })
  const answer = await solveMix(input)
  if (answer.status !== 'optimal') return undefined
  const share = (fits: (of: BookFeed) => boolean): number =>
    answer.blend.reduce(
      (sum, part) => sum + (fits(feeds.find(({ id }) => id === part.feedId)!) ? part.shareOfDryMatter : 0),
      0,
    )
  return { answer, share }
}

const stages = availableStages(tables).filter(({ species }) => species === 'sheep' || species === 'goat')
const SLACK = 1e-6

describe('first mixes where minerals and by-products cost next to nothing', () => {
  it.each(stages.map((stage) => [`${stage.species} ${stage.class} ${stage.stage}`, stage] as const))(
    '%s stays a diet',
    async (_, stage) => {
      const requirement = lookUpRequirement(tables, animalOf(stage))
      expect(requirement).toBeDefined()
      const mixed = await firstBatch(stage, requirement!)
      expect(mixed, 'a mix is possible').toBeDefined()
      const { share } = mixed!
      const young = stage.phase === 'growing' || stage.phase === 'finishing'
      expect(share((of) => of.class === 'mineral')).toBeLessThanOrEqual((young ? 0.02 : 0.015) + SLACK)
      expect(share(({ bookKey }) => bookKey === 'salt')).toBeLessThanOrEqual(0.005 + SLACK)
      expect(share((of) => of.class === 'premix')).toBeLessThanOrEqual(0.008 + SLACK)
      for (const key of ['soybean-hulls', 'beet-pulp-dried'])
        expect(share(({ bookKey }) => bookKey === key)).toBeLessThanOrEqual(0.2 + SLACK)
      expect(share((of) => of.forage)).toBeGreaterThanOrEqual(
        defaults.forageShareMin[stage.phase].value - SLACK,
      )
    },
  )

  it('would fill up with limestone and salt were it not for the ceilings', async () => {
    const stage = stages.find(({ class: of, stage: name }) => of === 'ewe' && name === 'maintenance')!
    const open = await firstBatch(stage, lookUpRequirement(tables, animalOf(stage))!, false)
    expect(open!.share((of) => of.class === 'mineral')).toBeGreaterThan(0.05)
  })
})

describe('first mixes beside the hays of the book', () => {
  const twins = {
    species: 'sheep',
    class: 'ewe',
    stage: 'latePregnancy',
    bodyWeightKg: 70,
    litter: 2,
  } as const
  const stage = stages.find(({ class: of, stage: name }) => of === twins.class && name === twins.stage)!

  /** The first mix of ewes carrying twins beside a hay eaten freely. */
  async function besideHay(hayKey: string) {
    const hay = feeds.find(({ bookKey }) => bookKey === hayKey)!
    const chosen = (suggestedFeeds(defaults, stage)?.feeds ?? []).map((key) =>
      feeds.find(({ bookKey }) => bookKey === key)!,
    )
    const requirement = lookUpRequirement(tables, twins)!
    const fibre = hay.values.neutralDetergentFiber?.value
    const alone =
      fibreCapIntake(defaults, twins.bodyWeightKg, stage.phase, fibre) ?? requirement.intakeDryMatterKg
    const limits = firstMixLimits(defaults, stage, requirement, {
      basis: 'besideForage',
      feeds: [...chosen, hay],
      baseIntakeKg: alone,
    })
    const { input } = mix('besideForage')
      .with(...chosen.map(({ bookKey: _, ...solverFeed }) => solverFeed))
      .beside(hay, {
        dryMatterKg: alone,
        substitutionRate: defaultSubstitution(defaults, stage.phase, fibre).value,
      })
      .limit(...limits)
      .assume(highs)
      .group({ species: 'sheep', intakeDryMatterKg: requirement.intakeDryMatterKg })
    return solveMix(input)
  }

  it.each([
    'alfalfa-hay-early-bloom',
    'alfalfa-hay-mature',
    'red-clover-hay',
    'orchardgrass-hay-early-bloom',
    'timothy-hay-early-bloom',
    'timothy-hay-full-bloom',
    'oat-hay',
    'grass-hay-mixed',
  ])('feed ewes with twins beside %s', async (hay) => {
    expect((await besideHay(hay)).status).toBe('optimal')
  })

  it.each(['wheat-straw', 'bermudagrass-hay-coastal'])(
    'refuse %s, which fills ewes with twins before it feeds them, and say what would have to give',
    async (hay) => {
      const answer = await besideHay(hay)
      expect(answer.status).toBe('infeasible')
      if (answer.status !== 'infeasible') return
      expect(answer.conflict.map(({ limitId }) => limitId)).toEqual(
        expect.arrayContaining(['energy', 'forageShare']),
      )
      expect(answer.proposals.length).toBeGreaterThan(0)
    },
  )
})
