import type { LinearProgram, OptimalOutcome } from '../lp'
import { finishOptimum } from '../lp/answer'
import { scaleProgram } from '../lp/scaled'
import type { Solve } from './deadline'

/** How much the second aim weighs beside the cost, tried from large to small. */
const WEIGHTS = [1e-4, 1e-5, 1e-6]
/** A reduced cost or price this small beside the terms behind it means that another mix may cost the same. */
const ZERO = 1e-9
/** Difference in cost, relative to its terms, that still counts as the same. */
const SAME_COST = 1e-10

export interface Settled {
  outcome: OptimalOutcome
  /** Other mixes cost the same. */
  several: boolean
}

/**
 * Of several mixes that cost the same, chooses always the same one, whatever the engine and the order of the feeds:
 * the least by a second aim whose weights follow from the columns' ids. The basis found with the second aim added at a
 * small weight is solved again with the true costs, and taken only where it is certified and costs the same.
 */
export async function settleTies(lp: LinearProgram, optimal: OptimalOutcome, solve: Solve): Promise<Settled> {
  if (!mayTie(lp, optimal)) return { outcome: optimal, several: false }
  const chosen = await leaning(lp, optimal, 1, solve)
  if (!chosen) return { outcome: optimal, several: false }
  const other = await leaning(lp, optimal, -1, solve)
  return { outcome: chosen, several: other !== undefined && differ(chosen, other) }
}

/** Whether some column or row at rest has no price, so that it might move at no cost. */
function mayTie(lp: LinearProgram, optimal: OptimalOutcome): boolean {
  const sizes = lp.columns.map(({ cost }) => Math.abs(cost))
  lp.rows.forEach((row, i) => {
    for (const [column, value] of row.entries) sizes[column]! += Math.abs(value * optimal.rows[i]!.dual)
  })
  const largest = Math.max(...sizes)
  return (
    optimal.columns.some(
      ({ basis, reducedCost }, j) =>
        basis !== 'basic' && Math.abs(reducedCost) <= ZERO * Math.max(sizes[j]!, 1e-3 * largest),
    ) ||
    optimal.rows.some(({ basis, dual }, i) => {
      const { lower, upper, entries } = lp.rows[i]!
      if (basis === 'basic' || lower === upper) return false
      return entries.every(([, value]) => Math.abs(dual * value) <= ZERO * largest)
    })
  )
}

async function leaning(
  lp: LinearProgram,
  optimal: OptimalOutcome,
  direction: 1 | -1,
  solve: Solve,
): Promise<OptimalOutcome | undefined> {
  const scaled = scaleProgram(lp)
  const price = Math.max(...lp.columns.map(({ cost }) => Math.abs(cost)))
  const terms = lp.columns.reduce((sum, { cost }, j) => sum + Math.abs(cost * optimal.columns[j]!.value), 0)
  for (const weight of WEIGHTS) {
    const columns = lp.columns.map((column) => ({
      ...column,
      cost: column.cost + direction * weight * price * (0.5 + 0.5 * fractionOf(column.id)),
    }))
    const leaned = await solve({ columns, rows: lp.rows })
    if (leaned.status !== 'optimal') continue
    const basis = {
      columns: leaned.columns.map((column) => column.basis),
      rows: leaned.rows.map((row) => row.basis),
    }
    const unsolved = {
      value: new Float64Array(columns.length),
      dual: new Float64Array(lp.rows.length),
      basis,
    }
    const outcome = finishOptimum(lp, scaled, unsolved, leaned.engine, optimal.milliseconds)
    if (outcome.certificate.valid && Math.abs(outcome.objective - optimal.objective) <= SAME_COST * terms)
      return outcome
  }
  return undefined
}

function differ(a: OptimalOutcome, b: OptimalOutcome): boolean {
  const total = a.columns.reduce((sum, { value }) => sum + Math.abs(value), 0)
  return a.columns.some(({ value }, j) => Math.abs(value - b.columns[j]!.value) > 1e-7 * total)
}

/** A number in [0, 1) that follows from the text alone (FNV-1a, 32 bit). */
function fractionOf(text: string): number {
  let hash = 0x811c9dc5
  for (let i = 0; i < text.length; i++) hash = Math.imul(hash ^ text.charCodeAt(i), 0x01000193)
  return (hash >>> 0) / 2 ** 32
}
