import type { InfeasibleAnswer, Loosening } from '@maslin/shared'
import { AnalysisStopped, smallestLoosening } from '../analysis'
import type { LinearProgram } from '../lp'
import { OutOfTime } from './deadline'
import { REFERENCE_DRY_MATTER_KG } from './diet'
import { constantForm, valueOf } from './forms'
import { batchScale, type BoundSide } from './measures'
import type { SolveContext } from './optimalAnswer'
import { buildProgram, moveSide, type Formulation, type LimitSide } from './program'

type Proposal = InfeasibleAnswer['proposals'][number]

const MOST_PROPOSALS = 3
/** Limits of the conflict tried one at a time. */
const MOST_SINGLE = 6
/** Rounds in which limits whose denominator depends on the mix are weighed anew. */
const ROUNDS = 3
/** Rounds in which one such limit is drawn in; the iteration is quadratic and needs three or four. */
const MOST_ROUNDS = 20
/** One proposal may not take the time of the others: its elastic program is given up after so many milliseconds. */
const LONGEST_MS = 1500
/** Figures of a proposal, so that a person can read it; rounded to the safe side. */
const FIGURES = 4
/** Part of the last figure that is rounding of the solver; the rounded proposal is solved again in any case. */
const ROUNDING = 1e-3

interface Ranked extends Proposal {
  size: number
}

interface Loosened {
  side: LimitSide
  to: number
}

/**
 * First the least loosening in all, then other limits to loosen instead; each solved again and found possible. The
 * others are left out where time is short or their programs cannot be solved: the conflict is the answer, they are help.
 */
export async function proposalsFor(
  context: SolveContext,
  split: Formulation,
  members: LimitSide[],
): Promise<Proposal[]> {
  const negotiable = split.sides.filter(({ limit }) => limit.negotiable)
  const singles = members.filter(({ limit }) => limit.negotiable).slice(0, MOST_SINGLE)
  const found: Ranked[] = []
  const seen = new Set<string>()
  const consider = async (allowed: LimitSide[]): Promise<void> => {
    if (allowed.length === 0 || context.deadline.isShort()) return
    const proposal = await propose(context, split, allowed).catch((error: unknown) => {
      if (error instanceof AnalysisStopped || error instanceof OutOfTime) return undefined
      throw error
    })
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
  let best: { sides: Loosened[]; size: number } | undefined
  const rounds = allowed.every((side) => side.movesSide) ? 1 : ROUNDS
  for (let round = 0; round < rounds && !(best && context.deadline.isShort()); round++) {
    const loosening = await smallestLoosening(split.program, {
      rows: allowed.map((side) => ({
        row: side.rowId,
        side: side.side === 'min' ? 'lower' : 'upper',
        weight: 1 / (Math.max(valueOf(side.denominator, amounts), 1e-9) * sizeOf(split, side)),
      })),
      deadlineMs: Math.min(context.deadline.left(), LONGEST_MS),
    })
    if (!loosening.possible) return undefined
    amounts = loosening.amounts
    const sides = loosening.moves.flatMap((move): Loosened[] => {
      const side = allowed.find(({ rowId }) => rowId === move.row)
      return side ? [{ side, to: reached(side, amounts, move.newLimit) }] : []
    })
    await drawIn(context, split, sides)
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

/**
 * Draws each loosened limit back in as far as the others allow, one after another: beside a limit set absurdly far off,
 * anything within reach is equally near to the elastic program. The value is the best quotient over all possible mixes, by
 * the usual iteration for quotients of linear forms (maximise numerator − L · denominator, set L to the quotient found,
 * until it stays). Source: W. Dinkelbach, On Nonlinear Fractional Programming, Management Science 13 (1967), from memory.
 */
async function drawIn(
  { solve, deadline }: SolveContext,
  split: Formulation,
  loosened: Loosened[],
): Promise<void> {
  for (const entry of loosened) {
    const { side } = entry
    let program: LinearProgram = split.program
    for (const other of loosened) if (other !== entry) program = moveSide(program, other.side, other.to)
    const rows = program.rows.map((row, i) =>
      i === side.row ? { ...row, lower: -Infinity, upper: Infinity } : row,
    )
    const sign = side.side === 'min' ? -1 : 1
    for (let round = 0; round < MOST_ROUNDS && !deadline.isShort(); round++) {
      const bound = entry.to
      const columns = program.columns.map((column, j) => ({
        ...column,
        cost: sign * (side.numerator.terms[j]! - bound * side.denominator.terms[j]!),
      }))
      const outcome = await solve({ columns, rows })
      if (outcome.status !== 'optimal') break
      const amounts = outcome.columns.map(({ value }) => value)
      const denominator = valueOf(side.denominator, amounts)
      if (denominator <= 0) break
      const next = Math.max(0, valueOf(side.numerator, amounts) / denominator)
      if (!(sign * (bound - next) > 1e-9 * bound)) break
      entry.to = next
    }
  }
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
  const rounded = (side === 'min' ? Math.floor(steps + ROUNDING) : Math.ceil(steps - ROUNDING)) * unit
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
