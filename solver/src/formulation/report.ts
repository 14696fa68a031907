import {
  nutrientIds,
  type BlendPart,
  type FormulationInput,
  type OptimalAnswer,
  type SolverFeed,
} from '@maslin/shared'
import { eatenOf } from './diet'
import { batchScale } from './measures'
import type { Formulation } from './program'

/** A part of the mix below this share of its dry matter is rounding. */
const ROUNDING = 1e-10
export const DAYS_PER_MONTH = 30

type Cost = OptimalAnswer['cost']
type Supply = OptimalAnswer['supply'][number]

/** Feeds that go in, largest share as fed first; amounts in the batch or per head and day. */
export function blendOf({ input, diet }: Formulation, amounts: number[]): BlendPart[] {
  const scale = batchScale(input)
  const used = diet.mix
    .map(({ feed, column }) => ({ feed, kgAsFed: amounts[column]! * scale }))
    .map((part) => ({ ...part, kgDryMatter: part.kgAsFed * part.feed.dryMatter }))
  const whole = sum(used.map((part) => part.kgDryMatter))
  const parts = used.filter((part) => part.kgDryMatter > ROUNDING * whole && part.kgAsFed > 0)
  const asFed = sum(parts.map((part) => part.kgAsFed))
  const dryMatter = sum(parts.map((part) => part.kgDryMatter))
  return parts
    .map(({ feed, kgAsFed, kgDryMatter }) => ({
      feedId: feed.id,
      kgAsFed,
      kgDryMatter,
      shareAsFed: kgAsFed / asFed,
      shareOfDryMatter: kgDryMatter / dryMatter,
      cost: kgAsFed * (feed.pricePerKg ?? 0),
      pricePerKg: feed.pricePerKg ?? 0,
    }))
    .sort((a, b) => b.shareAsFed - a.shareAsFed || a.feedId.localeCompare(b.feedId))
}

export function totalsOf(blend: BlendPart[]): OptimalAnswer['totals'] {
  const kgAsFed = sum(blend.map((part) => part.kgAsFed))
  const kgDryMatter = sum(blend.map((part) => part.kgDryMatter))
  return { kgAsFed, kgDryMatter, dryMatterShare: kgAsFed > 0 ? kgDryMatter / kgAsFed : 0 }
}

/** What is eaten beside the mix, per head and day; what is offered includes the waste. */
export function baseDietOf({ input, diet }: Formulation, amounts: number[]): OptimalAnswer['baseDiet'] {
  if (input.basis === 'batch') return []
  return diet.base.map((source) => {
    const kgDryMatter = source.kind === 'ration' ? source.dryMatterKg : amounts[source.column]!
    const kgAsFed = kgDryMatter / source.feed.dryMatter
    return { feedId: source.feed.id, kgDryMatter, kgAsFed, kgOffered: kgAsFed / (1 - source.wasteShare) }
  })
}

/** @param objective least cost of the program, without the rations of the base diet */
export function costOf(formulation: Formulation, blend: BlendPart[], objective: number): Cost {
  const { input, constantCost, unpricedBaseFeeds } = formulation
  const { kgAsFed, kgDryMatter } = totalsOf(blend)
  const least = objective * batchScale(input) + constantCost
  const mix = sum(blend.map((part) => part.cost))
  const perHeadDay =
    input.basis === 'batch' ? (mix / input.batchDryMatterKg) * input.group.intakeDryMatterKg : least
  return {
    least,
    mix,
    baseDiet: input.basis === 'batch' ? 0 : least - mix,
    mixPerKgAsFed: kgAsFed > 0 ? mix / kgAsFed : 0,
    mixPerKgDryMatter: kgDryMatter > 0 ? mix / kgDryMatter : 0,
    perHeadDay,
    perGroup30Days: perHeadDay * input.group.heads * DAYS_PER_MONTH,
    unpricedBaseFeeds: [...new Set(unpricedBaseFeeds)],
  }
}

/** What each nutrient comes to and who brings it, plain values; a nutrient nobody knows anything of is left out. */
export function supplyOf({ input, diet }: Formulation, amounts: number[]): Supply[] {
  const scale = batchScale(input)
  const eaten = eatenOf(diet, 'diet', amounts).filter(({ dryMatterKg }) => dryMatterKg > 0)
  const dryMatter = sum(eaten.map((part) => part.dryMatterKg))
  if (dryMatter === 0) return []
  const wanted = nutrientsAskedFor(input)
  return nutrientIds.flatMap((nutrient) => {
    const known = eaten.filter(({ source }) => source.feed.values[nutrient])
    if (known.length === 0 && !wanted.has(nutrient)) return []
    const parts = known
      .map(({ source, dryMatterKg }) => ({
        feedId: source.feed.id,
        amount: valueIn(source.feed, nutrient) * dryMatterKg * scale,
        base: source.kind !== 'mix',
      }))
      .filter(({ amount }) => amount > 0)
    const amount = sum(parts.map((part) => part.amount))
    return [
      {
        nutrient,
        amount,
        fromBaseDiet: sum(parts.filter(({ base }) => base).map((part) => part.amount)),
        perKgDryMatter: amount / (dryMatter * scale),
        unknownShare: Math.max(0, 1 - sum(known.map((part) => part.dryMatterKg)) / dryMatter),
        parts,
      },
    ]
  })
}

function nutrientsAskedFor(input: FormulationInput): Set<string> {
  const asked = new Set<string>(input.group.needs.map((need) => need.nutrient))
  for (const limit of input.limits) {
    if (!limit.enabled) continue
    if (limit.kind === 'nutrient') asked.add(limit.nutrient)
    if (limit.kind === 'ratio') asked.add(limit.numerator).add(limit.denominator)
  }
  return asked
}

const valueIn = (feed: SolverFeed, nutrient: Supply['nutrient']): number => feed.values[nutrient]?.value ?? 0

const sum = (numbers: number[]): number => numbers.reduce((total, number) => total + number, 0)
