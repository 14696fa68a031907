import type { BasisStatus } from './types'
import type { ScaledProgram } from './scaled'

/**
 * The square system at the heart of a basis: the rows that rest on a limit against the columns that do not rest on
 * a bound. Everything about the optimum follows from it, in double precision and without the engine: amounts,
 * prices, and how far each may move. A mix has few active limits, so it is small (about 15 × 15 at 60 × 40) and a
 * dense factorisation costs microseconds.
 */

/** Above this size the dense factorisation would cost more than re-solving does. */
const LARGEST_KERNEL = 250
/** Rounding noise of a price and of an amount, as a share of the terms that made it. */
const PRICE_NOISE = 1e-13
const VALUE_NOISE = 1e-12
/** A scaled price or amount this small beside the largest of its kind is what the elimination left of zero. */
const SMALLEST_SHARE = 1e-14
/** A pivot smaller than this, relative to the largest of its column at the start, makes the basis useless. */
const SMALLEST_PIVOT = 1e-11

export interface Basis {
  columns: BasisStatus[]
  rows: BasisStatus[]
}

export interface Kernel {
  /** Positions of the basic columns and of the rows that rest on a limit; equally many. */
  columns: Int32Array
  rows: Int32Array
  /** Position of each column within `columns`, or -1. */
  place: Int32Array
  /** K⁻¹, row-major: entry (c, r) says how basic column c answers to the limit of row r (scaled). */
  inverse: Float64Array
}

/** The scaled limit on which a row rests, NaN where its status names an absent one. */
export function restingLimit(p: ScaledProgram, status: BasisStatus, row: number): number {
  const limit = status === 'upper' ? p.rowUpper[row]! : p.rowLower[row]!
  return Number.isFinite(limit) ? limit : NaN
}

/** The scaled bound on which a column rests. */
export function restingBound(p: ScaledProgram, status: BasisStatus, column: number): number {
  if (status === 'zero') return 0
  return status === 'upper' ? p.colUpper[column]! : p.colLower[column]!
}

/** Factorises the kernel of a basis; null where the basis is not square, singular or too large. */
export function factorise(p: ScaledProgram, basis: Basis): Kernel | null {
  const place = new Int32Array(p.numCols).fill(-1)
  let size = 0
  for (let j = 0; j < p.numCols; j++) if (basis.columns[j] === 'basic') place[j] = size++
  if (size > LARGEST_KERNEL) return null
  const columns = new Int32Array(size)
  for (let j = 0; j < p.numCols; j++) if (place[j]! >= 0) columns[place[j]!] = j
  const rows = new Int32Array(size)
  let count = 0
  for (let i = 0; i < p.numRows; i++) {
    if (basis.rows[i] === 'basic') continue
    if (count === size) return null
    rows[count++] = i
  }
  if (count !== size) return null
  const dense = new Float64Array(size * size)
  for (let r = 0; r < size; r++) {
    const i = rows[r]!
    for (let k = p.starts[i]!; k < p.starts[i + 1]!; k++) {
      const c = place[p.indices[k]!]!
      if (c >= 0) dense[r * size + c] = p.values[k]!
    }
  }
  const inverse = invert(dense, size)
  return inverse && { columns, rows, place, inverse }
}

/** Gauss-Jordan with partial pivoting, in place on a row-major copy; null where singular. */
function invert(a: Float64Array, n: number): Float64Array | null {
  const order = new Int32Array(n)
  const largest = new Float64Array(n)
  for (let r = 0; r < n; r++) {
    order[r] = r
    for (let c = 0; c < n; c++) largest[c] = Math.max(largest[c]!, Math.abs(a[r * n + c]!))
  }
  for (let step = 0; step < n; step++) {
    let best = step
    for (let r = step + 1; r < n; r++)
      if (Math.abs(a[r * n + step]!) > Math.abs(a[best * n + step]!)) best = r
    const pivot = a[best * n + step]!
    if (!(Math.abs(pivot) > SMALLEST_PIVOT * largest[step]!)) return null
    if (best !== step) {
      for (let c = 0; c < n; c++) {
        const held = a[step * n + c]!
        a[step * n + c] = a[best * n + c]!
        a[best * n + c] = held
      }
      const held = order[step]!
      order[step] = order[best]!
      order[best] = held
    }
    const top = step * n
    a[top + step] = 1
    for (let c = 0; c < n; c++) a[top + c]! /= pivot
    for (let r = 0; r < n; r++) {
      if (r === step) continue
      const factor = a[r * n + step]!
      if (factor === 0) continue
      a[r * n + step] = 0
      for (let c = 0; c < n; c++) a[r * n + c]! -= factor * a[top + c]!
    }
  }
  const inverse = new Float64Array(n * n)
  for (let c = 0; c < n; c++) {
    const target = order[c]!
    for (let r = 0; r < n; r++) inverse[r * n + target] = a[r * n + c]!
  }
  return inverse
}

/** Amounts and prices of a basis in scaled terms, with how large the terms were that cancelled in each. */
export interface BasicSolution {
  value: Float64Array
  /** Per column: Σ|terms| of the sum that gave the value; rounding is some 1e-16 of it. */
  valueSize: Float64Array
  /** Per column: below this distance from a bound, or from zero, a value is on it. */
  valueNoise: Float64Array
  dual: Float64Array
}

const largestOf = (values: Float64Array): number => {
  let largest = 0
  for (let k = 0; k < values.length; k++) largest = Math.max(largest, Math.abs(values[k]!))
  return largest
}

/** Solves the basis once more, from the data: the engine's own values carry its update errors. */
export function solveBasis(p: ScaledProgram, basis: Basis, kernel: Kernel): BasicSolution {
  const size = kernel.rows.length
  const value = new Float64Array(p.numCols)
  const valueSize = new Float64Array(p.numCols)
  for (let j = 0; j < p.numCols; j++)
    if (kernel.place[j]! < 0) {
      value[j] = restingBound(p, basis.columns[j]!, j)
      valueSize[j] = Math.abs(value[j]!)
    }
  const rest = new Float64Array(size)
  const restSize = new Float64Array(size)
  for (let r = 0; r < size; r++) {
    const i = kernel.rows[r]!
    let left = restingLimit(p, basis.rows[i]!, i)
    let whole = Math.abs(left)
    for (let k = p.starts[i]!; k < p.starts[i + 1]!; k++) {
      const j = p.indices[k]!
      if (kernel.place[j]! >= 0 || value[j] === 0) continue
      const term = p.values[k]! * value[j]!
      left -= term
      whole += Math.abs(term)
    }
    rest[r] = left
    restSize[r] = whole
  }
  const dual = new Float64Array(p.numRows)
  const dualSize = new Float64Array(p.numRows)
  for (let c = 0; c < size; c++) {
    const j = kernel.columns[c]!
    let sum = 0
    let whole = 0
    for (let r = 0; r < size; r++) {
      const weight = kernel.inverse[c * size + r]!
      sum += weight * rest[r]!
      whole += Math.abs(weight) * restSize[r]!
    }
    value[j] = sum
    valueSize[j] = whole
    const cost = p.cost[j]!
    if (cost === 0) continue
    for (let r = 0; r < size; r++) {
      const term = kernel.inverse[c * size + r]! * cost
      dual[kernel.rows[r]!]! += term
      dualSize[kernel.rows[r]!]! += Math.abs(term)
    }
  }
  // What is left of terms that cancel is no price: beside a price of exactly zero it would look like a wrong sign.
  const least = SMALLEST_SHARE * largestOf(dual)
  for (let i = 0; i < p.numRows; i++)
    if (Math.abs(dual[i]!) <= Math.max(PRICE_NOISE * dualSize[i]!, least)) dual[i] = 0
  const whole = largestOf(value)
  const valueNoise = valueSize.map((size) => Math.max(VALUE_NOISE * size, SMALLEST_SHARE * whole))
  return { value, valueSize, valueNoise, dual }
}
