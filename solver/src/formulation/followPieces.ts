import type { LinearProgram } from '../lp'
import { followBasis } from './basisPath'
import { spoken, type Solve } from './deadline'
import { moveSide, type LimitSide } from './program'

/** One point of a curve along a limit: the limit, the cost of the program, the amounts of its columns. */
export interface PathPoint {
  bound: number
  cost: number
  amounts: number[]
}

/** Points are put in until a straight line between neighbours is off by less than this share of the cost. */
const STRAIGHT = 5e-4
const MOST_HALVINGS = 6
/** How far past a corner the program is solved again, as a share of the span; grows while it does not get past. */
const PAST = 1e-7
const FURTHEST = 1e-3
const MOST_PIECES = 400

/**
 * Follows the optimum along one side of a limit whose move changes coefficients, basis by basis: each piece is known
 * exactly up to its end, where the program is solved again just past the corner. Between corners the cost is a
 * quotient of straight lines, so points are put in between; at a jump of the mix two points share one value.
 *
 * @returns points in the order walked, and where no mix was possible any more
 */
export async function followPieces(
  lp: LinearProgram,
  side: LimitSide,
  walk: { from: number; to: number },
  solve: Solve,
): Promise<{ points: PathPoint[]; stoppedAt?: number }> {
  const direction = walk.to >= walk.from ? 1 : -1
  const span = Math.abs(walk.to - walk.from)
  const points: PathPoint[] = []
  const costOf = (amounts: number[]): number =>
    lp.columns.reduce((sum, { cost }, j) => sum + cost * amounts[j]!, 0)
  let corner = walk.from
  let past = 0
  for (let piece = 0; piece < MOST_PIECES; piece++) {
    const start = corner + direction * past
    if (direction * (start - walk.to) > 0) break
    const moved = moveSide(lp, side, start)
    const asked = await solve(moved)
    // So close beyond what is possible an engine may find neither a mix nor a proof: ask a little further on.
    if (asked.status === 'stopped' && past < FURTHEST * span) {
      past = Math.max(past * 10, PAST * span)
      continue
    }
    const outcome = spoken(asked)
    if (outcome.status !== 'optimal') return { points, stoppedAt: corner }
    const path = followBasis(moved, outcome, { ...side, bound: start })
    const reach = path ? Math.min(direction > 0 ? path.up : path.down, Math.abs(walk.to - start)) : 0
    const back = path && (direction > 0 ? path.down : path.up) >= past ? -direction * past : 0
    const length = reach - direction * back
    const at = (tau: number): PathPoint => {
      const amounts = path ? path.amountsAt(tau) : outcome.columns.map(({ value }) => value)
      return { bound: start + tau, cost: costOf(amounts), amounts }
    }
    const first = at(back)
    const last = at(back + direction * length)
    for (const point of [first, ...between(at, start, first, last, MOST_HALVINGS), last])
      add(points, point, span)
    if (span === 0) break
    const next = start + direction * reach
    // Past the corner by a fixed share; where that did not get past it, by four times as much.
    past = direction * (next - corner) > 2 * past ? PAST * span : Math.max(past * 4, PAST * span)
    corner = next
    if (direction * (corner - walk.to) >= -1e-12 * span) break
  }
  return { points }
}

/** Points strictly between two of the same piece, closer where the curve bends more. */
function between(
  at: (tau: number) => PathPoint,
  start: number,
  left: PathPoint,
  right: PathPoint,
  halvings: number,
): PathPoint[] {
  if (halvings === 0) return []
  const middle = at((left.bound + right.bound) / 2 - start)
  const bend = Math.abs(middle.cost - (left.cost + right.cost) / 2)
  if (bend <= STRAIGHT * Math.abs(middle.cost)) return []
  return [
    ...between(at, start, left, middle, halvings - 1),
    middle,
    ...between(at, start, middle, right, halvings - 1),
  ]
}

/** Adds a point unless it says the same as the one before. */
function add(points: PathPoint[], point: PathPoint, span: number): void {
  const last = points.at(-1)
  const size = point.amounts.reduce((sum, amount) => sum + Math.abs(amount), 0)
  const same =
    last !== undefined &&
    Math.abs(last.bound - point.bound) <= 1e-9 * span &&
    point.amounts.every((amount, j) => Math.abs(amount - last.amounts[j]!) <= 1e-6 * size)
  if (!same) points.push(point)
}
