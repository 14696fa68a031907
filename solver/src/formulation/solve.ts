import { FORMULATION_VERSION, type Answer, type FormulationInput, type LeftOut } from '@maslin/shared'
import { AnalysisStopped } from '../analysis'
import { DEFAULT_DEADLINE_MS, type EngineName } from '../lp'
import { Deadline, OutOfTime, solverWithin } from './deadline'
import { answerInfeasible } from './impossible'
import { answerOptimal, type SolveContext } from './optimalAnswer'
import { buildProgram, type InvalidReason } from './program'

export interface SolveMixOptions {
  /** `auto` = HiGHS, then the other engine where its answer fails the certificate. Default `auto`. */
  engine?: 'auto' | EngineName
  /** Milliseconds for the whole answer, analyses included. Default 10,000. */
  deadlineMs?: number
  /** Asks the independent engine too and puts its finding into the proof. Default false. */
  secondOpinion?: boolean
}

/**
 * The cheapest mix that meets the limits, with what every limit costs both ways, price windows, buy-in prices and a
 * proof; or which limits conflict and the smallest loosenings; or why there is no answer. Amounts in kg as fed and dry
 * matter of the batch or per head and day, money in `input.currency` per batch or per head and day (`costBasis`).
 *
 * Never throws for an input that passes `formulationInputSchema`. When the time is up the answer is `stopped`.
 */
export async function solveMix(input: FormulationInput, options: SolveMixOptions = {}): Promise<Answer> {
  const built = buildProgram(input)
  if (!built.ok)
    return failed('invalid', built.excluded, 'The mix cannot be solved as it stands.', built.reasons)
  const { formulation } = built
  const deadline = new Deadline(options.deadlineMs ?? DEFAULT_DEADLINE_MS)
  const solve = solverWithin(deadline, options.engine)
  const context: SolveContext = {
    formulation,
    deadline,
    solve,
    secondOpinion: options.secondOpinion ?? false,
  }
  try {
    const outcome = await solve(formulation.program)
    switch (outcome.status) {
      case 'optimal':
        return await answerOptimal(context, outcome)
      case 'infeasible':
        return await answerInfeasible(context, outcome)
      case 'stopped':
        return failed('stopped', formulation.excluded, outcome.detail)
      case 'unbounded':
        return failed('unbounded', formulation.excluded, 'The cost can fall without end.')
      case 'invalid':
        return failed(
          'invalid',
          formulation.excluded,
          'The numbers cannot be calculated with.',
          outcome.problems.map(({ message }) => ({ code: 'badNumber', detail: message })),
        )
    }
  } catch (error) {
    if (error instanceof OutOfTime || error instanceof AnalysisStopped)
      return failed('stopped', formulation.excluded, error.message)
    // An engine that dies midway is no reason to lose the caller's request: it ends with a reason.
    return failed(
      'stopped',
      formulation.excluded,
      error instanceof Error ? error.message.slice(0, 200) : 'unknown',
    )
  }
}

function failed(
  status: 'unbounded' | 'stopped' | 'invalid',
  leftOut: LeftOut[],
  detail: string,
  reasons: InvalidReason[] = [],
): Answer {
  return { version: FORMULATION_VERSION, status, leftOut, cautions: [], reasons, detail }
}
