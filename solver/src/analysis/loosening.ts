import { DEFAULT_DEADLINE_MS, solveLinearProgram } from '../lp/solve'
import type { LinearProgram, RowSide } from '../lp/types'
import type { Loosening, LooseningMove } from './types'
import { positions, settled } from './workspace'

/** A limit may give way by this much more than needed, relative to it, so that the loosened program can be met. */
const SPARE = 1e-8
/** A move smaller than this beside its limit is rounding. */
const STILL = 1e-9

const IMPOSSIBLE: Loosening = { possible: false, moves: [], total: 0, amounts: [], objective: null }

interface Allowed extends RowSide {
  weight?: number
}

/** One way in which one limit may give way. */
interface Slack {
  asked: Allowed
  position: number
  /** 1: the mix may fall short of the limit; −1: it may exceed it. */
  sign: 1 | -1
  weight: number
}

/**
 * The smallest loosening, in total weight, of the given limits that makes the program possible: Σ weight · (how far
 * each limit gives way) is least. Limits not named stay as they are. The default weight is 1 / |limit|, so that the
 * moves are weighed as shares of their limits (for a limit of zero, 1 / its largest coefficient). An equality may
 * give way in either direction.
 *
 * Each `newLimit` lies beyond what is needed by a hundred-millionth, and the loosened program has been solved again:
 * `amounts` and `objective` are those of its cheapest mix.
 *
 * Throws `AnalysisStopped` when the time is up, `Error` on an unknown row or a side that has no limit.
 */
export async function smallestLoosening(
  lp: LinearProgram,
  options: { rows: Allowed[]; deadlineMs?: number },
): Promise<Loosening> {
  const deadlineMs = options.deadlineMs ?? DEFAULT_DEADLINE_MS
  const until = performance.now() + deadlineMs
  const slacks = slacksOf(lp, options.rows)
  const columns = lp.columns.map((column) => ({ ...column, cost: 0 }))
  const rows = lp.rows.map((row) => ({ ...row, entries: [...row.entries] }))
  for (const { position, sign, weight } of slacks) {
    rows[position]!.entries.push([columns.length, sign])
    columns.push({ id: `slack ${columns.length}`, cost: weight, lower: 0, upper: Infinity })
  }
  // A column of the program may be called as a slack is: the ids do not matter here.
  const elastic = { columns: columns.map((column, j) => ({ ...column, id: `${j}` })), rows }
  const least = settled(await solveLinearProgram(elastic, { deadlineMs }))
  if (least.status !== 'optimal') return IMPOSSIBLE

  const moves: LooseningMove[] = []
  const loosened: LinearProgram = { columns: lp.columns, rows: lp.rows.map((row) => ({ ...row })) }
  slacks.forEach(({ asked, position, sign }, k) => {
    const by = least.columns[lp.columns.length + k]!.value
    const row = lp.rows[position]!
    const limit = asked.side === 'upper' || (asked.side === 'equal' && sign < 0) ? row.upper : row.lower
    const unit = Math.abs(limit) || largestCoefficient(row.entries)
    if (by <= STILL * unit) return
    const newLimit = limit - sign * (by + SPARE * unit)
    moves.push({ row: asked.row, side: asked.side, limit, by, newLimit })
    if (sign > 0) loosened.rows[position]!.lower = newLimit
    else loosened.rows[position]!.upper = newLimit
  })
  const cheapest = settled(await solveLinearProgram(loosened, { deadlineMs: until - performance.now() }))
  if (cheapest.status === 'infeasible') return IMPOSSIBLE
  const amounts =
    cheapest.status === 'optimal' ? cheapest.columns.map((column) => column.value) : cheapest.point
  return {
    possible: true,
    moves,
    total: least.objective,
    amounts,
    objective: cheapest.status === 'optimal' ? cheapest.objective : null,
  }
}

function slacksOf(lp: LinearProgram, allowed: Allowed[]): Slack[] {
  const where = positions(
    lp.rows,
    allowed.map(({ row }) => row),
    'row',
  )
  return allowed.flatMap((asked, k): Slack[] => {
    const position = where[k]!
    const row = lp.rows[position]!
    const limit = asked.side === 'upper' ? row.upper : row.lower
    if (!Number.isFinite(limit)) throw new Error(`Row ${row.id} has no ${asked.side} limit to loosen.`)
    if (asked.side === 'equal' && row.lower !== row.upper)
      throw new Error(`Row ${row.id} is not an equality.`)
    const weight = asked.weight ?? 1 / (Math.abs(limit) || largestCoefficient(row.entries))
    const signs: (1 | -1)[] = asked.side === 'equal' ? [1, -1] : [asked.side === 'lower' ? 1 : -1]
    return signs.map((sign) => ({ asked, position, sign, weight }))
  })
}

function largestCoefficient(entries: [number, number][]): number {
  return entries.reduce((most, [, value]) => Math.max(most, Math.abs(value)), 0) || 1
}
