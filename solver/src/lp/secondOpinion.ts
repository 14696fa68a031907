import { withIntegersFixed } from './evidence'
import { DEFAULT_DEADLINE_MS, solveLinearProgram } from './solve'
import type { EngineName, LinearProgram, Outcome, SecondOpinion } from './types'

/** Relative difference in cost beyond which two engines disagree. */
export const AGREEMENT = 1e-6

/**
 * Asks the other engine about an answer. Compares verdicts, and costs relative to their size; never the amounts,
 * since several mixes may cost the same. Whole-number columns are held at the answer's amounts first, because the
 * small engine is not trusted with them: the opinion is then on the rest of the mix, and the note says so.
 */
export async function secondOpinion(
  lp: LinearProgram,
  outcome: Outcome,
  options: { deadlineMs?: number } = {},
): Promise<SecondOpinion> {
  const engine: EngineName =
    'engine' in outcome && outcome.engine === 'javascript-lp-solver' ? 'highs' : 'javascript-lp-solver'
  if (outcome.status === 'invalid' || outcome.status === 'stopped')
    return { engine, agrees: null, note: `There is no answer to compare: the outcome is ${outcome.status}.` }
  const hasIntegers = lp.columns.some((column) => column.integer)
  if (hasIntegers && outcome.status !== 'optimal')
    return { engine, agrees: null, note: 'The second engine does not search over whole numbers.' }
  const asked =
    hasIntegers && outcome.status === 'optimal'
      ? withIntegersFixed(
          lp,
          outcome.columns.map((column) => column.value),
        )
      : lp
  const other = await solveLinearProgram(asked, {
    engine,
    deadlineMs: options.deadlineMs ?? DEFAULT_DEADLINE_MS,
  })
  const suffix = hasIntegers ? ' (whole numbers held as in the answer)' : ''
  if (other.status === 'stopped' || other.status === 'invalid') {
    const detail = other.status === 'stopped' ? other.detail : other.status
    return { engine, agrees: null, note: `${engine} gave no answer: ${detail}.` }
  }
  if (other.status !== 'optimal' || outcome.status !== 'optimal')
    return {
      engine,
      agrees: other.status === outcome.status,
      note: `${engine} says ${other.status}, the answer says ${outcome.status}${suffix}.`,
    }
  // Relative to the sum of the costs without their signs: a cost near zero may be what is left of large ones.
  const size = lp.columns.reduce(
    (sum, column, j) => sum + Math.abs(column.cost * outcome.columns[j]!.value),
    0,
  )
  const difference = Math.abs(outcome.objective - other.objective)
  const relativeDifference = difference === 0 ? 0 : difference / size
  const agrees = relativeDifference <= AGREEMENT
  const finding = agrees ? 'the same least cost' : `another least cost, ${other.objective}`
  return {
    engine,
    agrees,
    objective: other.objective,
    relativeDifference,
    note: `${engine} finds ${finding}; the relative difference is ${relativeDifference.toExponential(1)}${suffix}.`,
  }
}
