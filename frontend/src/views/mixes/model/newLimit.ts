import type { Basis, FeedClass, Limit, LimitInput, NutrientId } from '@maslin/shared'
import type { Measure } from './measures'

/** What stands in the form of a new limit. */
export interface NewLimit {
  kind: Limit['kind']
  nutrient: NutrientId
  denominator: NutrientId
  nutrientMeasure: 'perHeadDay' | 'perKgDryMatter' | 'perKgAsFed'
  which: 'forage' | 'feeds' | 'class'
  feedIds: string[]
  feedClass: FeedClass
  feedMeasure: 'shareOfDryMatter' | 'shareAsFed' | 'kgDryMatter' | 'kgAsFed'
  within: 'mix' | 'diet'
}

export const emptyLimit = (basis: Basis): NewLimit => ({
  kind: 'nutrient',
  nutrient: 'crudeProtein',
  denominator: 'phosphorus',
  nutrientMeasure: 'perKgDryMatter',
  which: 'feeds',
  feedIds: [],
  feedClass: 'byProduct',
  feedMeasure: 'shareAsFed',
  within: basis === 'batch' ? 'mix' : 'diet',
})

/** Which measures make sense with a basis: a batch has no head and day, a supplement no concentration as fed of its own. */
export function nutrientMeasuresFor(basis: Basis): NewLimit['nutrientMeasure'][] {
  if (basis === 'batch') return ['perKgDryMatter', 'perKgAsFed']
  return basis === 'perHead'
    ? ['perHeadDay', 'perKgDryMatter', 'perKgAsFed']
    : ['perHeadDay', 'perKgDryMatter']
}

/** Which kinds make sense: intake and rate are per head and day. */
export const kindsFor = (basis: Basis): Limit['kind'][] =>
  basis === 'batch' ? ['nutrient', 'ratio', 'feeds'] : ['nutrient', 'ratio', 'feeds', 'intake', 'rate']

function subject(form: NewLimit): DistributiveOmit<LimitInput, 'id' | 'min' | 'max'> {
  switch (form.kind) {
    case 'nutrient':
      return { kind: 'nutrient', nutrient: form.nutrient, measure: form.nutrientMeasure }
    case 'ratio':
      return { kind: 'ratio', numerator: form.nutrient, denominator: form.denominator }
    case 'feeds': {
      const { feedMeasure: measure, within } = form
      if (form.which === 'forage') return { kind: 'feeds', of: { by: 'forage' }, measure, within }
      if (form.which === 'class') {
        return { kind: 'feeds', of: { by: 'class', class: form.feedClass }, measure, within }
      }
      return { kind: 'feeds', of: { by: 'feeds', feedIds: form.feedIds }, measure, within }
    }
    case 'intake':
    case 'rate':
      return { kind: form.kind }
  }
}

type DistributiveOmit<T, K extends PropertyKey> = T extends unknown ? Omit<T, K> : never

/** The limit of the form without bounds yet, to learn its unit from; whole enough for `measureOf` and `limitName`. */
export const draftLimit = (form: NewLimit): Limit =>
  ({ ...subject(form), id: 'new', source: '', status: 'typed', enabled: true, negotiable: true }) as Limit

/** The limit as the draft takes it. @param shown bounds in the shown unit of `measure` */
export function builtLimit(
  form: NewLimit,
  id: string,
  shown: { min?: number | undefined; max?: number | undefined },
  measure: Measure,
): LimitInput {
  return {
    ...subject(form),
    id,
    ...(shown.min === undefined ? {} : { min: measure.stored(shown.min) }),
    ...(shown.max === undefined ? {} : { max: measure.stored(shown.max) }),
  } as LimitInput
}

/** A readable id: what the limit is about. */
export function idBase(form: NewLimit): string {
  if (form.kind === 'nutrient') return form.nutrient
  if (form.kind === 'ratio') return `${form.nutrient}-${form.denominator}`
  return form.kind === 'feeds' ? `feeds-${form.which}` : form.kind
}
