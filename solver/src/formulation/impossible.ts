import type { Answer } from '@maslin/shared'
import { findConflict } from '../analysis'
import type { InfeasibleOutcome } from '../lp'
import { rulesOf } from './cautions'
import { proofOf, type SolveContext } from './optimalAnswer'
import { buildProgram, DRY_MATTER_ROW, FORAGE_ROW } from './program'
import { proposalsFor } from './proposals'

/** Why no mix is possible, by the keeper's limits alone, and the smallest loosenings that make one possible. */
export async function answerInfeasible(context: SolveContext, outcome: InfeasibleOutcome): Promise<Answer> {
  const { formulation, deadline } = context
  const { input, excluded } = formulation
  const proof = await proofOf(context, outcome)
  const built = buildProgram(input, { split: true })
  const split = built.ok ? built.formulation : formulation
  const keep = split.program.rows
    .map((row) => row.id)
    .filter((id) => id === DRY_MATTER_ROW || id === FORAGE_ROW)
  const found = await findConflict(split.program, { keep, deadlineMs: deadline.left() })
  const members = found.members.flatMap(({ row }) => split.sides.filter((side) => side.rowId === row))
  return {
    version: input.version,
    status: 'infeasible',
    conflict: members.map(({ limit, side }) => ({ limitId: limit.id, side })),
    proposals: await proposalsFor(context, split, members),
    leftOut: excluded,
    cautions: rulesOf(input).cautions,
    proof,
  }
}
