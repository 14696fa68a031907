import type { LpSession } from '../lp/session'
import type { LinearProgram, OptimalOutcome } from '../lp/types'
import { largestAmount } from './face'
import { basisCostRange } from './kernelCosts'
import type { AnalysisOptions, BuyIn, CostWindow } from './types'
import { inWorkspace, positions, settled, type Workspace } from './workspace'

/**
 * The least cost of leaving the optimum along directions that change a column's amount by exactly one unit, with
 * the prices of that least cost; null where no such direction exists.
 *
 * Source of the formula: the optimum stays optimal as long as no feasible direction gets cheaper, so this least
 * cost is exactly how far the column's own cost may move (linear programming duality on the tangent cone).
 */
function leave(
  cone: LpSession,
  column: number,
  direction: 1 | -1,
  until: number,
): { perUnit: number; duals: number[] } | null {
  const { lower, upper } = cone.lp.columns[column]!
  const step = direction * cone.columnUnit(column)
  if (step < lower || step > upper) return null
  cone.setColumnBounds(column, step, step)
  const outcome = settled(cone.solve(until))
  cone.setColumnBounds(column, lower, upper)
  if (outcome.status !== 'optimal') return null
  return { perUnit: outcome.objective / Math.abs(step), duals: outcome.rows.map((row) => row.dual) }
}

function selected(
  lp: LinearProgram,
  asked: string[] | undefined,
  wanted: (column: number) => boolean,
): number[] {
  return asked
    ? positions(lp.columns, asked, 'column')
    : lp.columns.flatMap((_, column) => (wanted(column) ? [column] : []))
}

/**
 * For each column in use: the range of its cost (per unit of the column, others unchanged) over which the very same
 * amounts stay optimal. Without `columns`, every column with an amount other than zero. Basis ranging answers only
 * where the optimum is proven nondegenerate, since it is wrong elsewhere; else two small re-solves a column.
 */
export function costWindows(
  lp: LinearProgram,
  optimal: OptimalOutcome,
  options: AnalysisOptions & { columns?: string[] } = {},
): Promise<CostWindow[]> {
  return inWorkspace(lp, optimal, options, async (workspace, until) => {
    const columns = selected(lp, options.columns, (j) => optimal.columns[j]!.value !== 0)
    const windows: CostWindow[] = []
    for (const j of columns) {
      const { id, cost } = lp.columns[j]!
      windows.push({ column: id, cost, ...(await windowOf(workspace, j, until)) })
    }
    return windows
  })
}

async function windowOf(
  workspace: Workspace,
  j: number,
  until: number,
): Promise<{ lower: number; upper: number }> {
  const { optimum } = workspace
  const { cost } = optimum.lp.columns[j]!
  if (optimum.kernel && optimum.pricesUnique) return basisCostRange(optimum, optimum.kernel, j)
  const cone = await workspace.cone()
  const less = leave(cone, j, -1, until)
  const more = leave(cone, j, 1, until)
  // Rounding can leave a gain of −1e-17 where the amounts are not the only optimal ones: the window ends at the cost.
  return {
    lower: more ? cost - Math.max(more.perUnit, 0) : -Infinity,
    upper: less ? cost + Math.max(less.perUnit, 0) : Infinity,
  }
}

/**
 * For each column at zero: the cost (per unit of the column) below which it enters the mix, exactly, also at
 * degenerate optima; null where it enters at no cost whatever, because no mix that meets the limits has room for
 * it. With `amounts` also the largest amount used just past that cost. Without `columns`, every column whose amount
 * is zero.
 */
export function buyInCosts(
  lp: LinearProgram,
  optimal: OptimalOutcome,
  options: AnalysisOptions & { columns?: string[]; amounts?: boolean } = {},
): Promise<BuyIn[]> {
  return inWorkspace(lp, optimal, options, async (workspace, until) => {
    const columns = selected(lp, options.columns, (j) => optimal.columns[j]!.value === 0)
    const results: BuyIn[] = []
    for (const j of columns) {
      const { id, cost } = lp.columns[j]!
      const entry = await entryOf(workspace, j, until)
      if (!entry) {
        results.push({ column: id, cost, entersBelow: null, amount: null })
        continue
      }
      const amount = options.amounts ? await amountOf(workspace, j, entry.duals, until) : null
      results.push({ column: id, cost, entersBelow: entry.entersBelow, amount })
    }
    return results
  })
}

async function amountOf(
  workspace: Workspace,
  j: number,
  duals: number[],
  until: number,
): Promise<number | null> {
  const { ranges, nondegenerate, optimum } = workspace
  return ranges && nondegenerate
    ? ranges.largestEntry(j)
    : largestAmount(await workspace.face(), optimum, duals, j, until)
}

async function entryOf(
  workspace: Workspace,
  j: number,
  until: number,
): Promise<{ entersBelow: number; duals: number[] } | null> {
  const { lp, outcome, kernel, pricesUnique, columnAtUpper } = workspace.optimum
  const { cost } = lp.columns[j]!
  if (columnAtUpper[j]) return null
  if (kernel && pricesUnique && outcome.columns[j]!.basis !== 'basic')
    return {
      entersBelow: cost - Math.max(outcome.columns[j]!.reducedCost, 0),
      duals: outcome.rows.map((row) => row.dual),
    }
  const more = leave(await workspace.cone(), j, 1, until)
  return more && { entersBelow: cost - Math.max(more.perUnit, 0), duals: more.duals }
}
