import type { LinearProgram, MarginalPrice } from '@maslin/solver'

/** The program with one limit of one row moved. */
export function withLimit(lp: LinearProgram, price: MarginalPrice, limit: number): LinearProgram {
  return {
    columns: lp.columns,
    rows: lp.rows.map((row) =>
      row.id !== price.row
        ? row
        : {
            ...row,
            lower: price.side === 'upper' ? row.lower : limit,
            upper: price.side === 'lower' ? row.upper : limit,
          },
    ),
  }
}

/** A step that a limit may be moved by: well above solver noise, and inside the range that the price claims. */
export function stepWithin(price: MarginalPrice, direction: 1 | -1): number | null {
  const move = direction > 0 ? price.more : price.less
  if (move === 'impossible') return null
  const end = 'upTo' in move ? move.upTo : move.downTo
  const size = Math.max(Math.abs(price.limit), Math.abs(price.activity))
  const whole = size > 1e-6 ? size : 1
  const room = Math.abs(end - price.limit)
  // A range that ends where it begins (two corners fallen together) leaves nothing to difference.
  return room < 1e-5 * whole ? null : direction * Math.min(0.9 * room, 0.02 * whole)
}

/** The one-sided price the analysis claims in that direction. */
export function claimed(price: MarginalPrice, direction: 1 | -1): number {
  const move = direction > 0 ? price.more : price.less
  if (move === 'impossible') throw new Error('An impossible move has no price.')
  return move.price
}
