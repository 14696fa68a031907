import type {
  InfeasibleOutcome,
  LinearProgram,
  OptimalOutcome,
  Outcome,
  RowSide,
  SecondOpinion,
  SolveOptions,
  Certificate,
} from '../lp/types'
import type {
  AnalysisOptions,
  AnalysisSession,
  BuyIn,
  Conflict,
  CostCurve,
  CostWindow,
  CurveParameter,
  Loosening,
  MarginalPrice,
  SampledCurve,
} from './types'

/** The functions exported by `lp` and `analysis`, by their signatures. */
export interface LinearFunctions {
  solveLinearProgram(lp: LinearProgram, options?: SolveOptions): Promise<Outcome>
  checkOutcome(lp: LinearProgram, outcome: Outcome): Certificate
  secondOpinion(lp: LinearProgram, outcome: Outcome): Promise<SecondOpinion>
  openAnalysis(lp: LinearProgram, optimal: OptimalOutcome): AnalysisSession
  marginalPrices(
    lp: LinearProgram,
    optimal: OptimalOutcome,
    options?: AnalysisOptions & { rows?: string[] },
  ): Promise<MarginalPrice[]>
  costWindows(
    lp: LinearProgram,
    optimal: OptimalOutcome,
    options?: AnalysisOptions & { columns?: string[] },
  ): Promise<CostWindow[]>
  buyInCosts(
    lp: LinearProgram,
    optimal: OptimalOutcome,
    options?: AnalysisOptions & { columns?: string[]; amounts?: boolean },
  ): Promise<BuyIn[]>
  findConflict(
    lp: LinearProgram,
    options?: { keep?: string[]; infeasible?: InfeasibleOutcome; deadlineMs?: number },
  ): Promise<Conflict>
  smallestLoosening(
    lp: LinearProgram,
    options: { rows: (RowSide & { weight?: number })[]; deadlineMs?: number },
  ): Promise<Loosening>
  costCurve(
    lp: LinearProgram,
    options: { along: CurveParameter; from: number; to: number; maxPoints?: number; deadlineMs?: number },
  ): Promise<CostCurve>
  traceCurve(
    family: (at: number) => LinearProgram,
    options: { from: number; to: number; samples: number; deadlineMs?: number },
  ): Promise<SampledCurve>
}
