import type { Answer, InfeasibleAnswer, Loosening } from '@maslin/shared'
import { findConflict, smallestLoosening } from '../analysis'
import type { InfeasibleOutcome } from '../lp'
import { rulesOf } from './cautions'
import { constantForm, valueOf } from './forms'
import { REFERENCE_DRY_MATTER_KG } from './diet'
import { batchScale, type BoundSide } from './measures'
import { proofOf, type SolveContext } from './optimalAnswer'
import { buildProgram, DRY_MATTER_ROW, FORAGE_ROW, type Formulation, type LimitSide } from './program'

type Proposal = InfeasibleAnswer['proposals'][number]

const MOST_PROPOSALS = 3
/** Limits of the conflict tried one at a time. */
const MOST_SINGLE = 6
/** Rounds in which limits whose denominator depends on the mix are weighed anew. */
const ROUNDS = 3
/** Figures of a proposal, so that a person can read it; rounded to the safe side. */
const FIGURES = 4

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

interface Ranked extends Proposal {
  size: number
}

/** First the least loosening in all, then other limits to loosen instead; each solved again and found possible. */
async function proposalsFor(
  context: SolveContext,
  split: Formulation,
  members: LimitSide[],
): Promise<Proposal[]> {
  const negotiable = split.sides.filter(({ limit }) => limit.negotiable)
  const singles = members.filter(({ limit }) => limit.negotiable).slice(0, MOST_SINGLE)
  const found: Ranked[] = []
  const seen = new Set<string>()
  const consider = async (allowed: LimitSide[]): Promise<void> => {
    const proposal = allowed.length > 0 ? await propose(context, split, allowed) : undefined
    if (!proposal) return
    const key = proposal.loosenings
      .map(({ limitId, side }) => `${side}:${limitId}`)
      .sort()
      .join('|')
    if (seen.has(key)) return
    seen.add(key)
    found.push(proposal)
  }
  await consider(negotiable)
  for (const side of singles) await consider([side])
  // Where one limit alone cannot make room, the least loosening that leaves the first proposal's limits as they are.
  const moved = new Set(found[0]?.loosenings.map(({ limitId }) => limitId))
  if (found.length < MOST_PROPOSALS && moved.size > 0)
    await consider(negotiable.filter(({ limit }) => !moved.has(limit.id)))
  return found
    .sort((a, b) => a.size - b.size)
    .slice(0, MOST_PROPOSALS)
    .map(({ loosenings, leastCost }) => ({ loosenings, ...(leastCost === undefined ? {} : { leastCost }) }))
}

/**
 * The smallest loosening of the allowed sides, each measured as a share of its limit. A row's shortfall is a shift of
 * its limit by shortfall ÷ denominator; where the denominator depends on the mix it is weighed by the mix found in the
 * round before, and the new limit is what that mix itself reaches, so that it is possible for certain.
 */
async function propose(
  context: SolveContext,
  split: Formulation,
  allowed: LimitSide[],
): Promise<Ranked | undefined> {
  let amounts = evenMix(split)
  let best: { sides: { side: LimitSide; to: number }[]; size: number } | undefined
  const rounds = allowed.every((side) => side.movesSide) ? 1 : ROUNDS
  for (let round = 0; round < rounds; round++) {
    const loosening = await smallestLoosening(split.program, {
      rows: allowed.map((side) => ({
        row: side.rowId,
        side: side.side === 'min' ? 'lower' : 'upper',
        weight: 1 / (Math.max(valueOf(side.denominator, amounts), 1e-9) * sizeOf(split, side)),
      })),
      deadlineMs: context.deadline.left(),
    })
    if (!loosening.possible) return undefined
    amounts = loosening.amounts
    const sides = loosening.moves.flatMap((move) => {
      const side = allowed.find(({ rowId }) => rowId === move.row)
      return side ? [{ side, to: reached(side, amounts, move.newLimit) }] : []
    })
    const size = sides.reduce((sum, { side, to }) => sum + Math.abs(to - side.bound) / sizeOf(split, side), 0)
    if (!best || size < best.size) best = { sides, size }
  }
  if (!best || best.sides.length === 0) return undefined
  for (const tidy of [roundedOut, withSpare]) {
    const loosenings = best.sides.map(({ side, to }): Loosening => ({
      limitId: side.limit.id,
      side: side.side,
      from: side.bound,
      to: tidy(to, side.side),
    }))
    const leastCost = await costWith(context, loosenings)
    if (leastCost !== undefined) return { loosenings, leastCost, size: best.size }
  }
  return undefined
}

/** The limit in its own unit at which the mix found just meets it. */
function reached(side: LimitSide, amounts: number[], rightHandSide: number): number {
  if (side.movesSide)
    return Math.max(0, (rightHandSide + side.numerator.constant) / side.denominator.constant)
  const denominator = valueOf(side.denominator, amounts)
  const numerator = valueOf(side.numerator, amounts)
  if (denominator <= 0) return side.side === 'min' ? 0 : side.bound
  return Math.max(0, numerator / denominator)
}

/** Rounded to a few figures on the side that leaves more room. */
function roundedOut(to: number, side: BoundSide): number {
  if (to <= 0) return 0
  const unit = 10 ** (Math.floor(Math.log10(to)) - FIGURES + 1)
  const steps = to / unit
  const rounded = (side === 'min' ? Math.floor(steps + 1e-9) : Math.ceil(steps - 1e-9)) * unit
  return Number(rounded.toPrecision(FIGURES))
}

const withSpare = (to: number, side: BoundSide): number => to * (side === 'min' ? 1 - 1e-6 : 1 + 1e-6)

/** Least cost of the mix with these limits loosened, in the answer's cost basis; undefined where none is possible. */
async function costWith(
  { formulation, solve }: SolveContext,
  loosenings: Loosening[],
): Promise<number | undefined> {
  const { input } = formulation
  const limits = input.limits.map((limit) => {
    const moves = loosenings.filter(({ limitId }) => limitId === limit.id)
    return { ...limit, ...Object.fromEntries(moves.map(({ side, to }) => [side, to])) }
  })
  const built = buildProgram({ ...input, limits })
  if (!built.ok) return undefined
  const outcome = await solve(built.formulation.program)
  if (outcome.status !== 'optimal') return undefined
  return outcome.objective * batchScale(input) + built.formulation.constantCost
}

/** What a loosening is measured against: the limit itself; for a limit of zero the size such a limit usually has. */
function sizeOf(split: Formulation, side: LimitSide): number {
  if (side.bound > 0) return side.bound
  const amounts = evenMix(split)
  const denominator = valueOf(side.denominator, amounts)
  const numerator = valueOf(side.numerator, amounts)
  return denominator > 0 && numerator > 0 ? numerator / denominator : 1
}

/** Every feed with the same dry matter, at the batch's weight or the group's intake. */
function evenMix({ input, diet }: Formulation): number[] {
  const amounts = [...constantForm(diet.columns, 0).terms]
  const whole = input.basis === 'batch' ? REFERENCE_DRY_MATTER_KG : input.group.intakeDryMatterKg
  for (const { column, feed } of diet.mix) amounts[column] = whole / diet.mix.length / feed.dryMatter
  for (const source of diet.base) if (source.kind === 'forage') amounts[source.column] = source.alone
  return amounts
}
