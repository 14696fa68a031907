import type { ValueStatus } from '@maslin/shared'
import { rowNutrients, type RequirementRow, type RowNutrient } from './types'

/** The figures of a table at one weight (or gain), with where they come from. */
export interface TableFigures {
  intakeDryMatterKg?: number
  dailyGainG?: number
  amounts: Partial<Record<RowNutrient, number>>
  sourceKeys: string[]
  status: ValueStatus
  /** The two values of the key between which the figures lie; absent where a row was hit exactly or the table left. */
  between?: [number, number]
  /** Set where the key lies outside the table: its ends. The figures are then those of the nearest row. */
  outside?: [number, number]
}

/** The weaker of two statuses: what is recalled from memory weighs down what was read. */
export function weakerStatus(a: ValueStatus, b: ValueStatus): ValueStatus {
  const weakest = ['invented', 'memory', 'practice', 'typed', 'derived', 'laboratory', 'read'] as const
  return weakest.find((status) => status === a || status === b) ?? a
}

const linear = (a: number | undefined, b: number | undefined, share: number): number | undefined =>
  a === undefined || b === undefined ? undefined : a + (b - a) * share

function mixRows(low: RequirementRow, high: RequirementRow, share: number): TableFigures {
  const figures: TableFigures = {
    amounts: {},
    sourceKeys: [...new Set([low.sourceKey, high.sourceKey])],
    status: weakerStatus(low.status, high.status),
  }
  const intake = linear(low.intakeDryMatterKg, high.intakeDryMatterKg, share)
  if (intake !== undefined) figures.intakeDryMatterKg = intake
  const gain = linear(low.dailyGainG, high.dailyGainG, share)
  if (gain !== undefined) figures.dailyGainG = gain
  for (const nutrient of rowNutrients) {
    const amount = linear(low.amounts[nutrient], high.amounts[nutrient], share)
    if (amount !== undefined) figures.amounts[nutrient] = amount
  }
  return figures
}

/**
 * The figures of a table at `at`, linear between the two neighbouring rows. Outside the table the nearest row stands as it
 * is and `outside` says so: nothing is extrapolated. A figure that one of the two rows lacks is absent.
 * @param key what the table runs along (body weight in kg, gain in g per day)
 */
export function figuresAt(
  rows: readonly RequirementRow[],
  key: 'bodyWeightKg' | 'dailyGainG',
  at: number,
): TableFigures | undefined {
  const sorted = rows
    .flatMap((row) => (row[key] === undefined ? [] : [{ row, x: row[key] }]))
    .sort((a, b) => a.x - b.x)
  const first = sorted[0]
  const last = sorted.at(-1)
  if (!first || !last) return undefined
  if (at < first.x || at > last.x) {
    const nearest = at < first.x ? first.row : last.row
    return { ...mixRows(nearest, nearest, 0), outside: [first.x, last.x] }
  }
  const above = sorted.find(({ x }) => x >= at) ?? last
  if (above.x === at) return mixRows(above.row, above.row, 0)
  const below = sorted[sorted.indexOf(above) - 1] ?? first
  return {
    ...mixRows(below.row, above.row, (at - below.x) / (above.x - below.x)),
    between: [below.x, above.x],
  }
}
