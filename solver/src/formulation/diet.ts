import type { FormulationInput, NutrientId, SolverFeed } from '@maslin/shared'
import type { Composition, Counted, End } from './composition'
import { constantForm, type Form } from './forms'

/** A batch is solved per this much dry matter and scaled afterwards, kg. */
export const REFERENCE_DRY_MATTER_KG = 1000

/** A feed of the mix: one column of the program, in kg as fed (per head and day, or per reference batch). */
export interface MixSource {
  kind: 'mix'
  feed: SolverFeed
  column: number
}

/** The free-choice forage that a supplement displaces: one column, kg of dry matter per head and day. */
export interface ForageSource {
  kind: 'forage'
  feed: SolverFeed
  column: number
  /** kg dry matter eaten without a supplement, and kg given up per kg of supplement dry matter. */
  alone: number
  substitutionRate: number
  wasteShare: number
}

/**
 * kg of the forage's dry matter left uneaten per kg dry matter of a feed. Minerals and premixes are licked by the gram and
 * fill no rumen: they take the place of no forage (common practice, no source).
 */
export const displacedBy = (feed: SolverFeed, forage: ForageSource): number =>
  feed.class === 'mineral' || feed.class === 'premix' ? 0 : forage.substitutionRate

/** A ration of the base diet: a constant, kg of dry matter per head and day. */
export interface RationSource {
  kind: 'ration'
  feed: SolverFeed
  dryMatterKg: number
  wasteShare: number
}

export type BaseSource = ForageSource | RationSource
export type Source = MixSource | BaseSource

/** What is eaten: the mix and, unless it is a batch, what is eaten beside it. */
export interface Diet {
  mix: MixSource[]
  base: BaseSource[]
  columns: number
}

/** Which part of the diet a quantity is taken over. */
export type Part = 'mix' | 'diet'

/**
 * Lays out the columns: one a feed of the mix and, beside forage, one for the free-choice forage. A forage that gives
 * way to nothing is a constant like any ration. A batch has no base diet; a whole diet per head counts its fixed
 * rations only, since the mix stands in place of the free-choice forage.
 */
export function layOutDiet(input: FormulationInput, mixFeeds: SolverFeed[]): Diet {
  const mix = mixFeeds.map((feed, column): MixSource => ({ kind: 'mix', feed, column }))
  const base: BaseSource[] = []
  let columns = mix.length
  for (const item of input.basis === 'batch' ? [] : input.baseDiet) {
    if (input.basis === 'perHead' && item.mode === 'freeChoice') continue
    const feed = input.baseFeeds.find((candidate) => candidate.id === item.feedId)
    if (!feed) continue
    const { wasteShare } = item
    const gives = item.mode === 'freeChoice' && item.substitutionRate > 0 && item.dryMatterKg > 0
    if (gives)
      base.push({
        kind: 'forage',
        feed,
        column: columns++,
        alone: item.dryMatterKg,
        substitutionRate: item.substitutionRate,
        wasteShare,
      })
    else base.push({ kind: 'ration', feed, dryMatterKg: item.dryMatterKg, wasteShare })
  }
  return { mix, base, columns }
}

/** Dry matter of a source as a number of its column's units: d for a feed of the mix, 1 for forage and rations. */
export const dryMatterPerUnit = (source: Source): number =>
  source.kind === 'mix' ? source.feed.dryMatter : 1

/** Σ weight(source) · dry matter of the source, over the mix or the whole diet; weight per kg of dry matter. */
export function formOver(diet: Diet, part: Part, weight: (source: Source) => number): Form {
  const form = constantForm(diet.columns, 0)
  for (const source of part === 'mix' ? diet.mix : [...diet.mix, ...diet.base]) {
    const perKg = weight(source)
    if (source.kind === 'ration') form.constant += perKg * source.dryMatterKg
    else form.terms[source.column]! += perKg * dryMatterPerUnit(source)
  }
  return form
}

export const dryMatterForm = (diet: Diet, part: Part): Form => formOver(diet, part, () => 1)

/** Weight as fed of the sources that `counts` (1 or 0), kg. */
export function asFedForm(diet: Diet, part: Part, counts: (source: Source) => number = () => 1): Form {
  const form = formOver(diet, part, (source) => counts(source) / source.feed.dryMatter)
  // d · (1/d) can be a rounding off one, and a kilogram as fed is exactly one kilogram.
  for (const source of diet.mix) form.terms[source.column] = counts(source)
  return form
}

/** Amount of a nutrient in its amount unit, every content at the given end. */
export function nutrientForm(
  diet: Diet,
  part: Part,
  nutrient: NutrientId,
  end: End,
  composition: Composition,
): Form {
  return formOver(diet, part, (source) => composition(source.feed, nutrient, end).value)
}

/** One source at an answer: how much is eaten of it. */
export interface Eaten {
  source: Source
  dryMatterKg: number
}

/** Dry matter of every source at the given amounts, in the program's own scale. */
export function eatenOf(diet: Diet, part: Part, amounts: ArrayLike<number>): Eaten[] {
  return (part === 'mix' ? diet.mix : [...diet.mix, ...diet.base]).map((source) => ({
    source,
    dryMatterKg:
      source.kind === 'ration' ? source.dryMatterKg : amounts[source.column]! * dryMatterPerUnit(source),
  }))
}

/** How much of a nutrient's total rests on values that nobody knows. */
export interface Knowledge {
  total: number
  /** The part of the total that is assumed. */
  assumed: number
  /** Part of the dry matter whose content is unknown, 0 to 1. */
  unknownDryMatter: number
  unknownFeeds: string[]
}

export function knowledgeOf(eaten: Eaten[], contentOf: (feed: SolverFeed) => Counted): Knowledge {
  const unknownFeeds = new Set<string>()
  let total = 0
  let assumed = 0
  let dryMatter = 0
  let unknownDryMatter = 0
  for (const { source, dryMatterKg } of eaten) {
    if (dryMatterKg <= 0) continue
    const { value, unknown } = contentOf(source.feed)
    total += value * dryMatterKg
    dryMatter += dryMatterKg
    if (!unknown) continue
    assumed += value * dryMatterKg
    unknownDryMatter += dryMatterKg
    unknownFeeds.add(source.feed.id)
  }
  return {
    total,
    assumed,
    unknownDryMatter: dryMatter > 0 ? unknownDryMatter / dryMatter : 0,
    unknownFeeds: [...unknownFeeds],
  }
}
