import type { Kernel } from '../lp/kernel'
import type { Optimum } from './optimum'

/** A rate below this (scaled) moves nothing. */
const STILL = 1e-11

/**
 * How far the limit of each row at rest may move before another limit is met, by ratio tests on the factorised
 * basis. As far as that, and where it is not nothing, the basis prices hold: the basis stays feasible, and it stays
 * optimal whatever the limits. Beyond, they end where the amounts are the only ones. In units of the row, as the
 * limit's own new value.
 */
export class KernelRanges {
  private readonly rates: Float64Array
  private readonly freeRows: Int32Array

  /** Works out how the rows that rest on no limit answer to those that do. */
  constructor(
    private readonly o: Optimum,
    private readonly kernel: Kernel,
  ) {
    const { scaled } = o
    const size = kernel.rows.length
    this.freeRows = Int32Array.from(o.basis.rows.flatMap((status, i) => (status === 'basic' ? [i] : [])))
    this.rates = new Float64Array(this.freeRows.length * size)
    for (let q = 0; q < this.freeRows.length; q++) {
      const i = this.freeRows[q]!
      for (let k = scaled.starts[i]!; k < scaled.starts[i + 1]!; k++) {
        const c = kernel.place[scaled.indices[k]!]!
        if (c < 0) continue
        const value = scaled.values[k]!
        for (let r = 0; r < size; r++) this.rates[q * size + r]! += value * kernel.inverse[c * size + r]!
      }
    }
  }

  /** The largest moves down and up (≤ 0, ≥ 0; scaled) of the limit of the kernel's row `r`. */
  private moves(r: number): [number, number] {
    const { scaled, outcome } = this.o
    const size = this.kernel.rows.length
    let down = -Infinity
    let up = Infinity
    const meet = (rate: number, below: number, above: number) => {
      if (Math.abs(rate) <= STILL) return
      const [low, high] = rate > 0 ? [below / rate, above / rate] : [above / rate, below / rate]
      if (low > down) down = low
      if (high < up) up = high
    }
    for (let c = 0; c < size; c++) {
      const j = this.kernel.columns[c]!
      const value = outcome.columns[j]!.value / scaled.colScale[j]!
      const below = this.o.columnAtLower[j] ? 0 : scaled.colLower[j]! - value
      const above = this.o.columnAtUpper[j] ? 0 : scaled.colUpper[j]! - value
      meet(this.kernel.inverse[c * size + r]!, below, above)
    }
    for (let q = 0; q < this.freeRows.length; q++) {
      const i = this.freeRows[q]!
      const activity = outcome.rows[i]!.activity * scaled.rowScale[i]!
      const below = this.o.rowAtLower[i] ? 0 : scaled.rowLower[i]! - activity
      const above = this.o.rowAtUpper[i] ? 0 : scaled.rowUpper[i]! - activity
      meet(this.rates[q * size + r]!, below, above)
    }
    return [Math.min(down, 0), Math.max(up, 0)]
  }

  /**
   * The largest amount of a column that rests at its lower bound, were it to enter: until a basic column or row meets
   * a limit, or it meets its own; null where nothing stops it. In units of the column.
   */
  largestEntry(column: number): number | null {
    const { scaled, outcome, lp } = this.o
    const size = this.kernel.rows.length
    const touched = new Float64Array(scaled.numRows)
    for (let i = 0; i < scaled.numRows; i++)
      for (let k = scaled.starts[i]!; k < scaled.starts[i + 1]!; k++)
        if (scaled.indices[k] === column) touched[i] = scaled.values[k]!
    let most = scaled.colUpper[column]! - scaled.colLower[column]!
    const meet = (rate: number, below: number, above: number) => {
      if (Math.abs(rate) > STILL) most = Math.min(most, Math.max((rate > 0 ? above : below) / rate, 0))
    }
    for (let c = 0; c < size; c++) {
      let rate = 0
      for (let r = 0; r < size; r++)
        rate -= this.kernel.inverse[c * size + r]! * touched[this.kernel.rows[r]!]!
      const j = this.kernel.columns[c]!
      const value = outcome.columns[j]!.value / scaled.colScale[j]!
      meet(rate, scaled.colLower[j]! - value, scaled.colUpper[j]! - value)
    }
    for (let q = 0; q < this.freeRows.length; q++) {
      const i = this.freeRows[q]!
      let rate = touched[i]!
      for (let r = 0; r < size; r++) rate -= this.rates[q * size + r]! * touched[this.kernel.rows[r]!]!
      const activity = outcome.rows[i]!.activity * scaled.rowScale[i]!
      meet(rate, scaled.rowLower[i]! - activity, scaled.rowUpper[i]! - activity)
    }
    return most === Infinity ? null : lp.columns[column]!.lower + most * scaled.colScale[column]!
  }

  /** The lowest and the highest value the limit of row `i` may take; null where the row rests on no limit. */
  of(row: number, limit: number): { downTo: number; upTo: number } | null {
    const r = this.kernel.rows.indexOf(row)
    if (r < 0) return null
    const [down, up] = this.moves(r)
    const scale = this.o.scaled.rowScale[row]!
    return { downTo: limit + down / scale, upTo: limit + up / scale }
  }
}
