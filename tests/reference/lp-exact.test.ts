import { add, compare, divide, fraction, multiply, subtract, type Fraction } from 'mathjs'
import { expect, it } from 'vitest'
import { solveLinearProgram, type LinearProgram, type OptimalOutcome } from '@maslin/solver'
import { seeded } from './lp-random'

/**
 * Small programs in exact fractions: the basis that the solver ends with is solved again without rounding, and must be
 * feasible and optimal to the last digit. Nothing is compared with another program here, only with arithmetic.
 */

const ZERO = fraction(0)
const plus = (a: Fraction, b: Fraction) => add(a, b) as Fraction
const minus = (a: Fraction, b: Fraction) => subtract(a, b) as Fraction
const times = (a: Fraction, b: Fraction) => multiply(a, b) as Fraction
const sign = (a: Fraction) => Number(compare(a, ZERO))

/** Solves a square system by elimination in fractions; throws where it is singular. */
function solveExactly(matrix: Fraction[][], right: Fraction[]): Fraction[] {
  const rows = matrix.map((row, i) => [...row, right[i]!])
  const n = rows.length
  for (let step = 0; step < n; step++) {
    const pivot = rows.findIndex((row, i) => i >= step && sign(row[step]!) !== 0)
    if (pivot < 0) throw new Error('The basis is singular.')
    ;[rows[step], rows[pivot]] = [rows[pivot]!, rows[step]!]
    const lead = rows[step]![step]!
    rows[step] = rows[step]!.map((value) => divide(value, lead) as Fraction)
    for (let i = 0; i < n; i++) {
      const factor = rows[i]![step]!
      if (i === step || sign(factor) === 0) continue
      rows[i] = rows[i]!.map((value, c) => minus(value, times(factor, rows[step]![c]!)))
    }
  }
  return rows.map((row) => row[n]!)
}

/** Amounts, prices and cost of the outcome's basis, exactly. */
function exactBasis(lp: LinearProgram, outcome: OptimalOutcome) {
  const coefficient = (i: number, j: number) =>
    fraction(lp.rows[i]!.entries.find(([column]) => column === j)?.[1] ?? 0)
  const resting = (status: string, lower: number, upper: number) =>
    fraction(status === 'zero' ? 0 : status === 'upper' ? upper : lower)
  const basic = lp.columns.flatMap((_, j) => (outcome.columns[j]!.basis === 'basic' ? [j] : []))
  const tight = lp.rows.flatMap((_, i) => (outcome.rows[i]!.basis === 'basic' ? [] : [i]))
  const amounts = lp.columns.map(({ lower, upper }, j) =>
    outcome.columns[j]!.basis === 'basic' ? ZERO : resting(outcome.columns[j]!.basis, lower, upper),
  )
  const left = tight.map((i) =>
    amounts.reduce(
      (rest, amount, j) => minus(rest, times(coefficient(i, j), amount)),
      resting(outcome.rows[i]!.basis, lp.rows[i]!.lower, lp.rows[i]!.upper),
    ),
  )
  const found = solveExactly(
    tight.map((i) => basic.map((j) => coefficient(i, j))),
    left,
  )
  basic.forEach((j, k) => (amounts[j] = found[k]!))
  const solved = solveExactly(
    basic.map((j) => tight.map((i) => coefficient(i, j))),
    basic.map((j) => fraction(lp.columns[j]!.cost)),
  )
  const prices = lp.rows.map(() => ZERO)
  tight.forEach((i, k) => (prices[i] = solved[k]!))
  return { amounts, prices, coefficient }
}

function randomProgram(seed: number): LinearProgram {
  const random = seeded(seed)
  const whole = (low: number, high: number) => low + Math.floor((high - low + 1) * random())
  const n = whole(3, 7)
  const columns = Array.from({ length: n }, (_, j) => ({
    id: `x${j}`,
    cost: whole(-2, 9),
    lower: random() < 0.2 ? -whole(0, 3) : 0,
    upper: random() < 0.6 ? whole(3, 12) : Infinity,
  }))
  const rows = Array.from({ length: whole(2, 6) }, (_, i) => {
    const entries = columns.flatMap((_, j): [number, number][] =>
      random() < 0.8 ? [[j, whole(-2, 9) || 1]] : [],
    )
    const level = whole(2, 30)
    const kind = random()
    if (kind < 0.5) return { id: `r${i}`, lower: level, upper: Infinity, entries }
    if (kind < 0.75) return { id: `r${i}`, lower: -Infinity, upper: level, entries }
    return { id: `r${i}`, lower: level, upper: kind < 0.85 ? level : level + whole(1, 9), entries }
  })
  return { columns, rows }
}

it('ends with a basis that is optimal to the last digit', async () => {
  let checked = 0
  for (let seed = 1; seed <= 300; seed++) {
    const lp = randomProgram(seed)
    const outcome = await solveLinearProgram(lp)
    expect(['optimal', 'infeasible', 'unbounded']).toContain(outcome.status)
    if (outcome.status !== 'optimal') continue
    const { amounts, prices, coefficient } = exactBasis(lp, outcome)
    let cost = ZERO
    lp.columns.forEach(({ id, cost: perUnit, lower, upper }, j) => {
      const name = `seed ${seed}, ${id}`
      const amount = amounts[j]!
      if (Number.isFinite(lower)) expect(sign(minus(amount, fraction(lower))), name).toBeGreaterThanOrEqual(0)
      if (Number.isFinite(upper)) expect(sign(minus(fraction(upper), amount)), name).toBeGreaterThanOrEqual(0)
      const reduced = lp.rows.reduce(
        (rest, _, i) => minus(rest, times(prices[i]!, coefficient(i, j))),
        fraction(perUnit),
      )
      const { basis } = outcome.columns[j]!
      if (basis === 'basic' || basis === 'zero') expect(sign(reduced), name).toBe(0)
      else if (lower !== upper)
        expect(sign(reduced) * (basis === 'upper' ? -1 : 1), name).toBeGreaterThanOrEqual(0)
      expect(outcome.columns[j]!.value, name).toBeCloseTo(Number(amount), 11)
      cost = plus(cost, times(fraction(perUnit), amount))
    })
    lp.rows.forEach(({ id, lower, upper, entries }, i) => {
      const name = `seed ${seed}, ${id}`
      const activity = entries.reduce(
        (sum, [j, value]) => plus(sum, times(fraction(value), amounts[j]!)),
        ZERO,
      )
      if (Number.isFinite(lower))
        expect(sign(minus(activity, fraction(lower))), name).toBeGreaterThanOrEqual(0)
      if (Number.isFinite(upper))
        expect(sign(minus(fraction(upper), activity)), name).toBeGreaterThanOrEqual(0)
      if (lower !== upper)
        expect(sign(prices[i]!) * (outcome.rows[i]!.basis === 'upper' ? -1 : 1), name).toBeGreaterThanOrEqual(
          0,
        )
      expect(outcome.rows[i]!.dual, name).toBeCloseTo(Number(prices[i]!), 11)
    })
    expect(outcome.objective).toBeCloseTo(Number(cost), 11)
    checked++
  }
  expect(checked).toBeGreaterThan(150)
})
