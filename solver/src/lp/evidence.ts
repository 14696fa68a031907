import type { LinearProgram } from './types'

/**
 * Programs whose optimum is the evidence for another program's verdict. They serve where an engine claims
 * "infeasible" or "unbounded" without a proof, and for every engine alike.
 */

/**
 * Always feasible within the column bounds: every limit may give way at a cost. Its optimum is zero exactly when the
 * program can be met, else its prices are a Farkas ray of the program.
 */
export function elasticProgram(lp: LinearProgram): LinearProgram {
  const columns = lp.columns.map((column) => ({ ...column, cost: 0, integer: false }))
  const rows = lp.rows.map((row) => ({ ...row, entries: [...row.entries] }))
  lp.rows.forEach((row, i) => {
    const largest = row.entries.reduce((most, [, value]) => Math.max(most, Math.abs(value)), 0)
    const cost = largest > 0 ? 1 / largest : 1
    if (row.lower > -Infinity) {
      rows[i]!.entries.push([columns.length, 1])
      columns.push({ id: `short of row ${i}`, cost, lower: 0, upper: Infinity, integer: false })
    }
    if (row.upper < Infinity) {
      rows[i]!.entries.push([columns.length, -1])
      columns.push({ id: `over row ${i}`, cost, lower: 0, upper: Infinity, integer: false })
    }
  })
  return { columns, rows }
}

/** The steepest direction of length at most one per column that keeps every limit; always feasible, by zero. */
export function recessionProgram(lp: LinearProgram): LinearProgram {
  return {
    columns: lp.columns.map(({ id, cost, lower, upper }) => ({
      id,
      cost,
      lower: lower > -Infinity ? 0 : -1,
      upper: upper < Infinity ? 0 : 1,
    })),
    rows: lp.rows.map(({ id, lower, upper, entries }) => ({
      id,
      lower: lower > -Infinity ? 0 : -Infinity,
      upper: upper < Infinity ? 0 : Infinity,
      entries,
    })),
  }
}

/** The same limits without a cost: any optimum is a mix that meets them. */
export function feasibilityProgram(lp: LinearProgram): LinearProgram {
  return { columns: lp.columns.map((column) => ({ ...column, cost: 0 })), rows: lp.rows }
}

/** The program with its whole-number columns held at the given amounts. */
export function withIntegersFixed(lp: LinearProgram, amounts: ArrayLike<number>): LinearProgram {
  return {
    columns: lp.columns.map((column, j) => {
      if (!column.integer) return column
      const whole = Math.round(amounts[j]!)
      return { ...column, lower: whole, upper: whole, integer: false }
    }),
    rows: lp.rows,
  }
}
