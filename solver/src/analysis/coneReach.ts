import type { OptimalOutcome } from '../lp/types'
import { isZeroPrice, ZERO_PRICE, type Optimum } from './optimum'

/** A share of the largest terms below which nothing moves. */
const STILL = 1e-11

/**
 * How far the optimum may be left along the direction that a cone's solution names, in multiples of it, before a limit
 * is met that the optimum does not touch. Up to there the direction's price holds; beyond, it does not, provided every
 * column and row at rest in the solution has a price of its own, because then no other mix is optimal under these
 * prices. Null where that is not so: the range may then be longer.
 */
export function reachAlong(o: Optimum, direction: OptimalOutcome): number | null {
  return isStrict(o, direction) ? firstLimit(o, direction) : null
}

function isStrict(o: Optimum, direction: OptimalOutcome): boolean {
  const { lp, scaled } = o
  const sizes = Float64Array.from(lp.columns, (column) => Math.abs(column.cost))
  for (let i = 0; i < lp.rows.length; i++) {
    const { basis, dual } = direction.rows[i]!
    if (basis === 'basic') continue
    const { lower, upper, entries } = lp.rows[i]!
    if (lower !== upper && isZeroPrice(scaled, dual, i)) return false
    for (const entry of entries) sizes[entry[0]]! += Math.abs(dual * entry[1])
  }
  return lp.columns.every(({ lower, upper }, j) => {
    const { basis, reducedCost } = direction.columns[j]!
    return basis === 'basic' || lower === upper || Math.abs(reducedCost) > ZERO_PRICE * sizes[j]!
  })
}

function firstLimit(o: Optimum, direction: OptimalOutcome): number {
  const { lp, outcome, scaled } = o
  let reach = Infinity
  const meet = (
    rate: number,
    value: number,
    lower: number,
    upper: number,
    atLower: number,
    atUpper: number,
  ) => {
    if (rate > 0 && !atUpper) reach = Math.min(reach, (upper - value) / rate)
    else if (rate < 0 && !atLower) reach = Math.min(reach, (lower - value) / rate)
  }
  let largest = 0
  for (let j = 0; j < lp.columns.length; j++)
    largest = Math.max(largest, Math.abs(direction.columns[j]!.value / scaled.colScale[j]!))
  for (let j = 0; j < lp.columns.length; j++) {
    const rate = direction.columns[j]!.value
    if (Math.abs(rate / scaled.colScale[j]!) <= STILL * largest) continue
    const { lower, upper } = lp.columns[j]!
    meet(rate, outcome.columns[j]!.value, lower, upper, o.columnAtLower[j]!, o.columnAtUpper[j]!)
  }
  for (let i = 0; i < lp.rows.length; i++) {
    const { lower, upper, entries } = lp.rows[i]!
    let rate = 0
    let size = 0
    for (const entry of entries) {
      const term = entry[1] * direction.columns[entry[0]]!.value
      rate += term
      size += Math.abs(term)
    }
    if (Math.abs(rate) <= STILL * size) continue
    meet(rate, outcome.rows[i]!.activity, lower, upper, o.rowAtLower[i]!, o.rowAtUpper[i]!)
  }
  return Math.max(reach, 0)
}
