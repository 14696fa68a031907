import type { Caution, FormulationInput, LeftOut } from '@maslin/shared'
import { animalRules, copperCaution, type FirstMixDefaults } from '../nutrition'
import { eatenOf, knowledgeOf } from './diet'
import type { Formulation } from './program'

/** Rounding that is no shortage. */
const NEARLY = 1e-3

/** mg copper per kg of the whole diet's dry matter, sheep. */
const copperThresholds: FirstMixDefaults['copper'] = {
  warnAbove: {
    value: 10,
    basis: 'mg copper per kg of diet dry matter',
    source: 'Common practice, no source where molybdenum is about 1 mg/kg',
    status: 'practice',
  },
  stopAbove: {
    value: 15,
    basis: 'mg copper per kg of diet dry matter',
    source:
      'Greatest safe dietary copper of sheep, In Practice 1997, 19:503; NRC 2005 Mineral Tolerance of Animals',
    status: 'read',
  },
}

/** Base-diet feeds the animals eat with this mix; a batch is the whole feed. */
function baseFeedsOf(input: FormulationInput): FormulationInput['baseFeeds'] {
  if (input.basis === 'batch') return []
  return input.baseFeeds.filter((feed) => input.baseDiet.some((item) => item.feedId === feed.id))
}

/** Feeds that the animal rules keep out of this mix, and what they warn of before anything is solved. */
export function rulesOf(input: FormulationInput): { excluded: LeftOut[]; cautions: Caution[] } {
  const { leftOut, cautions } = animalRules(input.group, input.feeds, baseFeedsOf(input))
  const prices = new Map(input.feeds.map((feed) => [feed.id, feed.pricePerKg]))
  const excluded = leftOut.map(({ feedId, reason }): LeftOut => {
    const pricePerKg = prices.get(feedId)
    return { feedId, reason, ...(pricePerKg === undefined ? {} : { pricePerKg }) }
  })
  return { excluded, cautions }
}

/** Needs that a mix is made to meet; the others (vitamins, TDN beside ME) have no rows in a first mix. */
const coreNeeds = ['metabolizableEnergy', 'crudeProtein', 'calcium', 'phosphorus'] as const

/**
 * Warns where the diet brings less of a core need than the group's requirement, since a limit was lowered or taken off: what
 * is cheapest then is no feed for these animals. Unknown values count as nothing, as they do in the limits.
 */
function belowNeedOf({ input, diet, composition }: Formulation, amounts: number[]): Caution | undefined {
  const eaten = eatenOf(diet, 'diet', amounts)
  const dryMatter = eaten.reduce((sum, part) => sum + part.dryMatterKg, 0)
  if (dryMatter === 0) return undefined
  const days = input.basis === 'batch' ? dryMatter / input.group.intakeDryMatterKg : 1
  const short = coreNeeds.flatMap((nutrient) => {
    const need = input.group.needs.find((one) => one.nutrient === nutrient && one.kind === 'min')
    if (!need || need.perHeadDay <= 0) return []
    const { total } = knowledgeOf(eaten, (feed) => composition(feed, nutrient, 'low'))
    const share = total / days / need.perHeadDay
    return share < 1 - NEARLY ? [{ nutrient, share, need }] : []
  })
  const [worst] = short.sort((a, b) => a.share - b.share)
  if (!worst) return undefined
  return {
    code: 'belowNeed',
    level: 'acknowledge',
    params: { nutrient: worst.nutrient, share: worst.share },
    feedIds: [],
    source: worst.need.source,
    status: worst.need.status,
  }
}

/** What to warn of at an answer: the animal rules for what is in it or was kept out, and the copper of the diet. */
export function cautionsOf(formulation: Formulation, amounts: number[]): Caution[] {
  const { input, excluded } = formulation
  const eaten = eatenOf(formulation.diet, 'diet', amounts).filter(({ dryMatterKg }) => dryMatterKg > 0)
  const concerned = new Set([
    ...eaten.map(({ source }) => source.feed.id),
    ...excluded.map((out) => out.feedId),
  ])
  const { cautions } = animalRules(
    input.group,
    input.feeds.filter((feed) => concerned.has(feed.id)),
    baseFeedsOf(input),
  )
  const found = [belowNeedOf(formulation, amounts), copperOf(formulation, amounts)]
  return [...cautions, ...found.filter((caution) => caution !== undefined)]
}

function copperOf({ input, diet, composition }: Formulation, amounts: number[]): Caution | undefined {
  const eaten = eatenOf(diet, 'diet', amounts).filter(({ dryMatterKg }) => dryMatterKg > 0)
  const dryMatter = eaten.reduce((sum, part) => sum + part.dryMatterKg, 0)
  if (dryMatter === 0) return undefined
  const { total, assumed, unknownFeeds } = knowledgeOf(eaten, (feed) => composition(feed, 'copper', 'high'))
  const largest = [...eaten].sort((a, b) => brought(b) - brought(a))[0]!
  function brought({ source, dryMatterKg }: (typeof eaten)[number]): number {
    return composition(source.feed, 'copper', 'high').value * dryMatterKg
  }
  const known = eaten.flatMap(({ source }) => source.feed.values.copper ?? [])
  const isTested = ({ status }: (typeof known)[number]) => status === 'laboratory'
  const fromTestedLots = eaten.reduce((sum, { source, dryMatterKg }) => {
    const content = source.feed.values.copper
    return content && isTested(content) ? sum + content.value * dryMatterKg : sum
  }, 0)
  // Book values beside it do not make a tested excess any safer.
  const tested =
    (known.length > 0 && known.every(isTested)) ||
    fromTestedLots / dryMatter > copperThresholds.stopAbove.value
  return copperCaution(copperThresholds, {
    species: input.group.species,
    totalPerKg: total / dryMatter,
    // Nothing known and nothing to assume: a total of nothing that is all guess.
    assumedShare: total > 0 ? assumed / total : unknownFeeds.length > 0 ? 1 : 0,
    origin: tested ? 'tested' : 'book',
    feedIds: [...new Set([...unknownFeeds, largest.source.feed.id])],
  }).caution
}
