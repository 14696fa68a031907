import { checkOutcome } from './certificate'
import { factorise, solveBasis, type Basis, type Kernel } from './kernel'
import type { ScaledProgram } from './scaled'
import type { ColumnResult, EngineName, LinearProgram, OptimalOutcome, RowResult } from './types'

/** What an engine hands over for an optimum, still scaled. */
export interface ScaledOptimum {
  value: Float64Array
  dual: Float64Array
  basis: Basis
}

/** Distance from a bound at which a value taken from an engine is on it, relative to 1 + |value| in scaled terms. */
const ENGINE_NOISE = 1e-9

/** The factorised basis behind an answer, with the program it belongs to. */
export interface Factorisation {
  lp: LinearProgram
  scaled: ScaledProgram
  kernel: Kernel
  valueSize: Float64Array
}

const factorisations = new WeakMap<OptimalOutcome, Factorisation>()

/** The factorisation behind an answer where it is still at hand: not after a copy, nor for another program. */
export function recallFactorisation(lp: LinearProgram, outcome: OptimalOutcome): Factorisation | undefined {
  const known = factorisations.get(outcome)
  return known?.lp === lp ? known : undefined
}

/** For answers whose scaled program is about to change. */
export function forgetFactorisation(outcome: OptimalOutcome): void {
  factorisations.delete(outcome)
}

/**
 * Turns an engine's optimum into an outcome in the caller's units with its certificate: first the basis solved
 * again from the data, and only where that fails (too large, singular) the engine's own numbers.
 */
export function finishOptimum(
  lp: LinearProgram,
  scaled: ScaledProgram,
  optimum: ScaledOptimum,
  engine: EngineName,
  milliseconds: number,
): OptimalOutcome {
  const kernel = factorise(scaled, optimum.basis)
  if (kernel) {
    const basic = solveBasis(scaled, optimum.basis, kernel)
    const found = { value: basic.value, dual: basic.dual, basis: optimum.basis }
    const outcome = unscale(lp, scaled, found, basic.valueNoise, engine, milliseconds)
    outcome.certificate = checkOutcome(lp, outcome)
    if (outcome.certificate.valid) {
      factorisations.set(outcome, { lp, scaled, kernel, valueSize: basic.valueSize })
      return outcome
    }
  }
  const noise = optimum.value.map((value) => ENGINE_NOISE * (1 + Math.abs(value)))
  const raw = unscale(lp, scaled, optimum, noise, engine, milliseconds)
  raw.certificate = checkOutcome(lp, raw)
  return raw
}

/** Undoes the scaling; values within rounding noise of a bound, or of zero, are set on it. */
function unscale(
  lp: LinearProgram,
  scaled: ScaledProgram,
  { value, dual, basis }: ScaledOptimum,
  noise: Float64Array,
  engine: EngineName,
  milliseconds: number,
): OptimalOutcome {
  const n = scaled.numCols
  const m = scaled.numRows
  const amounts = new Float64Array(n)
  for (let j = 0; j < n; j++) {
    const { lower, upper } = lp.columns[j]!
    const amount = value[j]! * scaled.colScale[j]!
    const near = noise[j]! * scaled.colScale[j]!
    if (amount - lower <= near) amounts[j] = lower
    else if (upper - amount <= near) amounts[j] = upper
    else amounts[j] = Math.abs(amount) <= near ? 0 : amount
  }
  const priced = new Float64Array(n)
  const rows: RowResult[] = new Array<RowResult>(m)
  for (let i = 0; i < m; i++) {
    const price = basis.rows[i] === 'basic' ? 0 : (dual[i]! * scaled.rowScale[i]!) / scaled.costScale
    let activity = 0
    const { entries } = lp.rows[i]!
    for (let e = 0; e < entries.length; e++) {
      const entry = entries[e]!
      activity += entry[1] * amounts[entry[0]]!
      if (price !== 0) priced[entry[0]]! += entry[1] * price
    }
    rows[i] = { activity, dual: price, basis: basis.rows[i]! }
  }
  let objective = 0
  const columns: ColumnResult[] = new Array<ColumnResult>(n)
  for (let j = 0; j < n; j++) {
    const { cost } = lp.columns[j]!
    objective += cost * amounts[j]!
    columns[j] = { value: amounts[j]!, reducedCost: cost - priced[j]!, basis: basis.columns[j]! }
  }
  return {
    status: 'optimal',
    objective,
    columns,
    rows,
    certificate: { valid: false, tolerance: 0, failures: ['unchecked'] },
    engine,
    milliseconds,
  }
}
