import { forgetFactorisation } from './answer'
import { attempt, conclude, type Work } from './attempt'
import { highsEngine } from './engines/highs'
import { HighsModel } from './engines/highsModel'
import { loadHighs, shortReason } from './engines/highsRuntime'
import type { Basis } from './kernel'
import { scaleProgram, type ScaledProgram } from './scaled'
import type { LinearProgram, Outcome } from './types'
import { findProblems } from './validate'

/**
 * One linear program kept warm in HiGHS, for many re-solves with other costs, limits or bounds (0.05 to 0.15 ms each
 * at 60 × 40). Every answer carries its certificate, as those of `solveLinearProgram` do. Positions count from 0 in
 * the order of the program. Always `dispose()` in a `finally`: forgotten models kill the runtime.
 */
export class LpSession {
  /** The program as it stands now. */
  readonly lp: LinearProgram
  private readonly scaled: ScaledProgram
  private readonly model: HighsModel

  private constructor(lp: LinearProgram, model: HighsModel) {
    this.lp = {
      columns: lp.columns.map((column) => ({ ...column })),
      rows: lp.rows.map((row) => ({ ...row })),
    }
    this.scaled = scaleProgram(this.lp)
    this.model = model
    model.load(this.scaled)
  }

  /** Throws where the program is not one (see `findProblems`) or HiGHS cannot be loaded. */
  static async open(lp: LinearProgram): Promise<LpSession> {
    const problem = findProblems(lp)[0]
    if (problem) throw new Error(problem.message)
    const model = new HighsModel(await loadHighs())
    try {
      return new LpSession(lp, model)
    } catch (error) {
      model.dispose()
      throw error
    }
  }

  dispose(): void {
    this.model.dispose()
  }

  /** The size of one scaled unit of a row, in units of the row: a step of good numerical size. */
  rowUnit(row: number): number {
    return 1 / this.scaled.rowScale[row]!
  }

  /** The size of one scaled unit of a column, in units of the column. */
  columnUnit(column: number): number {
    return this.scaled.colScale[column]!
  }

  setCost(column: number, cost: number): void {
    this.lp.columns[column]!.cost = cost
    const scaled = cost * this.scaled.colScale[column]! * this.scaled.costScale
    this.scaled.cost[column] = scaled
    this.model.setCost(column, scaled)
  }

  /** Sets every cost at once; also brings them to a good size for the engine. */
  setCosts(costs: ArrayLike<number>): void {
    let largest = 0
    for (let j = 0; j < costs.length; j++)
      largest = Math.max(largest, Math.abs(costs[j]! * this.columnUnit(j)))
    this.scaled.costScale = largest > 0 ? 1 / largest : 1
    for (let j = 0; j < costs.length; j++) {
      this.lp.columns[j]!.cost = costs[j]!
      this.scaled.cost[j] = costs[j]! * this.columnUnit(j) * this.scaled.costScale
    }
    this.model.setCosts(this.scaled.cost)
  }

  setColumnBounds(column: number, lower: number, upper: number): void {
    const target = this.lp.columns[column]!
    if (target.lower === lower && target.upper === upper) return
    target.lower = lower
    target.upper = upper
    const scale = this.scaled.colScale[column]!
    this.scaled.colLower[column] = lower / scale
    this.scaled.colUpper[column] = upper / scale
    this.model.setColumnBounds(column, lower / scale, upper / scale)
  }

  setRowBounds(row: number, lower: number, upper: number): void {
    const target = this.lp.rows[row]!
    if (target.lower === lower && target.upper === upper) return
    target.lower = lower
    target.upper = upper
    const scale = this.scaled.rowScale[row]!
    this.scaled.rowLower[row] = lower * scale
    this.scaled.rowUpper[row] = upper * scale
    this.model.setRowBounds(row, lower * scale, upper * scale)
  }

  /** Starts the next solve from this basis. */
  setBasis(basis: Basis): void {
    this.model.setBasis(basis)
  }

  /** Solves from where the last solve ended; cold, and by other ways, where that fails. */
  solve(until: number): Outcome {
    const started = performance.now()
    const work: Work = { engine: highsEngine, until, started }
    try {
      const outcome = conclude(this.lp, this.scaled, this.model.run(until), work)
      if (outcome.status === 'optimal') forgetFactorisation(outcome)
      if (outcome.status !== 'stopped' || outcome.reason === 'deadline') return outcome
      this.model.clearSolver()
    } catch (error) {
      return {
        status: 'stopped',
        reason: 'numerical',
        detail: shortReason(error),
        engine: 'highs',
        milliseconds: performance.now() - started,
      }
    }
    let last: Outcome = attempt(this.lp, work, 0)
    for (let way = 1; way < highsEngine.attempts && last.status === 'stopped'; way++)
      last = attempt(this.lp, work, way)
    return last
  }
}
