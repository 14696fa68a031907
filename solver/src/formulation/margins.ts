import type { Margin } from '@maslin/shared'
import type { LinearProgram, OptimalOutcome, Outcome } from '../lp'
import { followBasis, type BasisPath } from './basisPath'
import { spoken, type Solve } from './deadline'
import { valueOf } from './forms'
import { moveSide, type LimitSide } from './program'

/** The two directions in which a limit can move. */
export interface Margins {
  raise: Margin
  lower: Margin
}

/** Steps off a corner, relative to the size of the limit, tried until one lies within the first piece. */
const STEPS = [1e-4, 1e-5, 1e-6, 1e-7]
/** A basis that holds for less than this, relative to the limit, holds for nothing. */
const NOTHING = 1e-8

/**
 * What moving one side of a limit up and down does to the least cost, exact at the limit's present value, in cost
 * of the program per unit of the limit, with the value of the limit up to which the same feeds and the same limits
 * carry the mix.
 *
 * Where the optimum is an ordinary corner both directions follow from its basis (`followBasis`). Where more is worth
 * something else than less, the limit is moved by a small step, the program solved again, and the basis found there
 * followed back to the present value: the rate is the one at the present value, not a difference over the step.
 * With a constant denominator the rate holds unchanged up to `until`; else (as fed, ratios, shares and concentrations
 * of a diet whose size may change) it is the rate at the start of a curve that bends slightly on the way.
 */
export async function marginsOf(
  lp: LinearProgram,
  optimal: OptimalOutcome,
  side: LimitSide,
  solve: Solve,
): Promise<Margins> {
  const here = followBasis(lp, optimal, side)
  const at = async (direction: 1 | -1): Promise<Margin> => {
    const reach = here && (direction > 0 ? here.up : here.down)
    if (here && reach! > NOTHING * sizeOf(side))
      return marginAlong(side, direction, here.priceAt(0), side.bound + direction * reach!)
    return stepOff(lp, optimal, side, direction, solve)
  }
  return { raise: await at(1), lower: await at(-1) }
}

/** A size to measure moves of the limit by, in its own unit: the limit itself, or what its feeds commonly come to. */
export function sizeOf(side: LimitSide): number {
  if (side.bound > 0) return side.bound
  const whole =
    side.denominator.constant + side.denominator.terms.reduce((sum, term) => sum + Math.abs(term), 0)
  const part = side.numerator.constant + side.numerator.terms.reduce((sum, term) => sum + Math.abs(term), 0)
  return whole > 0 && part > 0 ? part / whole : 1
}

async function stepOff(
  lp: LinearProgram,
  optimal: OptimalOutcome,
  side: LimitSide,
  direction: 1 | -1,
  solve: Solve,
): Promise<Margin> {
  const otherEnd = side.side === 'min' ? side.limit.max : side.limit.min
  const room =
    side.rowSide !== 'equal' && otherEnd !== undefined && (side.side === 'min') === direction > 0
      ? Math.abs(otherEnd - side.bound)
      : Infinity
  if (room === 0) return { impossible: true }
  let difference: Margin | undefined
  let infeasible = false
  let silence: Outcome | undefined
  for (const relative of STEPS) {
    const step = direction * Math.min(relative * sizeOf(side), room / 2)
    const bound = side.bound + step
    if (bound < 0) return { impossible: true }
    const moved = moveSide(lp, side, bound)
    const outcome = await solve(moved)
    infeasible ||= outcome.status === 'infeasible'
    if (outcome.status === 'stopped') silence = outcome
    if (outcome.status !== 'optimal') continue
    difference = { perUnit: (outcome.objective - optimal.objective) / step, until: bound, impossible: false }
    const path = followBasis(moved, outcome, { ...side, bound })
    if (path && coversBack(path, step))
      return marginAlong(
        side,
        direction,
        path.priceAt(-step),
        bound + direction * (direction > 0 ? path.up : path.down),
      )
  }
  if (silence && !difference && !infeasible) spoken(silence)
  return difference ?? { impossible: true }
}

/** Whether the basis found after a step is optimal all the way back. */
function coversBack(path: BasisPath, step: number): boolean {
  return (step > 0 ? path.down : path.up) >= Math.abs(step) * (1 - 1e-6)
}

function marginAlong(side: LimitSide, direction: 1 | -1, price: number, until: number): Margin {
  const otherEnd = side.side === 'min' ? side.limit.max : side.limit.min
  const stop =
    side.rowSide === 'equal' || otherEnd === undefined
      ? until
      : direction > 0 && side.side === 'min'
        ? Math.min(until, otherEnd)
        : direction < 0 && side.side === 'max'
          ? Math.max(until, otherEnd)
          : until
  const end = direction < 0 ? Math.max(0, stop) : stop
  // No limit is negative: towards zero a rate that never ends ends at zero.
  return { perUnit: price, ...(Number.isFinite(end) ? { until: end } : {}), impossible: false }
}

/** Whether the mix rests on this side of the limit: the distance is rounding beside the terms behind it. */
export function isBinding(side: LimitSide, amounts: number[]): boolean {
  const numerator = valueOf(side.numerator, amounts)
  const allowed = side.bound * valueOf(side.denominator, amounts)
  const size = Math.abs(numerator) + Math.abs(allowed)
  return Math.abs(numerator - allowed) <= 1e-9 * size
}
