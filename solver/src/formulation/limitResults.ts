import type { LimitResult, Margin } from '@maslin/shared'
import { eatenOf, knowledgeOf, type Eaten, type Knowledge } from './diet'
import { valueOf } from './forms'
import { isBinding, sizeOf, type Margins } from './margins'
import { batchScale, endOf } from './measures'
import type { Formulation, LimitSide } from './program'

/** Above this part of a total that is assumed, meeting a maximum says nothing. */
const MOSTLY_ASSUMED = 0.5
/** A change of cost this small, as a share of the cost over the whole limit, is none. */
const NO_PRICE = 1e-9
/** A value of a limit this small beside the limit is zero. */
const NOTHING = 1e-12
/** What a ratio or concentration reads where there is nothing to divide by; the largest value a limit may have. */
const BEYOND_ANY_LIMIT = 1e9

/** What is known of one limit at an answer: the sides, those the mix rests on, and what moving them does. */
export interface LimitStanding {
  sides: LimitSide[]
  binding: { side: LimitSide; margins: Margins }[]
}

/** Sides of one limit, in the order of the keeper's limits. */
export function sidesByLimit(sides: LimitSide[]): LimitSide[][] {
  const byLimit = new Map<string, LimitSide[]>()
  for (const side of sides) byLimit.set(side.limit.id, [...(byLimit.get(side.limit.id) ?? []), side])
  return [...byLimit.values()]
}

/** The sides on which the mix rests; of a fixed amount one stands for both. */
export function bindingSides(sides: LimitSide[], amounts: number[]): LimitSide[] {
  const binding = sides.filter((side) => isBinding(side, amounts))
  return binding.some(({ rowSide }) => rowSide === 'equal') ? binding.slice(0, 1) : binding
}

/** Reports one limit in its own unit; margins in the answer's cost basis. */
export function limitResultOf(
  formulation: Formulation,
  standing: LimitStanding,
  amounts: number[],
  leastCost: number,
): LimitResult {
  const { limit } = standing.sides[0]!
  const chosen = dearest(standing) ?? standing.binding[0]
  const reported = chosen?.side ?? nearest(standing.sides, amounts)
  const result: LimitResult = {
    limitId: limit.id,
    value: readingOf(reported, amounts),
    ...(limit.min === undefined ? {} : { min: limit.min }),
    ...(limit.max === undefined ? {} : { max: limit.max }),
    state: 'room',
    ...knowledgeOfSide(formulation, reported, amounts),
    differs: false,
  }
  if (chosen) {
    const scale = batchScale(formulation.input)
    const size = sizeOf(reported)
    const scaled = ({ perUnit, until, impossible }: Margin): Margin => ({
      ...(perUnit === undefined ? {} : { perUnit: tidy(perUnit * scale, size, leastCost) }),
      ...(until === undefined ? {} : { until: Math.abs(until) <= NOTHING * size ? 0 : until }),
      impossible,
    })
    const { raise, lower } = { raise: scaled(chosen.margins.raise), lower: scaled(chosen.margins.lower) }
    const prices = [raise.perUnit ?? 0, lower.perUnit ?? 0]
    result.state = prices.some((price) => price !== 0) ? 'costs' : 'tight'
    result.bindingSide =
      reported.rowSide === 'equal' ? (prices.some((price) => price < 0) ? 'max' : 'min') : reported.side
    result.differs = differs(raise, lower)
    result.raise = raise
    result.lower = downwards(lower)
  }
  if (notCheckable(formulation, reported, amounts, result)) result.state = 'notCheckable'
  return result
}

/** The binding side whose move changes the cost most, where both ends of a limit bind. */
function dearest({ binding }: LimitStanding): LimitStanding['binding'][number] | undefined {
  const worth = ({ margins: { raise, lower } }: LimitStanding['binding'][number]): number =>
    Math.max(Math.abs(raise.perUnit ?? 0), Math.abs(lower.perUnit ?? 0))
  return [...binding].sort((a, b) => worth(b) - worth(a))[0]
}

/** The side the mix lies closest to, relative to the limit; its counting of unknown values is the one to show. */
function nearest(sides: LimitSide[], amounts: number[]): LimitSide {
  const distance = (side: LimitSide): number =>
    Math.abs(readingOf(side, amounts) - side.bound) / Math.max(side.bound, Number.MIN_VALUE)
  return [...sides].sort((a, b) => distance(a) - distance(b))[0]!
}

/** Where the mix lies, in the limit's own unit, as this side counts it; exactly the limit where the mix rests on it. */
function readingOf(side: LimitSide, amounts: number[]): number {
  if (isBinding(side, amounts) && valueOf(side.denominator, amounts) > 0) return side.bound
  const numerator = valueOf(side.numerator, amounts)
  const denominator = valueOf(side.denominator, amounts)
  if (denominator > 0) return Math.min(numerator / denominator, BEYOND_ANY_LIMIT)
  return numerator > 0 ? BEYOND_ANY_LIMIT : 0
}

const tidy = (price: number, size: number, cost: number): number =>
  Math.abs(price) * size <= NO_PRICE * Math.abs(cost) ? 0 : price

/** The answer counts each direction by its own moves: a unit less changes the cost by the opposite of the slope. */
const downwards = (margin: Margin): Margin =>
  margin.perUnit === undefined ? margin : { ...margin, perUnit: margin.perUnit === 0 ? 0 : -margin.perUnit }

function differs(raise: Margin, lower: Margin): boolean {
  if (raise.impossible !== lower.impossible) return true
  const a = raise.perUnit ?? 0
  const b = lower.perUnit ?? 0
  return Math.abs(a - b) > 1e-6 * Math.max(Math.abs(a), Math.abs(b))
}

interface Known {
  assumedShare: number
  unknownFeeds: string[]
}

/** The nutrients a side counts, each with the end it counts it at. */
function countedBy({
  limit,
  side,
}: LimitSide): { nutrient: Parameters<Formulation['composition']>[1]; end: 'low' | 'high' }[] {
  const end = endOf(side)
  if (limit.kind === 'nutrient') return [{ nutrient: limit.nutrient, end }]
  if (limit.kind !== 'ratio') return []
  return [
    { nutrient: limit.numerator, end },
    { nutrient: limit.denominator, end: end === 'low' ? 'high' : 'low' },
  ]
}

function eatenBy(formulation: Formulation, { limit }: LimitSide, amounts: number[]): Eaten[] {
  const mixOnly = limit.kind === 'nutrient' && limit.measure === 'perKgAsFed'
  return eatenOf(formulation.diet, mixOnly ? 'mix' : 'diet', amounts)
}

function knowledge(
  formulation: Formulation,
  side: LimitSide,
  amounts: number[],
): { end: 'low' | 'high'; known: Knowledge }[] {
  const eaten = eatenBy(formulation, side, amounts)
  return countedBy(side).map(({ nutrient, end }) => ({
    end,
    known: knowledgeOf(eaten, (feed) => formulation.composition(feed, nutrient, end)),
  }))
}

const assumedShareOf = ({ assumed, total }: Knowledge): number => (total > 0 ? assumed / total : 0)

/**
 * How much of this side's figure rests on unknown values: of what is counted high the assumed share of the total, of
 * what is counted low the share of the dry matter that counts as nothing. A ratio counts one of each; its high part
 * decides.
 */
function knowledgeOfSide(formulation: Formulation, side: LimitSide, amounts: number[]): Known {
  const parts = knowledge(formulation, side, amounts)
  const high = parts.find(({ end }) => end === 'high')
  const low = parts.find(({ end }) => end === 'low')
  return {
    assumedShare: high ? assumedShareOf(high.known) : (low?.known.unknownDryMatter ?? 0),
    unknownFeeds: [...new Set(parts.flatMap(({ known }) => known.unknownFeeds))],
  }
}

/** A figure that nobody can vouch for: mostly assumed where it must stay below, nothing known at all elsewhere. */
function notCheckable(
  formulation: Formulation,
  side: LimitSide,
  amounts: number[],
  result: LimitResult,
): boolean {
  if (result.unknownFeeds.length === 0) return false
  return knowledge(formulation, side, amounts).some(
    ({ end, known }) =>
      known.unknownDryMatter > 1 - 1e-9 || (end === 'high' && assumedShareOf(known) > MOSTLY_ASSUMED),
  )
}
