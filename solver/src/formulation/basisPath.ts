import { factorise, solveBasis, type Kernel } from '../lp/kernel'
import { scaleProgram, type ScaledProgram } from '../lp/scaled'
import type { LinearProgram, OptimalOutcome } from '../lp'
import { valueOf } from './forms'
import type { LimitSide } from './program'

/** A rate of change this small, in scaled terms, is rounding. */
const STILL = 1e-11
/** Distance from a bound, as a share of the terms behind the value, at which it counts as touched. */
const TOUCH = 1e-10

/** How the optimum of one basis moves while one limit moves by τ, in the limit's own unit. */
export interface BasisPath {
  /** The limit's row is one on which the basis rests; else the limit may move without any effect while it has room. */
  rests: boolean
  /** ∂cost/∂limit at τ, cost of the program per unit of the limit. */
  priceAt(tau: number): number
  amountsAt(tau: number): number[]
  /** The basis stays optimal for −down ≤ τ ≤ up. */
  up: number
  down: number
}

/**
 * Follows a limit L = L₀ + τ of the row numerator − L · denominator ≥ 0 (or ≤, or =) with the basis of an optimum held.
 *
 * Moving L by τ acts on the basis like moving the right-hand side by u = τ · M, where M is the denominator at the
 * amounts there. With β = B⁻¹eᵢ and δ = the change of M per unit of u: u = τ M₀ / (1 − τ δ), amounts x₀ + u β. On the
 * side of prices it acts like adding w = τ yᵢ times the denominator to the costs: with η the prices of the denominator,
 * w = τ y₀ / (1 − τ δ), every price y₀ + w η. Amounts are linear in u and prices in w, so the ends are ordinary ratio
 * tests in u and in w, translated back by τ = u / (M₀ + δu) and τ = w / (y₀ + δw). Where the denominator is constant δ = 0
 * and this is plain ranging of a right-hand side.
 *
 * @returns undefined where the basis cannot be factorised
 */
export function followBasis(
  lp: LinearProgram,
  outcome: OptimalOutcome,
  side: LimitSide,
): BasisPath | undefined {
  const p = scaleProgram(lp)
  const basis = {
    columns: outcome.columns.map((column) => column.basis),
    rows: outcome.rows.map((row) => row.basis),
  }
  const kernel = factorise(p, basis)
  if (!kernel) return undefined
  const place = kernel.rows.indexOf(side.row)
  const amounts = outcome.columns.map((column) => column.value)
  if (place < 0) return { rests: false, priceAt: () => 0, amountsAt: () => amounts, ...roomOf(side, amounts) }

  const size = kernel.rows.length
  const solved = solveBasis(p, basis, kernel)
  const denominator = side.denominator.terms.map((term, j) => term * p.colScale[j]!)
  const rowScale = p.rowScale[side.row]!
  const beta = new Float64Array(size)
  const eta = new Float64Array(size)
  let delta = 0
  for (let c = 0; c < size; c++) {
    const weight = denominator[kernel.columns[c]!]!
    beta[c] = kernel.inverse[c * size + place]!
    delta += weight * beta[c]!
    if (weight !== 0) for (let r = 0; r < size; r++) eta[r]! += kernel.inverse[c * size + r]! * weight
  }
  const start = valueOf(side.denominator, amounts)
  const price = solved.dual[side.row]!
  // Where there is nothing to divide by (an empty mix) moving the limit does not move the mix.
  const empty = start <= 0
  const steps = empty ? { up: Infinity, down: -Infinity } : primalRange(p, kernel, solved, beta, outcome)
  const shifts = dualRange(p, kernel, solved.dual, denominator, eta, outcome)
  const tau = (step: number, base: number): number => tauOf(step, base, delta) / rowScale
  const shiftUp = price > 0 ? shifts.up : shifts.down
  const shiftDown = price > 0 ? shifts.down : shifts.up
  const stepAt = (t: number): number => (empty ? 0 : (t * rowScale * start) / (1 - t * rowScale * delta))
  return {
    rests: true,
    up: Math.min(empty ? Infinity : tau(steps.up, start), price === 0 ? Infinity : tau(shiftUp, price)),
    down: -Math.max(
      empty ? -Infinity : tau(steps.down, start),
      price === 0 ? -Infinity : tau(shiftDown, price),
    ),
    priceAt: (t) => {
      if (empty) return 0
      const stretch = 1 - t * rowScale * delta
      return ((price / stretch) * (start / stretch) * rowScale) / p.costScale
    },
    amountsAt: (t) => {
      const step = stepAt(t)
      const moved = [...amounts]
      kernel.columns.forEach((j, c) => (moved[j]! += step * beta[c]! * p.colScale[j]!))
      return moved
    },
  }
}

/** How far a limit that the basis does not rest on may move before the mix touches it; loosening never ends. */
function roomOf(side: LimitSide, amounts: number[]): { up: number; down: number } {
  const denominator = valueOf(side.denominator, amounts)
  const room = denominator > 0 ? valueOf(side.numerator, amounts) / denominator - side.bound : 0
  return side.side === 'min'
    ? { up: Math.max(0, room), down: Infinity }
    : { up: Infinity, down: Math.max(0, -room) }
}

/** τ (times the row's scale) at which a step of the given size from `base` is reached, M = base + δ · step. */
function tauOf(step: number, base: number, delta: number): number {
  if (step === 0) return 0
  const direction = step * base > 0 ? 1 : -1
  if (!Number.isFinite(step))
    return step * delta > 0 === base > 0 && delta !== 0 ? 1 / delta : direction * Infinity
  const end = base + delta * step
  return end * base > 0 ? step / end : direction * Infinity
}

interface Range {
  up: number
  down: number
}

/** How far the step u may go each way before an amount or a row's activity meets its bound. */
function primalRange(
  p: ScaledProgram,
  kernel: Kernel,
  solved: { value: Float64Array; valueSize: Float64Array },
  beta: Float64Array,
  outcome: OptimalOutcome,
): Range {
  const range: Range = { up: Infinity, down: -Infinity }
  kernel.columns.forEach((j, c) =>
    narrow(
      range,
      solved.value[j]!,
      beta[c]!,
      p.colLower[j]!,
      p.colUpper[j]!,
      TOUCH * (solved.valueSize[j]! + 1e-6),
    ),
  )
  for (let i = 0; i < p.numRows; i++) {
    if (outcome.rows[i]!.basis !== 'basic') continue
    let rate = 0
    let rateSize = 0
    let activity = 0
    let sizeOfTerms = 0
    for (let k = p.starts[i]!; k < p.starts[i + 1]!; k++) {
      const j = p.indices[k]!
      const c = kernel.place[j]!
      const term = p.values[k]! * solved.value[j]!
      activity += term
      sizeOfTerms += Math.abs(term)
      if (c < 0) continue
      rate += p.values[k]! * beta[c]!
      rateSize += Math.abs(p.values[k]! * beta[c]!)
    }
    if (Math.abs(rate) <= 1e-12 * rateSize) continue
    narrow(range, activity, rate, p.rowLower[i]!, p.rowUpper[i]!, TOUCH * (sizeOfTerms + 1e-6))
  }
  return range
}

/** Narrows the range of t in which lower ≤ value + rate · t ≤ upper. */
function narrow(range: Range, value: number, rate: number, lower: number, upper: number, near: number): void {
  if (Math.abs(rate) <= STILL) return
  const above = upper - value <= near ? 0 : upper - value
  const below = value - lower <= near ? 0 : value - lower
  range.up = Math.min(range.up, (rate > 0 ? above : below) / Math.abs(rate))
  range.down = Math.max(range.down, -(rate > 0 ? below : above) / Math.abs(rate))
}

/** How far the shift w may go each way before a reduced cost or a price would take the wrong sign. */
function dualRange(
  p: ScaledProgram,
  kernel: Kernel,
  dual: Float64Array,
  denominator: Float64Array,
  eta: Float64Array,
  outcome: OptimalOutcome,
): Range {
  const range: Range = { up: Infinity, down: -Infinity }
  if (denominator.every((term) => term === 0)) return range
  const reduced = p.cost.slice()
  const rate = denominator.slice()
  const sizes = p.cost.map(Math.abs)
  const priceRate = new Float64Array(p.numRows)
  kernel.rows.forEach((i, r) => (priceRate[i] = eta[r]!))
  for (const i of kernel.rows)
    for (let k = p.starts[i]!; k < p.starts[i + 1]!; k++) {
      const j = p.indices[k]!
      reduced[j]! -= dual[i]! * p.values[k]!
      rate[j]! -= priceRate[i]! * p.values[k]!
      sizes[j]! += Math.abs(dual[i]! * p.values[k]!)
    }
  for (let j = 0; j < p.numCols; j++) {
    const status = outcome.columns[j]!.basis
    if (status === 'basic' || p.colLower[j] === p.colUpper[j]) continue
    keepSign(
      range,
      status === 'upper' ? -reduced[j]! : reduced[j]!,
      status === 'upper' ? -rate[j]! : rate[j]!,
      TOUCH * sizes[j]!,
    )
  }
  for (const i of kernel.rows) {
    if (p.rowLower[i] === p.rowUpper[i]) continue
    const sign = outcome.rows[i]!.basis === 'upper' ? -1 : 1
    keepSign(range, sign * dual[i]!, sign * priceRate[i]!, TOUCH)
  }
  return range
}

/** Narrows the range of t in which value + rate · t ≥ 0. */
function keepSign(range: Range, value: number, rate: number, near: number): void {
  narrow(range, value, rate, 0, Infinity, near)
}
