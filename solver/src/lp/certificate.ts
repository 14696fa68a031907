import type { Certificate, LinearProgram, OptimalOutcome, Outcome } from './types'

/**
 * Checks an answer against the program as the caller gave it. Deliberately naive and apart: it shares no code with
 * the engines, the scaling or the polishing, so that a mistake there cannot hide here.
 */

/** Largest relative error an answer may carry. */
export const TOLERANCE = 1e-7
/** Smallest relative excess that counts as a proof of infeasibility. */
export const PROOF_TOLERANCE = 1e-9

const ratio = (part: number, whole: number): number => (part === 0 ? 0 : part / whole)

/** How far `value` lies outside [lower, upper]. */
const outside = (value: number, lower: number, upper: number): number =>
  Math.max(value < lower ? lower - value : 0, value > upper ? value - upper : 0)

/**
 * The certificate of any outcome. A stopped or invalid outcome claims nothing and is never valid.
 */
export function checkOutcome(lp: LinearProgram, outcome: Outcome): Certificate {
  switch (outcome.status) {
    case 'optimal':
      return checkOptimal(lp, outcome)
    case 'infeasible':
      return outcome.ray.length === 0 && lp.columns.some((column) => column.integer)
        ? { valid: true, tolerance: PROOF_TOLERANCE, bySearch: true, failures: [] }
        : checkInfeasible(lp, outcome.ray)
    case 'unbounded':
      return checkUnbounded(lp, outcome.point, outcome.direction)
    default:
      return { valid: false, tolerance: TOLERANCE, failures: ['claimsNothing'] }
  }
}

/** Σ a·x and Σ|a·x| of every row. */
function activities(lp: LinearProgram, x: ArrayLike<number>): [Float64Array, Float64Array] {
  const sums = new Float64Array(lp.rows.length)
  const sizes = new Float64Array(lp.rows.length)
  for (let i = 0; i < lp.rows.length; i++) {
    let sum = 0
    let size = 0
    const { entries } = lp.rows[i]!
    for (let e = 0; e < entries.length; e++) {
      const entry = entries[e]!
      const term = entry[1] * x[entry[0]]!
      sum += term
      size += term < 0 ? -term : term
    }
    sums[i] = sum
    sizes[i] = size
  }
  return [sums, sizes]
}

/** Aᵀy and |A|ᵀ|y|. */
function transposed(lp: LinearProgram, y: ArrayLike<number>): [Float64Array, Float64Array] {
  const sums = new Float64Array(lp.columns.length)
  const sizes = new Float64Array(lp.columns.length)
  for (let i = 0; i < lp.rows.length; i++) {
    const price = y[i]!
    if (price === 0) continue
    const { entries } = lp.rows[i]!
    for (let e = 0; e < entries.length; e++) {
      const entry = entries[e]!
      const column = entry[0]
      const term = price * entry[1]
      sums[column]! += term
      sizes[column]! += term < 0 ? -term : term
    }
  }
  return [sums, sizes]
}

/** Relative violation of rows and bounds by the amounts `x`. */
function primalViolation(lp: LinearProgram, x: ArrayLike<number>, sums: Float64Array, sizes: Float64Array) {
  let rowViolation = 0
  for (let i = 0; i < lp.rows.length; i++) {
    const { lower, upper } = lp.rows[i]!
    const short = outside(sums[i]!, lower, upper)
    if (short > 0)
      rowViolation = Math.max(rowViolation, short / (sizes[i]! + Math.abs(sums[i]! < lower ? lower : upper)))
  }
  let boundViolation = 0
  for (let j = 0; j < lp.columns.length; j++) {
    const { lower, upper } = lp.columns[j]!
    const value = x[j]!
    const short = outside(value, lower, upper)
    if (short > 0)
      boundViolation = Math.max(
        boundViolation,
        short / (Math.abs(value) + Math.abs(value < lower ? lower : upper)),
      )
  }
  return { rowViolation, boundViolation }
}

function finish(measures: Omit<Certificate, 'valid' | 'failures' | 'tolerance'>): Certificate {
  const failures = Object.entries(measures)
    .filter(([, value]) => typeof value === 'number' && !(value <= TOLERANCE))
    .map(([name]) => name)
  return { valid: failures.length === 0, tolerance: TOLERANCE, ...measures, failures }
}

/** Whether every number of the answer is there and finite. */
function isComplete(lp: LinearProgram, outcome: OptimalOutcome): boolean {
  return (
    outcome.columns.length === lp.columns.length &&
    outcome.rows.length === lp.rows.length &&
    Number.isFinite(outcome.objective) &&
    outcome.columns.every((column) => Number.isFinite(column.value) && Number.isFinite(column.reducedCost)) &&
    outcome.rows.every((row) => Number.isFinite(row.activity) && Number.isFinite(row.dual))
  )
}

function checkOptimal(lp: LinearProgram, outcome: OptimalOutcome): Certificate {
  if (!isComplete(lp, outcome)) return { valid: false, tolerance: TOLERANCE, failures: ['incomplete'] }
  const x = Float64Array.from(outcome.columns, (column) => column.value)
  const y = Float64Array.from(outcome.rows, (row) => row.dual)
  const [sums, sizes] = activities(lp, x)
  const [priced, pricedSizes] = transposed(lp, y)
  let consistency = 0
  let dualViolation = 0
  let primal = 0
  let dual = 0
  let terms = 0
  /** Largest slack × price, still to be divided by the size of the objective. */
  let waste = 0
  let integrality = 0

  for (let j = 0; j < lp.columns.length; j++) {
    const { cost, lower, upper, integer } = lp.columns[j]!
    const value = x[j]!
    const reduced = cost - priced[j]!
    const size = Math.abs(cost) + pricedSizes[j]!
    consistency = Math.max(consistency, ratio(Math.abs(outcome.columns[j]!.reducedCost - reduced), size))
    primal += cost * value
    terms += Math.abs(cost * value)
    if (integer) {
      integrality = Math.max(integrality, Math.abs(value - Math.round(value)))
      // With its whole number fixed, a column's reduced cost may have either sign.
      dual += reduced * value
      continue
    }
    const bound = reduced > 0 ? lower : upper
    if (!Number.isFinite(bound)) {
      dualViolation = Math.max(dualViolation, ratio(Math.abs(reduced), size))
      continue
    }
    waste = Math.max(waste, Math.abs(reduced) * Math.abs(value - bound))
    dual += reduced * bound
    terms += Math.abs(reduced * bound)
  }

  for (let i = 0; i < lp.rows.length; i++) {
    const { lower, upper, entries } = lp.rows[i]!
    const price = y[i]!
    consistency = Math.max(consistency, ratio(Math.abs(outcome.rows[i]!.activity - sums[i]!), sizes[i]!))
    if (price === 0) continue
    const limit = price > 0 ? lower : upper
    if (!Number.isFinite(limit)) {
      for (const [column, value] of entries) {
        const size = Math.abs(lp.columns[column]!.cost) + pricedSizes[column]!
        dualViolation = Math.max(dualViolation, ratio(Math.abs(price * value), size))
      }
      continue
    }
    waste = Math.max(waste, Math.abs(price) * Math.abs(sums[i]! - limit))
    dual += price * limit
    terms += Math.abs(price * limit)
  }

  const measures: Omit<Certificate, 'valid' | 'failures' | 'tolerance'> = {
    ...primalViolation(lp, x, sums, sizes),
    consistency: Math.max(consistency, ratio(Math.abs(outcome.objective - primal), terms)),
    dualViolation,
    complementarity: ratio(waste, terms),
    gap: ratio(Math.abs(primal - dual), terms),
  }
  if (integrality > 0) measures.integrality = integrality
  return finish(measures)
}

/**
 * Farkas: the limits named by the ray, added up with its weights, ask for more than any amounts within the column
 * bounds can give.
 */
function checkInfeasible(lp: LinearProgram, ray: number[]): Certificate {
  const fail = (failure: string): Certificate => ({
    valid: false,
    tolerance: PROOF_TOLERANCE,
    failures: [failure],
  })
  if (ray.length !== lp.rows.length || ray.some((y) => !Number.isFinite(y))) return fail('incomplete')
  const [sums, sizes] = transposed(lp, ray)
  let asked = 0
  let terms = 0
  for (let i = 0; i < lp.rows.length; i++) {
    const y = ray[i]!
    if (y === 0) continue
    const limit = y > 0 ? lp.rows[i]!.lower : lp.rows[i]!.upper
    if (!Number.isFinite(limit)) return fail('absentLimit')
    asked += y * limit
    terms += Math.abs(y * limit)
  }
  let given = 0
  for (let j = 0; j < lp.columns.length; j++) {
    const g = sums[j]!
    if (Math.abs(g) <= PROOF_TOLERANCE * sizes[j]!) continue
    const bound = g > 0 ? lp.columns[j]!.upper : lp.columns[j]!.lower
    if (!Number.isFinite(bound)) return fail('unlimitedColumn')
    given += g * bound
    terms += Math.abs(g * bound)
  }
  const proof = ratio(asked - given, terms)
  const valid = proof > PROOF_TOLERANCE
  return { valid, tolerance: PROOF_TOLERANCE, proof, failures: valid ? [] : ['proof'] }
}

/** A mix that meets every limit, and a direction along which it may be changed for ever and gets cheaper. */
function checkUnbounded(lp: LinearProgram, point: number[], direction: number[]): Certificate {
  const n = lp.columns.length
  if (
    point.length !== n ||
    direction.length !== n ||
    point.some((v) => !Number.isFinite(v)) ||
    direction.some((v) => !Number.isFinite(v))
  )
    return { valid: false, tolerance: TOLERANCE, failures: ['incomplete'] }
  const [sums, sizes] = activities(lp, point)
  const [moves, moveSizes] = activities(lp, direction)
  let drift = 0
  for (let i = 0; i < lp.rows.length; i++) {
    const wrong =
      (lp.rows[i]!.lower > -Infinity && moves[i]! < 0) || (lp.rows[i]!.upper < Infinity && moves[i]! > 0)
    if (wrong) drift = Math.max(drift, ratio(Math.abs(moves[i]!), moveSizes[i]!))
  }
  let gain = 0
  let terms = 0
  for (let j = 0; j < n; j++) {
    const step = direction[j]!
    gain -= lp.columns[j]!.cost * step
    terms += Math.abs(lp.columns[j]!.cost * step)
    if ((step < 0 && lp.columns[j]!.lower > -Infinity) || (step > 0 && lp.columns[j]!.upper < Infinity))
      drift = 1
  }
  const certificate = finish({ ...primalViolation(lp, point, sums, sizes), consistency: drift })
  const descent = ratio(gain, terms)
  if (descent > TOLERANCE) return { ...certificate, descent }
  return { ...certificate, descent, valid: false, failures: [...certificate.failures, 'descent'] }
}
