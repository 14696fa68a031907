import type { BasisStatus as HighsBasisStatus, Highs, Model, SymbolDisposable } from 'highs'
import type { Basis } from '../kernel'
import type { ScaledProgram } from '../scaled'
import type { BasisStatus } from '../types'
import type { Verdict } from './engine'
import { shortReason } from './highsRuntime'

/** Codes of `HighsModelStatus` that matter here (HiGHS 1.15). */
const OPTIMAL = 7
const INFEASIBLE = 8
const UNBOUNDED_OR_INFEASIBLE = 9
const UNBOUNDED = 10
const TIME_LIMIT = 13

const STATUS: readonly BasisStatus[] = ['lower', 'basic', 'upper', 'zero']
const CODE: Record<BasisStatus, HighsBasisStatus> = { lower: 0, basic: 1, upper: 2, zero: 3 }

export const DUAL_SIMPLEX = 1
export const PRIMAL_SIMPLEX = 4

/**
 * One HiGHS model held by arrays, warm between runs. A model takes 0.9 MB of the runtime's memory until it is
 * disposed, and the runtime dies of about 2,000 forgotten ones: always `dispose()`.
 */
export class HighsModel {
  private readonly model: SymbolDisposable<Model>
  private rows = 0
  private columns = 0
  private hasIntegers = false

  constructor(highs: Highs) {
    this.model = highs.createModel()
    try {
      this.model.options.set({
        output_flag: false,
        presolve: 'off',
        solver: 'simplex',
        simplex_strategy: DUAL_SIMPLEX,
        // The program comes scaled already.
        simplex_scale_strategy: 0,
        // Coefficients at or below this are dropped in silence: 1e-12 is the least HiGHS takes (default 1e-9).
        small_matrix_value: 1e-12,
        primal_feasibility_tolerance: 1e-9,
        dual_feasibility_tolerance: 1e-9,
        mip_feasibility_tolerance: 1e-9,
        mip_rel_gap: 1e-9,
        mip_abs_gap: 1e-9,
      })
    } catch (error) {
      this.model.dispose()
      throw error
    }
  }

  dispose(): void {
    this.model.dispose()
  }

  get disposed(): boolean {
    return this.model.disposed
  }

  load(program: ScaledProgram): void {
    this.rows = program.numRows
    this.columns = program.numCols
    this.hasIntegers = program.integrality !== null
    this.model.passModel({
      numCols: program.numCols,
      numRows: program.numRows,
      colCost: program.cost,
      colLower: program.colLower,
      colUpper: program.colUpper,
      rowLower: program.rowLower,
      rowUpper: program.rowUpper,
      matrix: {
        format: 'csr',
        numRows: program.numRows,
        numCols: program.numCols,
        starts: program.starts,
        indices: program.indices,
        values: program.values,
      },
      ...(program.integrality && { integrality: program.integrality }),
    })
    this.model.options.set('solver', this.hasIntegers ? 'choose' : 'simplex')
  }

  setCost(column: number, cost: number): void {
    this.model.changeColCost(column, cost)
  }

  setCosts(costs: Float64Array): void {
    if (costs.length > 0) this.model.changeColsCost({ kind: 'range', from: 0, to: costs.length - 1 }, costs)
  }

  setColumnBounds(column: number, lower: number, upper: number): void {
    this.model.changeColBounds(column, lower, upper)
  }

  setRowBounds(row: number, lower: number, upper: number): void {
    this.model.changeRowBounds(row, lower, upper)
  }

  setBasis(basis: Basis): void {
    this.model.setBasis({
      colStatus: Int32Array.from(basis.columns, (status) => CODE[status]),
      rowStatus: Int32Array.from(basis.rows, (status) => CODE[status]),
    })
  }

  setStrategy(strategy: typeof DUAL_SIMPLEX | typeof PRIMAL_SIMPLEX): void {
    this.model.options.set('simplex_strategy', strategy)
  }

  /** Forgets the basis and the factorisation, so that the next run starts cold. */
  clearSolver(): void {
    this.model.clearSolver()
  }

  /** Runs from where the model stands; a warm run that the runtime refuses is repeated cold. */
  run(until: number): Verdict {
    const seconds = (until - performance.now()) / 1000
    if (seconds <= 0) return { status: 'stopped', reason: 'deadline', detail: 'no time was left to start' }
    // The limit counts over the life of the model unless its clocks are set back.
    this.model.zeroAllClocks()
    this.model.options.set('time_limit', seconds)
    let status: number
    try {
      status = this.model.run().modelStatus
    } catch {
      this.model.clearSolver()
      try {
        status = this.model.run().modelStatus
      } catch (error) {
        return { status: 'stopped', reason: 'numerical', detail: shortReason(error) }
      }
    }
    return this.verdict(status)
  }

  private verdict(status: number): Verdict {
    switch (status) {
      case OPTIMAL:
        return this.hasIntegers ? this.integerOptimum() : this.optimum()
      case INFEASIBLE:
        return { status: 'infeasible', ray: this.hasIntegers ? null : this.dualRay() }
      case UNBOUNDED:
      case UNBOUNDED_OR_INFEASIBLE:
        return { status: 'unbounded' }
      case TIME_LIMIT:
        return { status: 'stopped', reason: 'deadline', detail: 'the time limit was reached' }
      default:
        return { status: 'stopped', reason: 'numerical', detail: `HiGHS ended with model status ${status}` }
    }
  }

  private optimum(): Verdict {
    const solution = this.model.getSolution()
    const basis = this.model.getBasis()
    return {
      status: 'optimal',
      value: solution.colValue,
      dual: solution.rowDual,
      basis: {
        columns: Array.from(basis.colStatus, (code) => STATUS[code] ?? 'lower'),
        rows: Array.from(basis.rowStatus, (code) => STATUS[code] ?? 'lower'),
      },
    }
  }

  /** A search over whole numbers leaves no prices and no basis: the caller fixes the numbers and solves again. */
  private integerOptimum(): Verdict {
    return {
      status: 'optimal',
      value: this.model.getSolution().colValue,
      dual: new Float64Array(this.rows),
      basis: {
        columns: new Array<BasisStatus>(this.columns).fill('basic'),
        rows: new Array<BasisStatus>(this.rows).fill('basic'),
      },
      gap: Number(this.model.info.get('mip_gap')),
    }
  }

  private dualRay(): Float64Array | null {
    try {
      return this.model.getDualRay()?.values ?? null
    } catch {
      return null
    }
  }
}
