import type { FormulationInput, LimitResult, Margin, OptimalAnswer } from '@maslin/shared'
import { niceStep, type Measure } from './measures'
import { joined, rich, type Run, type Words } from './words'

/** Days of the period that costs at the margin are told for, with the whole group. */
export const PERIOD_DAYS = 30

/** Factor from the answer's cost basis to the cost of the whole group for 30 days. */
export function groupPeriodFactor(answer: OptimalAnswer, input: FormulationInput): number {
  if (answer.costBasis === 'headDay') return input.group.heads * PERIOD_DAYS
  return answer.cost.least > 0 ? answer.cost.perGroup30Days / answer.cost.least : 1
}

/** Factor from the answer's cost basis to the cost per head and day. */
export const headDayFactor = (answer: OptimalAnswer): number =>
  answer.costBasis === 'headDay' ? 1 : answer.cost.least > 0 ? answer.cost.perHeadDay / answer.cost.least : 1

/** The bound a result rests on, in the limit's stored unit. */
export function boundOf(result: LimitResult): number {
  const bound = result.bindingSide === 'max' ? result.max : result.min
  return bound ?? result.value
}

const price = (margin: Margin | undefined): number => Math.abs(margin?.perUnit ?? 0)

/**
 * How dear a limit is, free of its unit: cost of one percent of the bound at the dearer of its two prices. Orders limits.
 */
export function dearness(result: LimitResult): number {
  return Math.max(price(result.raise), price(result.lower)) * Math.abs(boundOf(result)) * 0.01
}

/** A step of one direction, on the shown axis. */
interface Step {
  size: number
  /** The price holds for no more than a sliver of the bound, so that the step is told as a rate. */
  rate: boolean
}

/**
 * A round step for the words, in the shown unit: about a twentieth of the bound, less where the price holds for less, so
 * that what is said is true for the whole step.
 */
export function stepOf(margin: Margin, result: LimitResult, measure: Measure): Step {
  const bound = boundOf(result)
  const whole = Math.abs(measure.shown(bound)) || 1
  const reach = margin.until === undefined ? Infinity : Math.abs(measure.shown(margin.until - bound))
  if (reach < whole * 0.002) return { size: niceStep(whole * 0.01), rate: true }
  return { size: niceStep(Math.min(whole * 0.05, reach)), rate: false }
}

/**
 * Change of cost by one percent of the bound at today's margin, in the cost basis times `factor`; undefined where the move
 * is impossible. Sets limits of different units side by side.
 */
export function percentCost(
  margin: Margin | undefined,
  result: LimitResult,
  factor: number,
): number | undefined {
  if (!margin || margin.impossible || margin.perUnit === undefined) return undefined
  return margin.perUnit * Math.abs(boundOf(result)) * 0.01 * factor
}

/** A value told apart from the bound it starts at: with more digits where the usual ones would print the same. */
function until(value: number, bound: number, measure: Measure): string {
  for (const digits of [3, 4, 5, 6]) {
    const text = measure.text(value, digits)
    if (text !== measure.text(bound, digits)) return text
  }
  return measure.text(value, 6)
}

function direction(
  margin: Margin | undefined,
  way: 'more' | 'less',
  result: LimitResult,
  measure: Measure,
  factor: number,
  words: Words,
): Run[] | undefined {
  if (!margin) return undefined
  if (margin.impossible || margin.perUnit === undefined)
    return rich(words, `mixes.margin.${way}.impossible`, {})
  const { size, rate } = stepOf(margin, result, measure)
  const change = margin.perUnit * measure.stored(size) * factor
  const kind =
    Math.abs(change) < 0.005 ? (change === 0 ? 'nothing' : 'hardly') : change > 0 ? 'costs' : 'saves'
  const amount: Run = { text: words.q.money(Math.abs(change)), tone: change > 0 ? 'cost' : 'save' }
  const parts = { step: measure.difference(size), amount }
  if (rate) return rich(words, `mixes.margin.${way}.${kind}Here`, parts)
  if (margin.until === undefined) return rich(words, `mixes.margin.${way}.${kind}`, parts)
  const end = until(margin.until, boundOf(result), measure)
  return rich(words, `mixes.margin.${way}.${kind}Until`, { ...parts, until: end })
}

/**
 * What one step more and one step less of a limit does to the cost, with how far each holds:
 * `10 g more costs $1.70, up to 233 g. 10 g less saves $1.70, down to 189 g.`
 * @param factor from the answer's cost basis to the period the money is told for
 */
export function marginSentences(result: LimitResult, measure: Measure, factor: number, words: Words): Run[] {
  if (result.state === 'tight' && !result.raise && !result.lower) return rich(words, 'mixes.margin.tight', {})
  const ways = [
    direction(result.raise, 'more', result, measure, factor, words),
    direction(result.lower, 'less', result, measure, factor, words),
  ]
  return joined(ways.filter((runs): runs is Run[] => runs !== undefined))
}
