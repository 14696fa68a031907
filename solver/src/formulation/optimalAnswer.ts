import type { Answer, Margin, OptimalAnswer, Proof } from '@maslin/shared'
import { marginalPrices, openAnalysis, type AnalysisSession, type MarginalPrice } from '../analysis'
import { secondOpinion, type OptimalOutcome, type Outcome } from '../lp'
import { cautionsOf } from './cautions'
import { unlessSilent, type Deadline, type Solve } from './deadline'
import { bindingSides, limitResultOf, sidesByLimit, type LimitStanding } from './limitResults'
import { marginsOf, type Margins } from './margins'
import type { Formulation, LimitSide } from './program'
import { leftOutByPrice, withWindows } from './prices'
import { baseDietOf, blendOf, costOf, supplyOf, totalsOf } from './report'
import { settleTies } from './ties'

export interface SolveContext {
  formulation: Formulation
  deadline: Deadline
  solve: Solve
  secondOpinion: boolean
}

/** Everything an answer says of the cheapest mix. */
export async function answerOptimal(context: SolveContext, first: OptimalOutcome): Promise<Answer> {
  const { formulation, deadline, solve } = context
  const { program, input } = formulation
  const { outcome, several } = await settleTies(program, first, solve)
  const session = openAnalysis(program, outcome)
  try {
    const amounts = outcome.columns.map(({ value }) => value)
    const plain = blendOf(formulation, amounts)
    const cost = costOf(formulation, plain, outcome.objective)
    const standings = await standingsOf(context, outcome, session, amounts)
    const limits = standings.map((standing) => limitResultOf(formulation, standing, amounts, cost.least))
    const prices = { formulation, optimal: outcome, session, deadline }
    const blend = await unlessSilent(withWindows(prices, plain), plain)
    const leftOut = [...(await leftOutByPrice(prices, plain)), ...formulation.excluded]
    const proof = await proofOf(context, outcome)
    const answer: OptimalAnswer = {
      version: input.version,
      status: 'optimal',
      costBasis: input.basis === 'batch' ? 'batch' : 'headDay',
      blend,
      totals: totalsOf(plain),
      cost,
      baseDiet: baseDietOf(formulation, amounts),
      limits,
      supply: supplyOf(formulation, amounts),
      leftOut,
      cautions: cautionsOf(formulation, amounts),
      degenerate: several || limits.some((limit) => limit.differs),
      proof,
    }
    return answer
  } finally {
    session.dispose()
  }
}

/** The margins of every side on which the mix rests. */
async function standingsOf(
  { formulation, deadline, solve }: SolveContext,
  outcome: OptimalOutcome,
  session: AnalysisSession,
  amounts: number[],
): Promise<LimitStanding[]> {
  const byLimit = sidesByLimit(formulation.sides)
  const binding = byLimit.map((sides) => bindingSides(sides, amounts))
  const rows = [
    ...new Set(
      binding
        .flat()
        .filter((side) => side.movesSide)
        .map((side) => side.rowId),
    ),
  ]
  // Sides left without a price here get theirs by `marginsOf`, which goes another way.
  const prices =
    rows.length === 0
      ? []
      : await unlessSilent(
          marginalPrices(formulation.program, outcome, { session, rows, deadlineMs: deadline.left() }),
          [],
        )
  const standings: LimitStanding[] = []
  for (const [i, sides] of byLimit.entries()) {
    const standing: LimitStanding = { sides, binding: [] }
    for (const side of binding[i]!) {
      deadline.left()
      const price = prices.find(({ row, side: end }) => row === side.rowId && end === side.rowSide)
      const margins =
        side.movesSide && price
          ? marginsOfPrice(side, price)
          : await marginsOf(formulation.program, outcome, side, solve)
      standing.binding.push({ side, margins })
    }
    standings.push(standing)
  }
  return standings
}

/** A row's prices in the limit's own unit: the right-hand side is limit · denominator − what the base diet brings. */
function marginsOfPrice(side: LimitSide, { more, less }: MarginalPrice): Margins {
  const perUnit = side.denominator.constant
  const limitAt = (rightHandSide: number): number => (rightHandSide + side.numerator.constant) / perUnit
  const margin = (move: { price: number } | 'impossible', end: number, direction: 1 | -1): Margin => {
    if (move === 'impossible') return { impossible: true }
    // A limit cannot be negative: what holds without end below holds down to zero.
    const until = direction < 0 ? Math.max(0, limitAt(end)) : limitAt(end)
    return { perUnit: move.price * perUnit, ...(Number.isFinite(until) ? { until } : {}), impossible: false }
  }
  return {
    raise: margin(more, more === 'impossible' ? NaN : more.upTo, 1),
    lower: margin(less, less === 'impossible' ? NaN : less.downTo, -1),
  }
}

export async function proofOf(
  { formulation, deadline, secondOpinion: wanted }: SolveContext,
  outcome: Extract<Outcome, { certificate: unknown }>,
): Promise<Proof> {
  const { certificate, engine, milliseconds } = outcome
  const proof: Proof = {
    engine,
    certified: certificate.valid,
    worstViolation: Math.max(
      certificate.rowViolation ?? 0,
      certificate.boundViolation ?? 0,
      certificate.dualViolation ?? 0,
      certificate.complementarity ?? 0,
    ),
    costGap: certificate.gap ?? 0,
    tolerance: certificate.tolerance,
    milliseconds,
  }
  if (!wanted) return proof
  const opinion = await secondOpinion(formulation.program, outcome, { deadlineMs: deadline.left() })
  return {
    ...proof,
    secondOpinion: {
      engine: opinion.engine,
      ...(opinion.agrees === null ? {} : { agrees: opinion.agrees }),
      ...(opinion.relativeDifference === undefined ? {} : { relativeDifference: opinion.relativeDifference }),
      note: opinion.note,
    },
  }
}
