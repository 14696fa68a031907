import type { Kernel } from '../lp/kernel'
import type { Optimum } from './optimum'

const STILL = 1e-11

/**
 * The range of a column's cost over which the factorised basis stays optimal, by the ratio test on the reduced costs.
 * It is the range over which the amounts stay optimal only where no basic column or row touches a limit; the caller
 * makes sure of that. In cost per unit of the column.
 */
export function basisCostRange(o: Optimum, kernel: Kernel, column: number): { lower: number; upper: number } {
  const { lp, outcome, scaled, basis } = o
  const { cost } = lp.columns[column]!
  const c = kernel.place[column]!
  if (c < 0) {
    const reduced = outcome.columns[column]!.reducedCost
    const fixed = lp.columns[column]!.lower === lp.columns[column]!.upper
    if (fixed) return { lower: -Infinity, upper: Infinity }
    if (basis.columns[column] === 'upper') return { lower: -Infinity, upper: cost - reduced }
    return { lower: cost - reduced, upper: basis.columns[column] === 'zero' ? cost - reduced : Infinity }
  }
  // Raising the cost by t changes the price of kernel row r by t · inverse(c, r), hence every reduced cost.
  const size = kernel.rows.length
  const prices = new Float64Array(scaled.numRows)
  for (let r = 0; r < size; r++) prices[kernel.rows[r]!] = kernel.inverse[c * size + r]!
  const shift = new Float64Array(scaled.numCols)
  for (let r = 0; r < size; r++) {
    const i = kernel.rows[r]!
    for (let k = scaled.starts[i]!; k < scaled.starts[i + 1]!; k++)
      shift[scaled.indices[k]!]! -= prices[i]! * scaled.values[k]!
  }
  let down = -Infinity
  let up = Infinity
  /** A quantity that must keep its sign (`floor` 1: ≥ 0, −1: ≤ 0), moving at `rate`. */
  const keep = (value: number, rate: number, floor: 1 | -1) => {
    if (Math.abs(rate) <= STILL) return
    const room = Math.max(value * floor, 0) / Math.abs(rate)
    if (rate * floor < 0) up = Math.min(up, room)
    else down = Math.max(down, -room)
  }
  for (let j = 0; j < scaled.numCols; j++) {
    if (kernel.place[j]! >= 0 || scaled.colLower[j] === scaled.colUpper[j]) continue
    const reduced = outcome.columns[j]!.reducedCost * scaled.colScale[j]! * scaled.costScale
    const status = basis.columns[j]!
    if (status !== 'upper') keep(reduced, shift[j]!, 1)
    if (status !== 'lower') keep(reduced, shift[j]!, -1)
  }
  for (let r = 0; r < size; r++) {
    const i = kernel.rows[r]!
    if (scaled.rowLower[i] === scaled.rowUpper[i]) continue
    const dual = (outcome.rows[i]!.dual / scaled.rowScale[i]!) * scaled.costScale
    keep(dual, prices[i]!, basis.rows[i] === 'upper' ? -1 : 1)
  }
  const unit = scaled.colScale[column]! * scaled.costScale
  return { lower: cost + down / unit, upper: cost + up / unit }
}
