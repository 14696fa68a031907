/**
 * The vocabulary of linear programs. Nothing here knows of feed: a column is an amount, a row is a linear
 * limit on the amounts, and the caller keeps the units. Objectives are always minimised.
 */

/** One amount to be chosen. `lower` may be -Infinity and `upper` +Infinity; `cost` is per unit of the column. */
export interface LinearColumn {
  id: string
  cost: number
  lower: number
  upper: number
  /** Whole numbers only. Marginal values of a program with such columns hold with these amounts fixed. */
  integer?: boolean
}

/** lower ≤ Σ value · x[column] ≤ upper; an equality has lower = upper; a missing side is ∓Infinity. */
export interface LinearRow {
  id: string
  lower: number
  upper: number
  /** Pairs of column position and coefficient; a column occurs at most once in a row. */
  entries: [column: number, value: number][]
}

/** Minimise Σ cost · x subject to the rows and the bounds of the columns. */
export interface LinearProgram {
  columns: LinearColumn[]
  rows: LinearRow[]
}

/** The side of a row: an equality is one side, since it moves as one. */
export type SideName = 'lower' | 'upper' | 'equal'

/** One limit: a row and which of its two ends. */
export interface RowSide {
  row: string
  side: SideName
}

export type EngineName = 'highs' | 'javascript-lp-solver'

/** Where a variable rests in the optimal basis; `zero` is a free variable that rests at 0. */
export type BasisStatus = 'basic' | 'lower' | 'upper' | 'zero'

/**
 * The amount of one column at the optimum. `reducedCost` = what one more unit forced into the mix adds to the
 * objective, per unit of the column (≥ 0 at the lower bound, ≤ 0 at the upper).
 */
export interface ColumnResult {
  value: number
  reducedCost: number
  basis: BasisStatus
}

/**
 * One row at the optimum. `dual` = ∂objective/∂(limit) of the row as written, unscaled: raising a binding lower
 * limit costs (dual ≥ 0), raising a binding upper limit saves (dual ≤ 0). At a degenerate optimum it is only one
 * of several valid prices: ask `marginalPrices`.
 */
export interface RowResult {
  activity: number
  dual: number
  basis: BasisStatus
}

/**
 * What an answer was found to be worth when checked against the original data. All measures are relative and
 * without unit; each must be at most `tolerance`, except `proof`, which must exceed it.
 */
export interface Certificate {
  valid: boolean
  tolerance: number
  /** Largest row violation, relative to Σ|a·x| + |limit|. */
  rowViolation?: number
  /** Largest bound violation, relative to |x| + |bound|. */
  boundViolation?: number
  /** Largest distance of a stated reduced cost from cost − Σ dual · a, or of a stated activity from Σ a · x. */
  consistency?: number
  /** Largest wrong sign of a dual or reduced cost, relative to |cost| + Σ|dual · a|. */
  dualViolation?: number
  /** Largest slack × price over all rows and columns, relative to the objective's terms. */
  complementarity?: number
  /** |c·x − dual objective|, relative to the terms of both. */
  gap?: number
  /** Largest distance of an integer column from a whole number. */
  integrality?: number
  /** How far the combination of limits named by the ray exceeds what any amounts can give (infeasible only). */
  proof?: number
  /** For an unbounded program: how much one step along the direction lowers the objective, relative. */
  descent?: number
  /** The evidence is the engine's exhaustive search over whole numbers, which cannot be checked afterwards. */
  bySearch?: boolean
  /** The names of the checks that failed, for logs and tests; empty when valid. */
  failures: string[]
}

interface Solved {
  engine: EngineName
  milliseconds: number
  /** Engines whose answer or silence was set aside before this one was accepted, with the reason. */
  rejected?: { engine: EngineName; reason: string }[]
}

export interface OptimalOutcome extends Solved {
  status: 'optimal'
  objective: number
  columns: ColumnResult[]
  rows: RowResult[]
  certificate: Certificate
  /** Present with integer columns: proven bound gap |objective − bound| / max(|objective|, tiny). */
  gap?: number
}

export interface InfeasibleOutcome extends Solved {
  status: 'infeasible'
  /**
   * Farkas ray, one multiplier per row: y > 0 takes the row's lower limit, y < 0 its upper. The combination of
   * these limits cannot be met by any amounts within the column bounds. Empty for a program with integer columns
   * that is feasible without them.
   */
  ray: number[]
  certificate: Certificate
}

export interface UnboundedOutcome extends Solved {
  status: 'unbounded'
  /** Amounts, one per column, that meet every limit. */
  point: number[]
  /** A direction, one entry per column, along which every limit keeps holding and the objective falls for ever. */
  direction: number[]
  certificate: Certificate
}

export interface StoppedOutcome extends Solved {
  status: 'stopped'
  /** `deadline`: the time was up. `numerical`: no engine gave an answer that passed the certificate. */
  reason: 'deadline' | 'numerical'
  detail: string
}

/** One thing wrong with a program as given. */
export interface ProgramProblem {
  code:
    | 'duplicateId'
    | 'notANumber'
    | 'infiniteCost'
    | 'infiniteCoefficient'
    | 'crossedBounds'
    | 'wrongInfinity'
    | 'unknownColumn'
    | 'repeatedColumn'
  /** `column` or `row` with its id; the field that is wrong. */
  where: { kind: 'column' | 'row'; id: string; position: number; field: string }
  message: string
}

export interface InvalidOutcome {
  status: 'invalid'
  problems: ProgramProblem[]
}

export type Outcome = OptimalOutcome | InfeasibleOutcome | UnboundedOutcome | StoppedOutcome | InvalidOutcome

export interface SolveOptions {
  /** `auto` = HiGHS, then the other engine where the answer fails its certificate. Default `auto`. */
  engine?: 'auto' | EngineName
  /** Milliseconds for the whole call, fallback included. Default 10,000. */
  deadlineMs?: number
}

/** What the independent engine says of an answer. */
export interface SecondOpinion {
  engine: EngineName
  /** null: it gave no answer that can be compared (see `note`). */
  agrees: boolean | null
  objective?: number
  relativeDifference?: number
  note: string
}
