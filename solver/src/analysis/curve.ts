import { feasibilityProgram } from '../lp/evidence'
import { LpSession } from '../lp/session'
import { DEFAULT_DEADLINE_MS, solveLinearProgram } from '../lp/solve'
import type { LinearProgram } from '../lp/types'
import {
  AnalysisStopped,
  type CostCurve,
  type CurveParameter,
  type CurvePoint,
  type SampledCurve,
} from './types'
import { positions, settled } from './workspace'

const DEFAULT_POINTS = 200
/** Two values of the objective closer than this, relative to their size, are one. */
const SAME = 1e-10
/** Two slopes closer than this, relative to their size, are one. */
const SAME_SLOPE = 1e-8

/** A point of the curve with a slope that supports the curve there. */
interface Corner extends CurvePoint {
  slope: number
}

/**
 * The least cost along the cost of one column or the limit of one row, exactly: both curves are piecewise linear
 * (concave along a cost, convex along a limit), so the tangents at two ends meet at or beyond the next corner, and
 * two solves a corner find them all. Points carry the amounts, which shows where each feed comes in and goes out.
 *
 * Along a limit the part of the range that can be met is found first and reported. Along the cost of a column, or
 * anywhere the program is unbounded, the curve ends where the solver can no longer give a least cost: an `Error`.
 * Throws `AnalysisStopped` when the time is up; `Error` on whole-number columns (use `traceCurve`) and unknown ids.
 */
export async function costCurve(
  lp: LinearProgram,
  options: { along: CurveParameter; from: number; to: number; maxPoints?: number; deadlineMs?: number },
): Promise<CostCurve> {
  const { along } = options
  if (lp.columns.some((column) => column.integer))
    throw new Error(
      'With whole-number columns the curve is not piecewise linear and convex: trace it instead.',
    )
  if (!(options.from <= options.to)) throw new Error('A curve runs from the smaller to the larger value.')
  const until = performance.now() + (options.deadlineMs ?? DEFAULT_DEADLINE_MS)
  const position =
    along.kind === 'cost'
      ? positions(lp.columns, [along.column], 'column')[0]!
      : positions(lp.rows, [along.row], 'row')[0]!
  const range =
    along.kind === 'cost' ? options : await feasibleRange(lp, position, along.side, options, until)
  if (!range) return { points: [], feasible: null, complete: true }

  const session = await LpSession.open(lp)
  try {
    const evaluate = (at: number): Corner => {
      if (along.kind === 'cost') session.setCost(position, at)
      else setLimit(session, lp, position, along.side, at)
      const outcome = settled(session.solve(until))
      if (outcome.status !== 'optimal')
        throw new AnalysisStopped('numerical', `The program is ${outcome.status} at ${at}, inside the curve.`)
      return {
        at,
        objective: outcome.objective,
        amounts: outcome.columns.map((column) => column.value),
        slope: along.kind === 'cost' ? outcome.columns[position]!.value : outcome.rows[position]!.dual,
      }
    }
    const { corners, complete } = findCorners(
      evaluate,
      range.from,
      range.to,
      options.maxPoints ?? DEFAULT_POINTS,
    )
    return {
      points: merge(corners).map(({ at, objective, amounts }) => ({ at, objective, amounts })),
      feasible: { from: range.from, to: range.to },
      complete,
    }
  } finally {
    session.dispose()
  }
}

function setLimit(
  session: LpSession,
  lp: LinearProgram,
  position: number,
  side: 'lower' | 'upper' | 'equal',
  at: number,
): void {
  const { lower, upper } = lp.rows[position]!
  session.setRowBounds(position, side === 'upper' ? lower : at, side === 'lower' ? upper : at)
}

/** The part of the asked range in which the limit can be met, by the least and greatest activity of its row. */
async function feasibleRange(
  lp: LinearProgram,
  position: number,
  side: 'lower' | 'upper' | 'equal',
  asked: { from: number; to: number },
  until: number,
): Promise<{ from: number; to: number } | null> {
  const row = lp.rows[position]!
  const session = await LpSession.open(feasibilityProgram(lp))
  try {
    session.setRowBounds(
      position,
      side === 'upper' ? row.lower : -Infinity,
      side === 'lower' ? row.upper : Infinity,
    )
    const extreme = (direction: 1 | -1): number | null => {
      const costs = new Float64Array(lp.columns.length)
      for (const [j, value] of row.entries) costs[j] = -direction * value
      session.setCosts(costs)
      const outcome = settled(session.solve(until))
      if (outcome.status === 'unbounded') return direction * Infinity
      return outcome.status === 'optimal' ? outcome.rows[position]!.activity : null
    }
    const most = side === 'upper' ? Infinity : extreme(1)
    const least = side === 'lower' ? -Infinity : extreme(-1)
    if (most === null || least === null) return null
    const from = Math.max(asked.from, least, side === 'upper' ? row.lower : -Infinity)
    const to = Math.min(asked.to, most, side === 'lower' ? row.upper : Infinity)
    if (from <= to) return { from, to }
    // A row that can take one value only: its least and its greatest may cross by rounding.
    return from - to <= SAME * (Math.abs(from) + Math.abs(to)) ? { from: to, to } : null
  } finally {
    session.dispose()
  }
}

/** All corners between two ends, by intersecting tangents. */
function findCorners(
  evaluate: (at: number) => Corner,
  from: number,
  to: number,
  most: number,
): { corners: Corner[]; complete: boolean } {
  const corners = [evaluate(from)]
  if (from === to) return { corners, complete: true }
  corners.push(evaluate(to))
  const open: [Corner, Corner][] = [[corners[0]!, corners[1]!]]
  let complete = true
  while (open.length > 0) {
    const [left, right] = open.pop()!
    const bend = left.slope - right.slope
    const size = Math.abs(left.slope) + Math.abs(right.slope)
    if (Math.abs(bend) <= SAME_SLOPE * size) continue
    // Where the two tangents meet, reckoned from the left end to spare digits.
    const step = (right.objective - left.objective - right.slope * (right.at - left.at)) / bend
    const at = left.at + step
    const width = right.at - left.at
    if (!(step > SAME * width && step < (1 - SAME) * width)) continue
    if (corners.length >= most) {
      complete = false
      break
    }
    const found = evaluate(at)
    corners.push(found)
    const predicted = left.objective + left.slope * step
    const scale = Math.abs(left.objective) + Math.abs(left.slope * step)
    if (Math.abs(found.objective - predicted) > SAME * scale) open.push([left, found], [found, right])
  }
  return { corners: corners.sort((a, b) => a.at - b.at), complete }
}

/** Drops the points that lie on the straight line between their neighbours. */
function merge(corners: Corner[]): Corner[] {
  const kept: Corner[] = []
  corners.forEach((point, k) => {
    const before = kept[kept.length - 1]
    const after = corners[k + 1]
    if (before && after) {
      const share = (point.at - before.at) / (after.at - before.at)
      const straight = before.objective + share * (after.objective - before.objective)
      if (Math.abs(point.objective - straight) <= SAME * (Math.abs(straight) + Math.abs(point.objective)))
        return
    }
    kept.push(point)
  })
  return kept
}

/**
 * The least cost along any one-parameter family of programs, at `samples` evenly spaced values, both ends included.
 * For limits that are coefficients (as fed, intake windows, ratios): such a curve bends between its samples, and
 * the result says that it is sampled. Throws `AnalysisStopped` when the time is up before all samples are taken.
 */
export async function traceCurve(
  family: (at: number) => LinearProgram,
  options: { from: number; to: number; samples: number; deadlineMs?: number },
): Promise<SampledCurve> {
  const until = performance.now() + (options.deadlineMs ?? DEFAULT_DEADLINE_MS)
  const samples = Math.max(2, Math.floor(options.samples))
  const points: SampledCurve['points'] = []
  for (let k = 0; k < samples; k++) {
    const at = options.from + ((options.to - options.from) * k) / (samples - 1)
    const outcome = await solveLinearProgram(family(at), { deadlineMs: until - performance.now() })
    if (outcome.status === 'stopped' && outcome.reason === 'deadline')
      throw new AnalysisStopped('deadline', `Only ${k} of ${samples} samples were taken in time.`)
    const optimal = outcome.status === 'optimal'
    points.push({
      at,
      objective: optimal ? outcome.objective : null,
      amounts: optimal ? outcome.columns.map((column) => column.value) : [],
      status: outcome.status,
    })
  }
  return { sampled: true, points }
}
