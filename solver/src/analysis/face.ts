import type { LpSession } from '../lp/session'
import { isZeroPrice, ZERO_PRICE, type Optimum } from './optimum'
import { settled } from './workspace'

/**
 * Narrows the program to the mixes that the given prices allow as optimal: a column with a reduced cost stays on its
 * bound, a row with a price stays on its limit. What may still move there moves without changing the prices.
 */
export function narrowToFace(face: LpSession, o: Optimum, duals: ArrayLike<number>, freeColumn = -1): void {
  const { lp, outcome, scaled } = o
  const reduced = lp.columns.map((column) => column.cost)
  const sizes = lp.columns.map((column) => Math.abs(column.cost))
  lp.rows.forEach((row, i) => {
    const price = duals[i]!
    if (price === 0 || isZeroPrice(scaled, price, i)) {
      face.setRowBounds(i, row.lower, row.upper)
      return
    }
    const limit = price > 0 ? row.lower : row.upper
    face.setRowBounds(i, limit, limit)
    for (const entry of row.entries) {
      const term = price * entry[1]
      reduced[entry[0]]! -= term
      sizes[entry[0]]! += Math.abs(term)
    }
  })
  lp.columns.forEach((column, j) => {
    if (j === freeColumn || Math.abs(reduced[j]!) <= ZERO_PRICE * sizes[j]!)
      face.setColumnBounds(j, column.lower, column.upper)
    else {
      const { value } = outcome.columns[j]!
      face.setColumnBounds(j, value, value)
    }
  })
}

/**
 * The furthest value of a row's limit, moved up (`direction` 1) or down (−1), at which the given prices still are
 * optimal; ±Infinity where they always are. `duals` must be the exact prices in that direction.
 */
export function furthestLimit(
  face: LpSession,
  o: Optimum,
  duals: ArrayLike<number>,
  row: number,
  limit: number,
  other: number,
  direction: 1 | -1,
  until: number,
): number {
  narrowToFace(face, o, duals)
  face.setRowBounds(row, direction > 0 ? limit : other, direction > 0 ? other : limit)
  const costs = new Float64Array(o.lp.columns.length)
  for (const [j, value] of o.lp.rows[row]!.entries) costs[j] = -direction * value
  face.setCosts(costs)
  const outcome = settled(face.solve(until))
  if (outcome.status === 'unbounded') return direction * Infinity
  // The optimum itself lies on the face: "infeasible" can only be rounding, and then nothing may move.
  if (outcome.status === 'infeasible') return limit
  const reached = outcome.rows[row]!.activity
  return direction > 0 ? Math.max(reached, limit) : Math.min(reached, limit)
}

/** The largest amount of a column among the mixes that the given prices allow; null where it has no end. */
export function largestAmount(
  face: LpSession,
  o: Optimum,
  duals: ArrayLike<number>,
  column: number,
  until: number,
): number | null {
  narrowToFace(face, o, duals, column)
  const costs = new Float64Array(o.lp.columns.length)
  costs[column] = -1
  face.setCosts(costs)
  const outcome = settled(face.solve(until))
  if (outcome.status === 'unbounded') return null
  return outcome.status === 'optimal' ? outcome.columns[column]!.value : o.outcome.columns[column]!.value
}
