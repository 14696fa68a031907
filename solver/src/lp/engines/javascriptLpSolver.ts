import type { ScaledProgram } from '../scaled'
import type { BasisStatus } from '../types'
import type { Engine, Verdict } from './engine'

/**
 * Adapter for javascript-lp-solver 1.0.3, which is small and independent but not to be trusted: it can loop for
 * ever, call a feasible program infeasible, and its tolerances are absolute. So: no presolve, no text or JSON from
 * outside, our own names, no zero coefficients, scaled rows, free columns split, whole numbers not taken, a pivot
 * budget and a deadline inside, results read from the tableau, and "infeasible" is a claim still to be proved.
 */

type SolverModule = typeof import('javascript-lp-solver')
type Model = InstanceType<SolverModule['default']['Model']>
type Constraint = ReturnType<Model['smallerThan']>
type Variable = ReturnType<Model['addVariable']>
type Tableau = Model['tableau']

let solver: SolverModule['default'] | undefined

/** Pivots allowed per row and column; typical mixes take 17 in all. */
const PIVOTS_PER_LINE = 50

class BudgetSpent extends Error {
  constructor(readonly reason: 'deadline' | 'numerical') {
    super(reason === 'deadline' ? 'the time limit was reached' : 'the pivot budget was spent without an end')
  }
}

/** How one column is expressed by the solver's non-negative variables: x = origin + sign·v (− w where free). */
interface Expression {
  origin: number
  sign: 1 | -1
  variable: Variable
  /** The negative part of a free column. */
  negative: Variable | null
  /** v ≤ upper − lower, where both are finite. */
  cap: Constraint | null
}

interface Built {
  model: Model
  columns: Expression[]
  lower: (Constraint | null)[]
  upper: (Constraint | null)[]
}

function build(Solver: SolverModule['default'], p: ScaledProgram, reversed: boolean): Built {
  const model = new Solver.Model()
  model.minimize()
  model.usePresolve = false
  model.checkForCycles = false
  const columns = new Array<Expression>(p.numCols)
  const origins = new Float64Array(p.numCols)
  const order = Array.from({ length: p.numCols }, (_, j) => (reversed ? p.numCols - 1 - j : j))
  for (const j of order) {
    const low = p.colLower[j]!
    const high = p.colUpper[j]!
    const sign = low === -Infinity && high < Infinity ? -1 : 1
    const free = low === -Infinity && high === Infinity
    const origin = free ? 0 : sign > 0 ? low : high
    origins[j] = origin
    const cost = p.cost[j]!
    columns[j] = {
      origin,
      sign,
      variable: model.addVariable(sign * cost, `x${j}`),
      negative: free ? model.addVariable(-cost, `n${j}`) : null,
      cap: null,
    }
  }
  const lower = new Array<Constraint | null>(p.numRows).fill(null)
  const upper = new Array<Constraint | null>(p.numRows).fill(null)
  for (let i = 0; i < p.numRows; i++) {
    let shift = 0
    for (let k = p.starts[i]!; k < p.starts[i + 1]!; k++) shift += p.values[k]! * origins[p.indices[k]!]!
    if (p.rowLower[i]! > -Infinity) lower[i] = model.greaterThan(p.rowLower[i]! - shift)
    if (p.rowUpper[i]! < Infinity) upper[i] = model.smallerThan(p.rowUpper[i]! - shift)
    for (let k = p.starts[i]!; k < p.starts[i + 1]!; k++) {
      const column = columns[p.indices[k]!]!
      const value = p.values[k]!
      for (const constraint of [lower[i], upper[i]]) {
        constraint?.addTerm(column.sign * value, column.variable)
        if (column.negative) constraint?.addTerm(-value, column.negative)
      }
    }
  }
  for (let j = 0; j < p.numCols; j++) {
    const span = p.colUpper[j]! - p.colLower[j]!
    if (Number.isFinite(span)) {
      const column = columns[j]!
      column.cap = model.smallerThan(span)
      column.cap.addTerm(1, column.variable)
    }
  }
  return { model, columns, lower, upper }
}

/** The library has no abort: its pivot is wrapped by a counter that throws. */
function guard(tableau: Tableau, pivots: number, until: number): void {
  const pivot = tableau.pivot.bind(tableau)
  let left = pivots
  tableau.pivot = (row, column) => {
    if (left-- <= 0) throw new BudgetSpent('numerical')
    if (performance.now() > until) throw new BudgetSpent('deadline')
    pivot(row, column)
  }
}

const isBasic = (tableau: Tableau, index: number): boolean => (tableau.rowByVarIndex[index] ?? -1) >= 0

/** The value of a variable, or of the slack of a constraint. */
function valueOf(tableau: Tableau, index: number): number {
  const row = tableau.rowByVarIndex[index] ?? -1
  return row >= 0 ? tableau.matrix[row * tableau.width + tableau.rhsColumn]! : 0
}

/** ∂objective/∂limit of one constraint. */
function priceOf(tableau: Tableau, constraint: Constraint | null): number {
  if (!constraint) return 0
  const column = tableau.colByVarIndex[constraint.index] ?? -1
  if (column < 0) return 0
  return (constraint.isUpperBound ? 1 : -1) * tableau.matrix[tableau.costRowIndex * tableau.width + column]!
}

function read(p: ScaledProgram, { model, columns, lower, upper }: Built): Verdict {
  const { tableau } = model
  const value = Float64Array.from(columns, ({ origin, sign, variable, negative }) => {
    const positive = valueOf(tableau, variable.index)
    return origin + sign * (positive - (negative ? valueOf(tableau, negative.index) : 0))
  })
  const columnBasis = columns.map(({ sign, variable, negative, cap }): BasisStatus => {
    if (negative)
      return isBasic(tableau, variable.index) || isBasic(tableau, negative.index) ? 'basic' : 'zero'
    const [resting, opposite]: BasisStatus[] = sign > 0 ? ['lower', 'upper'] : ['upper', 'lower']
    if (!isBasic(tableau, variable.index)) return resting!
    return cap && !isBasic(tableau, cap.index) ? opposite! : 'basic'
  })
  const dual = new Float64Array(p.numRows)
  const rowBasis = new Array<BasisStatus>(p.numRows).fill('basic')
  for (let i = 0; i < p.numRows; i++) {
    dual[i] = priceOf(tableau, lower[i]!) + priceOf(tableau, upper[i]!)
    if (lower[i] && !isBasic(tableau, lower[i]!.index)) rowBasis[i] = 'lower'
    else if (upper[i] && !isBasic(tableau, upper[i]!.index)) rowBasis[i] = 'upper'
  }
  return { status: 'optimal', value, dual, basis: { columns: columnBasis, rows: rowBasis } }
}

export const javascriptLpSolverEngine: Engine = {
  name: 'javascript-lp-solver',
  attempts: 2,
  async prepare() {
    solver ??= (await import('javascript-lp-solver')).default
  },
  solve(program: ScaledProgram, until: number, attempt: number): Verdict {
    if (!solver)
      return { status: 'stopped', reason: 'numerical', detail: 'javascript-lp-solver is not loaded' }
    if (program.integrality)
      return { status: 'stopped', reason: 'numerical', detail: 'this engine takes no whole-number columns' }
    try {
      const built = build(solver, program, attempt > 0)
      const { tableau } = built.model
      guard(tableau, PIVOTS_PER_LINE * (program.numRows + program.numCols + 1), until)
      built.model.solve()
      if (!tableau.feasible) return { status: 'infeasible', ray: null }
      if (!tableau.bounded) return { status: 'unbounded' }
      return read(program, built)
    } catch (error) {
      if (!(error instanceof BudgetSpent)) throw error
      return { status: 'stopped', reason: error.reason, detail: error.message }
    }
  },
}
