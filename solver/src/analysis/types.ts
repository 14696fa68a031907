import type { RowSide, SideName } from '../lp/types'

/** Common to every analysis call. */
export interface AnalysisOptions {
  /** Shares the warm models between several analyses of one optimum; the caller disposes it. */
  session?: AnalysisSession
  /** Milliseconds for the whole call; an `AnalysisStopped` error is thrown when they are up. Default 10,000. */
  deadlineMs?: number
}

/** Keeps the models that the analyses of one optimum re-solve. Always `dispose()` it (try/finally). */
export interface AnalysisSession {
  dispose(): void
}

/** Thrown when an analysis ran out of time or its numbers could not be trusted. */
export class AnalysisStopped extends Error {
  constructor(
    readonly reason: 'deadline' | 'numerical',
    message: string,
  ) {
    super(message)
    this.name = 'AnalysisStopped'
  }
}

/**
 * The exact one-sided prices of one limit. `price` = ∂objective/∂limit of the row as written (unscaled, in cost
 * per unit of the row), so that a small rise of the limit by t adds `more.price · t`, and a small fall by t adds
 * `−less.price · t`. The ranges say how far the limit may move before the price changes.
 */
export interface MarginalPrice extends RowSide {
  side: SideName
  /** The limit as it stands, in units of the row. */
  limit: number
  /** Σ a·x at the optimum. */
  activity: number
  /** The row rests on this limit. */
  binding: boolean
  /** The limit rises; `upTo` = the limit's own value at which this price ends (Infinity: never). */
  more: { price: number; upTo: number } | 'impossible'
  /** The limit falls; `downTo` = the limit's own value at which this price ends (-Infinity: never). */
  less: { price: number; downTo: number } | 'impossible'
  /** The two prices are not the same: the optimum is degenerate here, or one move is impossible. */
  differs: boolean
}

/** The range of one column's cost over which the amounts of the optimum stay optimal. */
export interface CostWindow {
  column: string
  cost: number
  /** -Infinity: however cheap. */
  lower: number
  /** Infinity: however dear. */
  upper: number
}

/** What a column that is not used would have to cost. */
export interface BuyIn {
  column: string
  cost: number
  /** The cost below which it enters; null: it enters at no cost whatever. */
  entersBelow: number | null
  /** The largest amount used just past that cost, in units of the column; null when it never enters. */
  amount: number | null
}

/** A set of limits that cannot hold together, though any of them dropped makes the rest possible. */
export interface Conflict {
  members: RowSide[]
  /** false: there is no conflict, the program can be met. */
  found: boolean
  /** The kept rows and the column bounds alone cannot be met (members is then empty). */
  keptAloneInfeasible: boolean
}

export interface LooseningMove extends RowSide {
  limit: number
  /** How far the limit has to give way, ≥ 0, in units of the row. */
  by: number
  newLimit: number
}

export interface Loosening {
  /** false: even with every allowed limit loosened without end nothing fits. */
  possible: boolean
  moves: LooseningMove[]
  /** Σ weight · by. */
  total: number
  /** Amounts, one per column, of the cheapest mix within the loosened limits; empty when impossible. */
  amounts: number[]
  /** Its cost; null when impossible, or where no cheapest exists. */
  objective: number | null
}

/** What a curve runs along: the cost of a column or the limit of a row. */
export type CurveParameter = { kind: 'cost'; column: string } | { kind: 'limit'; row: string; side: SideName }

export interface CurvePoint {
  /** The value of the parameter: a cost per unit of the column, or a limit in units of the row. */
  at: number
  objective: number
  /** Amounts, one per column (of one optimal mix where several tie). */
  amounts: number[]
}

export interface CostCurve {
  /** Exact corners, both ends included, rising in `at`; between neighbours the objective is a straight line. */
  points: CurvePoint[]
  /** The part of the asked range in which the program can be met; null: nowhere. */
  feasible: { from: number; to: number } | null
  /** false: `maxPoints` was reached and some corners are missing. */
  complete: boolean
}

export interface TracePoint {
  at: number
  /** null: infeasible, unbounded or stopped there; see `status`. */
  objective: number | null
  amounts: number[]
  status: 'optimal' | 'infeasible' | 'unbounded' | 'stopped' | 'invalid'
}

/** A curve known at its samples only: it may bend between them. */
export interface SampledCurve {
  sampled: true
  points: TracePoint[]
}
