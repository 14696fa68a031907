import type { FeedSelection, FormulationInput, Limit } from '@maslin/shared'
import type { Composition, End } from './composition'
import {
  asFedForm,
  dryMatterForm,
  formOver,
  nutrientForm,
  REFERENCE_DRY_MATTER_KG,
  type Diet,
  type Part,
  type Source,
} from './diet'
import { constantForm, type Form } from './forms'

export type BoundSide = 'min' | 'max'

/** What a limit holds down: numerator ÷ denominator, in the limit's own unit. */
export interface Measure {
  numerator: Form
  /** Where it is the same for every mix, moving the limit moves the right-hand side of a row; else its coefficients. */
  denominator: Form
}

export interface MeasureContext {
  input: FormulationInput
  diet: Diet
  composition: Composition
}

/** The ends that a row of this side counts: a minimum must hold at the low contents, a maximum at the high ones. */
export const endOf = (side: BoundSide): End => (side === 'min' ? 'low' : 'high')
const opposite = (end: End): End => (end === 'low' ? 'high' : 'low')

/** How much bigger the keeper's batch is than the one that is solved; 1 per head and day. */
export function batchScale(input: FormulationInput): number {
  return input.basis === 'batch' ? input.batchDryMatterKg / REFERENCE_DRY_MATTER_KG : 1
}

/** Whether a feed of the mix or the base diet is one the limit is about. */
function selects(of: FeedSelection, source: Source): boolean {
  switch (of.by) {
    case 'feeds':
      return of.feedIds.includes(source.feed.id)
    case 'forage':
      return source.feed.forage
    case 'class':
      return source.feed.class === of.class
  }
}

/**
 * The measure of a limit on one side, as forms over the columns of the program.
 *
 * In a batch the dry matter is fixed, so that whatever is taken per kg of dry matter, per head and day (by the
 * group's intake) or in kilograms of the batch has a constant denominator. Beside a base diet concentrations and
 * ratios are those of the whole diet.
 */
export function measureOf(limit: Limit, side: BoundSide, context: MeasureContext): Measure {
  const { input, diet, composition } = context
  const batch = input.basis === 'batch'
  const constant = (value: number): Form => constantForm(diet.columns, value)
  const one = constant(1)
  const perHead = batch ? constant(REFERENCE_DRY_MATTER_KG / input.group.intakeDryMatterKg) : one
  const perKilogram = batch ? constant(1 / batchScale(input)) : one
  const dryMatterOf = (part: Part): Form =>
    batch ? constant(REFERENCE_DRY_MATTER_KG) : dryMatterForm(diet, part)
  const end = endOf(side)
  switch (limit.kind) {
    case 'nutrient': {
      const part = limit.measure === 'perKgAsFed' ? 'mix' : 'diet'
      const numerator = nutrientForm(diet, part, limit.nutrient, end, composition)
      if (limit.measure === 'perHeadDay') return { numerator, denominator: perHead }
      if (limit.measure === 'perKgDryMatter') return { numerator, denominator: dryMatterOf('diet') }
      return { numerator, denominator: asFedForm(diet, 'mix') }
    }
    case 'ratio':
      return {
        numerator: nutrientForm(diet, 'diet', limit.numerator, end, composition),
        denominator: nutrientForm(diet, 'diet', limit.denominator, opposite(end), composition),
      }
    case 'feeds': {
      const part = limit.within
      const selected = (source: Source): number => (selects(limit.of, source) ? 1 : 0)
      const dry = formOver(diet, part, selected)
      const asFed = asFedForm(diet, part, selected)
      if (limit.measure === 'shareOfDryMatter') return { numerator: dry, denominator: dryMatterOf(part) }
      if (limit.measure === 'shareAsFed') return { numerator: asFed, denominator: asFedForm(diet, part) }
      return { numerator: limit.measure === 'kgDryMatter' ? dry : asFed, denominator: perKilogram }
    }
    case 'intake':
      return { numerator: dryMatterForm(diet, 'diet'), denominator: perHead }
    case 'rate':
      return { numerator: asFedForm(diet, 'mix'), denominator: perHead }
  }
}
