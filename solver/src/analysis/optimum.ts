import { recallFactorisation } from '../lp/answer'
import { withIntegersFixed } from '../lp/evidence'
import { factorise, solveBasis, type Basis, type Kernel } from '../lp/kernel'
import { scaleProgram, type ScaledProgram } from '../lp/scaled'
import type { LinearProgram, OptimalOutcome } from '../lp/types'

/** Distance from a limit, as a share of the terms behind it, at which it counts as touched. */
const TOUCH = 1e-9
/** A price or reduced cost this small beside the terms behind it counts as zero. */
export const ZERO_PRICE = 1e-9

/** Everything the analyses need to know of one optimum, worked out once. */
export interface Optimum {
  /** The program; whole-number columns are fixed at their amounts. */
  lp: LinearProgram
  outcome: OptimalOutcome
  scaled: ScaledProgram
  basis: Basis
  /** Null where the basis is too large or singular: then everything goes by re-solving. */
  kernel: Kernel | null
  rowAtLower: Uint8Array
  rowAtUpper: Uint8Array
  columnAtLower: Uint8Array
  columnAtUpper: Uint8Array
  /** No basic column or row touches a limit: the prices are the only ones, the same both ways. */
  pricesUnique: boolean
  /** No column or row at rest has a price of zero: the amounts are the only cheapest ones. */
  amountsUnique: boolean
}

/** Works out which limits the optimum touches and whether its prices and amounts are the only ones. */
export function studyOptimum(program: LinearProgram, outcome: OptimalOutcome): Optimum {
  const amounts = outcome.columns.map((column) => column.value)
  const lp = program.columns.some((column) => column.integer) ? withIntegersFixed(program, amounts) : program
  const known = recallFactorisation(lp, outcome)
  const scaled = known?.scaled ?? scaleProgram(lp)
  const basis: Basis = {
    columns: outcome.columns.map((column) => column.basis),
    rows: outcome.rows.map((row) => row.basis),
  }
  const kernel = known?.kernel ?? factorise(scaled, basis)
  const valueSize = known?.valueSize ?? (kernel ? solveBasis(scaled, basis, kernel).valueSize : null)
  const n = lp.columns.length
  const m = lp.rows.length
  const optimum: Optimum = {
    lp,
    outcome,
    scaled,
    basis,
    kernel,
    rowAtLower: new Uint8Array(m),
    rowAtUpper: new Uint8Array(m),
    columnAtLower: new Uint8Array(n),
    columnAtUpper: new Uint8Array(n),
    pricesUnique: kernel !== null,
    amountsUnique: kernel !== null,
  }
  touchColumns(optimum, amounts, valueSize)
  touchRows(optimum, amounts)
  return optimum
}

function touchColumns(o: Optimum, amounts: number[], valueSize: Float64Array | null): void {
  const { lp, outcome, scaled } = o
  const sizes = lp.columns.map((column) => Math.abs(column.cost))
  lp.rows.forEach((row, i) => {
    const price = outcome.rows[i]!.dual
    if (price !== 0) for (const entry of row.entries) sizes[entry[0]]! += Math.abs(price * entry[1])
  })
  for (let j = 0; j < lp.columns.length; j++) {
    const { lower, upper } = lp.columns[j]!
    const value = amounts[j]!
    const near =
      TOUCH * (valueSize ? valueSize[j]! : 1 + Math.abs(value) / scaled.colScale[j]!) * scaled.colScale[j]!
    o.columnAtLower[j] = value - lower <= near ? 1 : 0
    o.columnAtUpper[j] = upper - value <= near ? 1 : 0
    if (o.basis.columns[j] === 'basic') {
      if (o.columnAtLower[j] || o.columnAtUpper[j]) o.pricesUnique = false
    } else if (lower < upper && Math.abs(outcome.columns[j]!.reducedCost) <= ZERO_PRICE * sizes[j]!)
      o.amountsUnique = false
  }
}

function touchRows(o: Optimum, amounts: number[]): void {
  const { lp, outcome, scaled } = o
  for (let i = 0; i < lp.rows.length; i++) {
    const { lower, upper, entries } = lp.rows[i]!
    let size = 0
    for (const entry of entries) size += Math.abs(entry[1] * amounts[entry[0]]!)
    const { activity, dual } = outcome.rows[i]!
    o.rowAtLower[i] = lower > -Infinity && activity - lower <= TOUCH * (size + Math.abs(lower)) ? 1 : 0
    o.rowAtUpper[i] = upper < Infinity && upper - activity <= TOUCH * (size + Math.abs(upper)) ? 1 : 0
    if (o.basis.rows[i] === 'basic') {
      if (o.rowAtLower[i] || o.rowAtUpper[i]) o.pricesUnique = false
    } else if (lower < upper && isZeroPrice(scaled, dual, i)) o.amountsUnique = false
  }
}

/** Whether a row's price is rounding: compared in scaled terms, where costs and coefficients are about one. */
export function isZeroPrice(scaled: ScaledProgram, dual: number, row: number): boolean {
  return Math.abs((dual / scaled.rowScale[row]!) * scaled.costScale) <= ZERO_PRICE
}
