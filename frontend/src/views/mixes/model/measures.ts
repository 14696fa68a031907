import { amountUnit, convertMass, type Basis, type FeedClass, type Limit } from '@maslin/shared'
import type { Words } from './words'

/** How the figures of one limit are shown and typed: the limit's stored unit to the farm's and back, with unit and basis. */
export interface Measure {
  /** Unit behind a figure; empty for a ratio. */
  unit: string
  /** What the figure is of: `a head and day`, `of the diet’s dry matter`; empty for a ratio. */
  basis: string
  shown: (stored: number) => number
  stored: (shown: number) => number
  /** A figure with its unit. */
  text: (stored: number, digits?: number) => string
  /** A difference with its unit: a difference of two percentages is points. */
  difference: (shown: number) => string
}

interface Conversion {
  unit: string
  factor: number
  isPercent: boolean
}

/** Pounds or kilograms; ounces or grams where the bounds are below a tenth of those. */
function weightConversion({ min, max }: Limit, { q }: Words): Conversion {
  const isSmall = Math.max(min ?? 0, max ?? 0) > 0 && q.shownWeight(Math.max(min ?? 0, max ?? 0)) < 0.1
  const whole = q.weightUnit.value
  const unit = isSmall ? (whole === 'lb' ? 'oz' : 'g') : whole
  return { unit: q.unitLabel(unit), factor: convertMass(1, 'kg', unit), isPercent: false }
}

/** How stored figures of the limit become shown ones. */
function conversionOf(limit: Limit, words: Words): Conversion {
  const { q } = words
  const weight = weightConversion(limit, words)
  switch (limit.kind) {
    case 'nutrient':
      if (limit.measure === 'perHeadDay')
        return { unit: amountUnit(limit.nutrient), factor: 1, isPercent: false }
      return {
        unit: q.concentrationUnit(limit.nutrient),
        factor: q.shownConcentration(limit.nutrient, 1),
        isPercent: q.concentrationUnit(limit.nutrient) === '%',
      }
    case 'ratio':
      return { unit: '', factor: 1, isPercent: false }
    case 'feeds':
      return limit.measure.startsWith('share') ? { unit: '%', factor: 100, isPercent: true } : weight
    case 'intake':
    case 'rate':
      return weight
  }
}

function basisKey(limit: Limit, basis: Basis): string | undefined {
  const whole = basis === 'batch' ? 'mix' : 'diet'
  switch (limit.kind) {
    case 'nutrient':
      if (limit.measure === 'perHeadDay') return basis === 'batch' ? 'inBatch' : 'headDay'
      return limit.measure === 'perKgAsFed' ? 'mixAsFed' : `${whole}Dry`
    case 'ratio':
      return undefined
    case 'feeds': {
      const within = limit.within === 'diet' && basis !== 'batch' ? 'diet' : 'mix'
      if (limit.measure === 'shareAsFed') return `${within}AsFed`
      if (limit.measure === 'shareOfDryMatter') return `${within}Dry`
      const per = basis === 'batch' ? 'batch' : 'headDay'
      return limit.measure === 'kgAsFed' ? `${per}AsFed` : `${per}Dry`
    }
    case 'intake':
      return 'headDayDry'
    case 'rate':
      return 'headDayAsFed'
  }
}

/** @param basis of the mix: it decides whether a concentration is one of the mix or of the whole diet */
export function measureOf(limit: Limit, basis: Basis, words: Words): Measure {
  const { unit, factor, isPercent } = conversionOf(limit, words)
  const key = basisKey(limit, basis)
  const { q, t } = words
  const withUnit = (figure: string) => (unit ? `${figure} ${unit}` : figure)
  const figure = (value: number, digits = 3) =>
    Math.abs(value) >= 10 ** digits
      ? q.number(value, { maximumFractionDigits: 0 })
      : q.number(value, { maximumSignificantDigits: digits })
  return {
    unit,
    basis: key ? t(`mixes.basis.of.${key}`) : '',
    shown: (stored) => stored * factor,
    stored: (shown) => shown / factor,
    text: (stored, digits) => withUnit(figure(stored * factor, digits)),
    difference: (shown) =>
      isPercent
        ? t('mixes.measure.points', { count: figure(shown) }, shown === 1 ? 1 : 2)
        : withUnit(figure(shown)),
  }
}

export type FeedName = (feedId: string) => string

function selectionName(limit: Extract<Limit, { kind: 'feeds' }>, nameOf: FeedName, words: Words): string {
  const { of } = limit
  if (of.by === 'forage') return words.t('mixes.limit.forage')
  if (of.by === 'class') return words.t('mixes.limit.class', { name: className(of.class, words) })
  const [first = '', ...others] = of.feedIds.map(nameOf)
  if (others.length === 0) return first
  return others.length < 3
    ? [first, ...others].join(' + ')
    : words.t('mixes.limit.several', { first, count: others.length })
}

export const className = (feedClass: FeedClass, words: Words): string => words.t(`feedClasses.${feedClass}`)

/** What a limit is about: `Crude protein`, `Calcium : phosphorus`, `Forage`. */
export function limitName(limit: Limit, nameOf: FeedName, words: Words): string {
  switch (limit.kind) {
    case 'nutrient':
      return words.t(`nutrients.${limit.nutrient}`)
    case 'ratio':
      return words.t('mixes.limit.ratio', {
        numerator: words.t(`nutrients.${limit.numerator}`),
        denominator: words.t(`nutrients.${limit.denominator}`).toLocaleLowerCase(),
      })
    case 'feeds':
      return selectionName(limit, nameOf, words)
    case 'intake':
      return words.t('mixes.limit.intake')
    case 'rate':
      return words.t('mixes.limit.rate')
  }
}

/** The bounds in words: `at least 214 g a head and day`. */
export function boundsText(limit: { min?: number; max?: number }, measure: Measure, words: Words): string {
  const { min, max } = limit
  const basis = measure.basis
  const say = (kind: string, params: Record<string, string>) =>
    words.t(`mixes.bounds.${kind}`, { ...params, basis }).trim()
  if (min !== undefined && max !== undefined) {
    return min === max
      ? say('exactly', { value: measure.text(min) })
      : say('between', { min: measure.text(min), max: measure.text(max) })
  }
  if (min !== undefined) return say('atLeast', { value: measure.text(min) })
  if (max !== undefined) return say(max === 0 ? 'none' : 'atMost', { value: measure.text(max) })
  return ''
}

/** The largest of 1, 2, 5 times a power of ten that is not above `value`; 0 for nothing. */
export function niceStep(value: number): number {
  if (!(value > 0) || !Number.isFinite(value)) return 0
  const power = 10 ** Math.floor(Math.log10(value))
  const lead = value / power
  return (lead >= 5 - 1e-9 ? 5 : lead >= 2 - 1e-9 ? 2 : 1) * power
}
