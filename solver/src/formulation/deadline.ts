import { AnalysisStopped } from '../analysis'
import {
  solveLinearProgram,
  type LinearProgram,
  type Outcome,
  type SolveOptions,
  type StoppedOutcome,
} from '../lp'

/** Thrown inside the formulation when the caller's time is up; turned into a `stopped` answer at its edge. */
export class OutOfTime extends Error {
  constructor() {
    super('The time allowed for this solve was up.')
    this.name = 'OutOfTime'
  }
}

/** Below this share of its time a call leaves out what its answer can do without. */
const SHORT = 0.3

/** The end of a call, handed from solve to solve. */
export class Deadline {
  /** As a time of `performance.now()`. */
  readonly until: number

  constructor(private readonly milliseconds: number) {
    this.until = performance.now() + milliseconds
  }

  /** Milliseconds left; throws `OutOfTime` where there are none. */
  left(): number {
    const left = this.until - performance.now()
    if (left <= 0) throw new OutOfTime()
    return left
  }

  /** Whether most of the time is gone, so that only what matters most should still be begun. */
  isShort(): boolean {
    return this.until - performance.now() < SHORT * this.milliseconds
  }
}

/** Solves one of the programs of a call within what is left of its time; throws `OutOfTime`. */
export type Solve = (lp: LinearProgram) => Promise<Outcome>

/** Every program of a call solved by the same engine within one deadline. */
export function solverWithin(deadline: Deadline, engine: SolveOptions['engine'] = 'auto'): Solve {
  return async (lp) => {
    const outcome = await solveLinearProgram(lp, { engine, deadlineMs: deadline.left() })
    if (outcome.status === 'stopped' && outcome.reason === 'deadline') throw new OutOfTime()
    return outcome
  }
}

/** The outcome, unless it is an engine's silence: that throws `AnalysisStopped`, so that it never passes for "impossible". */
export function spoken(outcome: Outcome): Exclude<Outcome, StoppedOutcome> {
  if (outcome.status === 'stopped') throw new AnalysisStopped(outcome.reason, outcome.detail)
  return outcome
}

/** What `work` gives, or `instead` where an engine found no trustworthy numbers for it; other errors pass. */
export async function unlessSilent<Result>(work: Promise<Result>, instead: Result): Promise<Result> {
  try {
    return await work
  } catch (error) {
    if (error instanceof AnalysisStopped && error.reason === 'numerical') return instead
    throw error
  }
}
