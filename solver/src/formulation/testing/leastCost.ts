import type { OptimalAnswer } from '@maslin/shared'
import { solveLinearProgram } from '../../lp'
import { batchScale } from '../measures'
import { buildProgram } from '../program'
import { solveMix, type SolveMixOptions } from '../solve'
import type { MixBuilder } from './builders'

/** Least cost in the answer's cost basis by building and solving the program alone; undefined where no mix is possible. */
export async function leastCost({ input }: MixBuilder): Promise<number | undefined> {
  if (input.limits.some(({ min, max }) => min !== undefined && max !== undefined && min > max))
    return undefined
  const built = buildProgram(input)
  if (!built.ok) throw new Error(built.reasons.map(({ detail }) => detail).join(' '))
  const outcome = await solveLinearProgram(built.formulation.program)
  if (outcome.status === 'infeasible') return undefined
  if (outcome.status !== 'optimal') throw new Error(`The program is ${JSON.stringify(outcome)}.`)
  return outcome.objective * batchScale(input) + built.formulation.constantCost
}

/** The answer, which must be a mix. */
export async function mixed({ input }: MixBuilder, options?: SolveMixOptions): Promise<OptimalAnswer> {
  const answer = await solveMix(input, options)
  if (answer.status !== 'optimal') throw new Error(`No mix: ${JSON.stringify(answer)}`)
  return answer
}

/** kg as fed of a feed in the answer; 0 where it is left out. */
export function kilogramsOf(answer: OptimalAnswer, feedId: string): number {
  return answer.blend.find((part) => part.feedId === feedId)?.kgAsFed ?? 0
}
