import type { LinearProgram } from './types'

/**
 * A program as the engines see it: sparse rows in typed arrays, scaled by powers of two so that scaling itself
 * rounds nothing. With x' = x / columnScale, row' = rowScale · row and cost' = costScale · columnScale · cost:
 * value = columnScale · value', dual = rowScale · dual' / costScale, reduced cost = reduced cost' / (costScale ·
 * columnScale). Zero coefficients are left out.
 */
export interface ScaledProgram {
  numCols: number
  numRows: number
  cost: Float64Array
  colLower: Float64Array
  colUpper: Float64Array
  rowLower: Float64Array
  rowUpper: Float64Array
  starts: Int32Array
  indices: Int32Array
  values: Float64Array
  /** 1 where the column takes whole numbers only; null when none does. */
  integrality: Int32Array | null
  rowScale: Float64Array
  colScale: Float64Array
  costScale: number
}

const bits = new DataView(new ArrayBuffer(8))

/** The power of two at or below `value` (> 0, finite); 1 for 0. */
export function powerOfTwo(value: number): number {
  if (!(value > 0) || value === Infinity) return 1
  if (value < 2.3e-308) return 2.3e-308
  bits.setFloat64(0, value)
  bits.setUint32(0, bits.getUint32(0) & 0x7ff00000)
  bits.setUint32(4, 0)
  return bits.getFloat64(0)
}

const PASSES = 2

/**
 * Equilibrates rows and columns: a mix holds coefficients from 1e-6 (a trace mineral as a fraction) to 1e6 (a
 * premix in mg per kg), and the engines' tolerances are absolute.
 */
export function scaleProgram(lp: LinearProgram): ScaledProgram {
  const n = lp.columns.length
  const m = lp.rows.length
  let size = 0
  for (const row of lp.rows) size += row.entries.length
  const starts = new Int32Array(m + 1)
  const indices = new Int32Array(size)
  const values = new Float64Array(size)
  let k = 0
  for (let i = 0; i < m; i++) {
    const { entries } = lp.rows[i]!
    for (let e = 0; e < entries.length; e++) {
      const entry = entries[e]!
      if (entry[1] === 0) continue
      indices[k] = entry[0]
      values[k++] = entry[1]
    }
    starts[i + 1] = k
  }
  const scaled: ScaledProgram = {
    numCols: n,
    numRows: m,
    cost: new Float64Array(n),
    colLower: new Float64Array(n),
    colUpper: new Float64Array(n),
    rowLower: new Float64Array(m),
    rowUpper: new Float64Array(m),
    starts,
    indices: indices.subarray(0, k),
    values: values.subarray(0, k),
    integrality: lp.columns.some((column) => column.integer)
      ? Int32Array.from(lp.columns, (column) => (column.integer ? 1 : 0))
      : null,
    rowScale: new Float64Array(m).fill(1),
    colScale: new Float64Array(n).fill(1),
    costScale: 1,
  }
  equilibrate(scaled)
  let largestCost = 0
  for (let j = 0; j < n; j++) {
    const { cost, lower, upper } = lp.columns[j]!
    const scale = scaled.colScale[j]!
    scaled.cost[j] = cost * scale
    largestCost = Math.max(largestCost, Math.abs(cost * scale))
    scaled.colLower[j] = lower / scale
    scaled.colUpper[j] = upper / scale
  }
  scaled.costScale = 1 / powerOfTwo(largestCost)
  for (let j = 0; j < n; j++) scaled.cost[j]! *= scaled.costScale
  for (let i = 0; i < m; i++) {
    scaled.rowLower[i] = lp.rows[i]!.lower * scaled.rowScale[i]!
    scaled.rowUpper[i] = lp.rows[i]!.upper * scaled.rowScale[i]!
  }
  return scaled
}

/** Finds the scales by geometric means of the extremes, then brings the largest of each row to about one. */
function equilibrate(p: ScaledProgram): void {
  const { numRows: m, numCols: n, starts, indices, values, rowScale, colScale, integrality } = p
  const largest = new Float64Array(n)
  const smallest = new Float64Array(n)
  for (let pass = 0; pass <= PASSES; pass++) {
    const last = pass === PASSES
    largest.fill(0)
    smallest.fill(Infinity)
    for (let i = 0; i < m; i++) {
      let high = 0
      let low = Infinity
      for (let k = starts[i]!; k < starts[i + 1]!; k++) {
        const size = Math.abs(values[k]!) * colScale[indices[k]!]!
        if (size > high) high = size
        if (size < low) low = size
      }
      if (high === 0) continue
      const scale = 1 / powerOfTwo(last ? high : Math.sqrt(high) * Math.sqrt(low))
      rowScale[i] = scale
      if (last) continue
      for (let k = starts[i]!; k < starts[i + 1]!; k++) {
        const j = indices[k]!
        const size = Math.abs(values[k]!) * scale
        if (size > largest[j]!) largest[j] = size
        if (size < smallest[j]!) smallest[j] = size
      }
    }
    if (last) break
    for (let j = 0; j < n; j++)
      if (largest[j]! > 0 && !integrality?.[j])
        colScale[j] = 1 / powerOfTwo(Math.sqrt(largest[j]!) * Math.sqrt(smallest[j]!))
  }
  for (let i = 0; i < m; i++)
    for (let k = starts[i]!; k < starts[i + 1]!; k++) values[k]! *= rowScale[i]! * colScale[indices[k]!]!
}
