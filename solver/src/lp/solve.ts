import { attempt, type Work } from './attempt'
import type { Engine } from './engines/engine'
import { highsEngine } from './engines/highs'
import { shortReason } from './engines/highsRuntime'
import { javascriptLpSolverEngine } from './engines/javascriptLpSolver'
import type { EngineName, LinearProgram, Outcome, SolveOptions, StoppedOutcome } from './types'
import { findProblems } from './validate'

export const DEFAULT_DEADLINE_MS = 10_000

const ENGINES: Record<EngineName, Engine> = {
  highs: highsEngine,
  'javascript-lp-solver': javascriptLpSolverEngine,
}

/**
 * Solves a linear program and returns an outcome that has been checked against the program as given: an optimum
 * with prices, a proof that no mix meets the limits, a direction of endless gain, what is wrong with the program, or
 * an honest `stopped`. Never throws for anything that is in the program, never returns an unchecked answer.
 *
 * `dual` and `reducedCost` are in cost per unit of the row or column as given (unscaled). Where several mixes cost
 * the same, one of them is returned; compare outcomes by objective.
 *
 * With `engine: 'auto'` HiGHS solves, and javascript-lp-solver where HiGHS cannot run or its answer fails the check.
 * A named engine answers alone.
 */
export async function solveLinearProgram(lp: LinearProgram, options: SolveOptions = {}): Promise<Outcome> {
  const problems = findProblems(lp)
  if (problems.length > 0) return { status: 'invalid', problems }
  const started = performance.now()
  const until = started + (options.deadlineMs ?? DEFAULT_DEADLINE_MS)
  const { engine = 'auto' } = options
  const engines: Engine[] = engine === 'auto' ? Object.values(ENGINES) : [ENGINES[engine]]
  const rejected: NonNullable<StoppedOutcome['rejected']> = []
  let last: StoppedOutcome | undefined
  for (const next of engines) {
    const work: Work = { engine: next, until, started }
    try {
      await next.prepare()
    } catch (error) {
      rejected.push({ engine: next.name, reason: shortReason(error) })
      continue
    }
    for (let way = 0; way < next.attempts; way++) {
      const outcome = attempt(lp, work, way)
      if (outcome.status !== 'stopped') {
        if (rejected.length > 0 && 'engine' in outcome) outcome.rejected = rejected
        return outcome
      }
      last = outcome
      rejected.push({ engine: next.name, reason: outcome.detail })
      if (outcome.reason === 'deadline') break
    }
    if (last?.reason === 'deadline') break
  }
  return {
    status: 'stopped',
    reason: last?.reason ?? 'numerical',
    detail: last?.detail ?? 'no engine could be loaded',
    engine: last?.engine ?? engines[0]!.name,
    milliseconds: performance.now() - started,
    rejected,
  }
}
