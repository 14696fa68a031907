import { DEFAULT_DEADLINE_MS } from '../lp/solve'
import { LpSession } from '../lp/session'
import type { LinearProgram, OptimalOutcome, Outcome, RowSide, SideName, StoppedOutcome } from '../lp/types'
import { KernelRanges } from './kernelRanges'
import { studyOptimum, type Optimum } from './optimum'
import { AnalysisStopped, type AnalysisOptions, type AnalysisSession } from './types'

/** The optimum under study and the warm models made for it, opened at their first use. */
export class Workspace implements AnalysisSession {
  readonly optimum: Optimum
  private coneModel: Promise<LpSession> | undefined
  private faceModel: Promise<LpSession> | undefined
  private kernelRanges: KernelRanges | undefined

  constructor(
    readonly program: LinearProgram,
    outcome: OptimalOutcome,
  ) {
    this.optimum = studyOptimum(program, outcome)
  }

  /** Ratio tests on the factorised basis; null where there is none. */
  get ranges(): KernelRanges | null {
    const { kernel } = this.optimum
    if (!kernel) return null
    return (this.kernelRanges ??= new KernelRanges(this.optimum, kernel))
  }

  /** Prices and amounts are proven to be the only ones: the ratio tests then answer every question. */
  get nondegenerate(): boolean {
    return this.optimum.pricesUnique && this.optimum.amountsUnique
  }

  /**
   * The directions in which the optimum may be left: w ≥ 0 where a lower limit is touched, ≤ 0 where an upper,
   * free elsewhere, at the program's costs. Its least cost under a shifted limit is the exact one-sided price.
   */
  cone(): Promise<LpSession> {
    return (this.coneModel ??= this.openCone())
  }

  /** The program itself, to be narrowed to all mixes that are optimal under given prices. */
  face(): Promise<LpSession> {
    return (this.faceModel ??= LpSession.open(this.optimum.lp))
  }

  private async openCone(): Promise<LpSession> {
    const { lp, rowAtLower, rowAtUpper, columnAtLower, columnAtUpper, basis } = this.optimum
    const session = await LpSession.open({
      columns: lp.columns.map(({ id, cost }, j) => ({
        id,
        cost,
        lower: columnAtLower[j] ? 0 : -Infinity,
        upper: columnAtUpper[j] ? 0 : Infinity,
      })),
      rows: lp.rows.map(({ id, entries }, i) => ({
        id,
        lower: rowAtLower[i] ? 0 : -Infinity,
        upper: rowAtUpper[i] ? 0 : Infinity,
        entries,
      })),
    })
    session.setBasis(basis)
    return session
  }

  dispose(): void {
    for (const model of [this.coneModel, this.faceModel]) {
      // A model that failed to open has nothing to dispose of.
      model?.then(
        (session) => session.dispose(),
        () => undefined,
      )
    }
    this.coneModel = undefined
    this.faceModel = undefined
  }
}

/**
 * Opens what several analyses of one optimum can share; hand it to each as `session` and dispose of it in a
 * `finally`. Throws where `program` and `outcome` do not belong together.
 */
export function openAnalysis(program: LinearProgram, outcome: OptimalOutcome): AnalysisSession {
  return new Workspace(program, outcome)
}

/** Runs an analysis in the caller's session, or in one of its own that is disposed of afterwards. */
export async function inWorkspace<Result>(
  program: LinearProgram,
  outcome: OptimalOutcome,
  options: AnalysisOptions,
  analyse: (workspace: Workspace, until: number) => Promise<Result>,
): Promise<Result> {
  const until = performance.now() + (options.deadlineMs ?? DEFAULT_DEADLINE_MS)
  if (options.session instanceof Workspace) return analyse(options.session, until)
  const workspace = new Workspace(program, outcome)
  try {
    return await analyse(workspace, until)
  } finally {
    workspace.dispose()
  }
}

/** The outcome, or an `AnalysisStopped` where the engines gave none. */
export function settled(outcome: Outcome): Exclude<Outcome, StoppedOutcome | { status: 'invalid' }> {
  if (outcome.status === 'invalid') throw new Error(outcome.problems[0]!.message)
  if (outcome.status === 'stopped') throw new AnalysisStopped(outcome.reason, outcome.detail)
  return outcome
}

/** Positions by id; throws on an id that the program does not have. */
export function positions(items: { id: string }[], ids: readonly string[], kind: 'row' | 'column'): number[] {
  const byId = new Map(items.map((item, position) => [item.id, position]))
  return ids.map((id) => {
    const position = byId.get(id)
    if (position === undefined) throw new Error(`The program has no ${kind} called ${id}.`)
    return position
  })
}

/** The sides on which a row has a limit; an equality has one that moves as a whole. */
export function sidesOf(row: { id: string; lower: number; upper: number }): RowSide[] {
  if (row.lower === row.upper) return [{ row: row.id, side: 'equal' }]
  const sides: SideName[] = []
  if (row.lower > -Infinity) sides.push('lower')
  if (row.upper < Infinity) sides.push('upper')
  return sides.map((side) => ({ row: row.id, side }))
}
