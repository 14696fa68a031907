import { beforeAll, expect, it } from 'vitest'
import type { FormulationInput, Limit, NutrientId } from '@maslin/shared'
import { solveMix, type LinearProgram } from '@maslin/solver'
import { eatenWith } from '../../solver/src/formulation/testing/plainReading'
import { randomMix } from '../../solver/src/formulation/testing/randomMixes'
import { requireGlpsol, solveWithGlpsol } from './lp-glpk'

/**
 * Whole mixes against a second formulation that shares nothing with the product's: every limit is worked out feed by
 * feed in plain arithmetic, its coefficients are what one kilogram of a feed changes, and GLPK finds the least cost.
 * Seeds are fixed. Pass line: 1e-6 of the least cost.
 */

const SEEDS = 60
const RELATIVE = 1e-6

beforeAll(requireGlpsol)

type Eaten = ReturnType<typeof eatenWith>
type End = 'low' | 'high'

const sum = (eaten: Eaten, weight: (part: Eaten[number]) => number): number =>
  eaten.reduce((total, part) => total + part.dry * weight(part), 0)

/** Content per kg of dry matter: of an interval the unsafe end, of an unknown value nothing or the assumed high one. */
function content(input: FormulationInput, { feed }: Eaten[number], nutrient: NutrientId, end: End): number {
  const known = feed.values[nutrient]
  if (!known) return end === 'low' ? 0 : input.assumedHighs.any![nutrient]!.value
  return known[end] ?? known.value
}

/** How far a diet lies above `bound` in the limit's measure, times whatever the measure is per. */
function excess(input: FormulationInput, limit: Limit, end: End, bound: number, eaten: Eaten): number {
  const mixOnly = eaten.filter((part) => part.inMix)
  const heads = input.basis === 'batch' ? input.batchDryMatterKg / input.group.intakeDryMatterKg : 1
  const asFed = (part: Eaten[number]): number => 1 / part.feed.dryMatter
  switch (limit.kind) {
    case 'nutrient': {
      const whole = limit.measure === 'perKgAsFed' ? mixOnly : eaten
      const amount = sum(whole, (part) => content(input, part, limit.nutrient, end))
      if (limit.measure === 'perHeadDay') return amount - bound * heads
      return amount - bound * sum(whole, limit.measure === 'perKgAsFed' ? asFed : () => 1)
    }
    case 'ratio': {
      const other = end === 'low' ? 'high' : 'low'
      const above = sum(eaten, (part) => content(input, part, limit.numerator, end))
      return above - bound * sum(eaten, (part) => content(input, part, limit.denominator, other))
    }
    case 'feeds': {
      const { of } = limit
      const whole = limit.within === 'mix' ? mixOnly : eaten
      const chosen = whole.filter(({ feed }) =>
        of.by === 'feeds' ? of.feedIds.includes(feed.id) : of.by === 'forage' && feed.forage,
      )
      if (limit.measure === 'kgDryMatter') return sum(chosen, () => 1) - bound
      if (limit.measure === 'kgAsFed') return sum(chosen, asFed) - bound
      const weight = limit.measure === 'shareAsFed' ? asFed : () => 1
      return sum(chosen, weight) - bound * sum(whole, weight)
    }
    case 'intake':
      return sum(eaten, () => 1) - bound * heads
    case 'rate':
      return sum(mixOnly, asFed) - bound * heads
  }
}

/** The mix as a program in kilograms as fed, and what the base diet costs without any of it. */
function plainProgram(input: FormulationInput): { lp: LinearProgram; constant: number } {
  const none = eatenWith(input, new Map())
  const oneKg = input.feeds.map(({ id }) => eatenWith(input, new Map([[id, 1]])))
  const row = (id: string, value: (eaten: Eaten) => number, side: 'min' | 'max' | 'equal') => {
    const start = value(none)
    const entries = oneKg.map((eaten, j): [number, number] => [j, value(eaten) - start])
    return {
      id,
      lower: side === 'max' ? -Infinity : -start,
      upper: side === 'min' ? Infinity : -start,
      entries: entries.filter(([, change]) => Math.abs(change) > 1e-12),
    }
  }
  const cost = (eaten: Eaten): number =>
    sum(eaten, ({ feed, inMix }) => {
      const waste = inMix ? 0 : input.baseDiet.find(({ feedId }) => feedId === feed.id)!.wasteShare
      return feed.pricePerKg! / feed.dryMatter / (1 - waste)
    })
  const rows = input.limits.flatMap((limit) =>
    (['min', 'max'] as const).flatMap((side) => {
      const bound = limit[side]
      if (bound === undefined) return []
      const end = side === 'min' ? 'low' : 'high'
      return [row(`${side} ${limit.id}`, (eaten) => excess(input, limit, end, bound, eaten), side)]
    }),
  )
  if (input.basis === 'batch')
    rows.push(row('batch', (eaten) => sum(eaten, () => 1) - input.batchDryMatterKg, 'equal'))
  const forage = input.baseDiet.find(({ mode }) => mode === 'freeChoice')
  // Nobody eats less than no hay.
  if (forage && input.basis === 'besideForage')
    rows.push(row('hay', (eaten) => sum(eaten, ({ feed }) => (feed.id === forage.feedId ? 1 : 0)), 'min'))
  const constant = cost(none)
  const columns = input.feeds.map(({ id }, j) => ({
    id,
    cost: cost(oneKg[j]!) - constant,
    lower: 0,
    upper: Infinity,
  }))
  return { lp: { columns, rows }, constant }
}

it.each(['batch', 'perHead', 'besideForage'] as const)(
  'mixes cost what GLPK finds for their plain description, basis %s',
  async (basis) => {
    let checked = 0
    const check = async (seed: number) => {
      const { input } = randomMix(seed, { basis, round: seed % 2 === 0, unknown: seed % 3 === 0 ? 0.2 : 0 })
      const answer = await solveMix(input)
      const { lp, constant } = plainProgram(input)
      const glpk = await solveWithGlpsol(lp)
      const name = `${basis} ${seed}`
      expect([answer.status, glpk.status], name).toEqual(['optimal', 'optimal'])
      if (answer.status !== 'optimal') return
      const least = glpk.objective + constant
      expect(Math.abs(answer.cost.least - least), name).toBeLessThanOrEqual(RELATIVE * least)
      checked++
    }
    await Promise.all(Array.from({ length: SEEDS }, (_, k) => check(7000 + k)))
    expect(checked).toBe(SEEDS)
  },
)
