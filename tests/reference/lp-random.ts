import type { LinearProgram } from '@maslin/solver'

/** A small seeded generator (mulberry32, public domain arithmetic): the same seed gives the same problems everywhere. */
export function seeded(seed: number): () => number {
  let state = seed | 0
  return () => {
    state = (state + 0x6d2b79f5) | 0
    let t = Math.imul(state ^ (state >>> 15), 1 | state)
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296
  }
}

export const FAMILIES = ['plain', 'degenerate', 'infeasible', 'badly scaled', 'ratios', 'bounded'] as const
export type Family = (typeof FAMILIES)[number]

/**
 * A mix problem of invented feeds: a fixed total, nutrient limits per kg of mix drawn around a hidden feasible mix
 * (so that it can be met unless the family says otherwise), some feeds capped.
 */
export function randomMix(seed: number, family: Family): LinearProgram {
  const random = seeded(seed * 7919 + FAMILIES.indexOf(family))
  const between = (low: number, high: number) => low + (high - low) * random()
  const feeds = 8 + Math.floor(random() * 40)
  const nutrients = 4 + Math.floor(random() * 25)
  const total = family === 'badly scaled' ? 10 ** between(-2, 5) : 1000
  const round = (value: number) => (family === 'degenerate' ? Math.round(value * 4) / 4 : value)

  const columns = Array.from({ length: feeds }, (_, j) => ({
    id: `feed ${j}`,
    cost: family === 'degenerate' ? Math.round(between(1, 6)) : between(0.05, 2),
    lower: 0,
    upper: Infinity,
  }))
  const hidden = Array.from({ length: feeds }, (): number => (random() < 0.3 ? random() : 0))
  if (!hidden.some((share) => share > 0)) hidden[0] = 1
  const sum = hidden.reduce((a, b) => a + b, 0)
  const amounts = hidden.map((share) => (share / sum) * total)
  const rows: LinearProgram['rows'] = [
    { id: 'total', lower: total, upper: total, entries: columns.map((_, j): [number, number] => [j, 1]) },
  ]

  for (let i = 0; i < nutrients; i++) {
    const unit = family === 'badly scaled' ? 10 ** between(-6, 5) : 10 ** between(-2, 1)
    const content = columns.map(() => (random() < 0.85 ? round(unit * between(0, 4)) : 0))
    const supply = content.reduce((whole, value, j) => whole + value * amounts[j]!, 0)
    const slack: number = family === 'degenerate' && random() < 0.5 ? 0 : between(0.01, 0.15)
    const entries = content.flatMap((value, j): [number, number][] => (value === 0 ? [] : [[j, value]]))
    if (family === 'ratios' && i % 3 === 2) {
      const other = rows[rows.length - 1]!
      const otherContent = new Map(other.entries)
      const otherSupply = other.entries.reduce((whole, [j, value]) => whole + value * amounts[j]!, 0)
      const ratio = otherSupply > 0 ? (supply / otherSupply) * (1 - slack) : 0
      const difference = content
        .map((value, j): [number, number] => [j, value - ratio * (otherContent.get(j) ?? 0)])
        .filter(([, value]) => value !== 0)
      rows.push({ id: `ratio ${i}`, lower: 0, upper: Infinity, entries: difference })
    } else if (random() < 0.65)
      rows.push({ id: `least ${i}`, lower: supply * (1 - slack), upper: Infinity, entries })
    else if (random() < 0.6)
      rows.push({ id: `most ${i}`, lower: -Infinity, upper: supply * (1 + slack), entries })
    else rows.push({ id: `window ${i}`, lower: supply * (1 - slack), upper: supply * (1 + slack), entries })
  }

  if (family === 'infeasible') addConflict(rows, feeds, total, 1 + (seed % 3), between)
  if (family === 'bounded')
    columns.forEach((column, j) => {
      if (random() < 0.5) column.upper = amounts[j]! + total * between(0, 0.2)
      if (random() < 0.2) column.lower = amounts[j]! * between(0, 0.9)
    })
  return { columns, rows }
}

/** Adds limits that cannot hold together: one out of reach of every feed, or two or three at odds with each other. */
function addConflict(
  rows: LinearProgram['rows'],
  feeds: number,
  total: number,
  members: number,
  between: (low: number, high: number) => number,
): void {
  const content = () => Array.from({ length: feeds }, () => between(1, 2))
  const entries = (values: number[]) => values.map((value, j): [number, number] => [j, value])
  const reach = members === 1 ? between(2.001, 3) : between(1.2, 1.5)
  const first = content()
  rows.push({ id: 'high first', lower: reach * total, upper: Infinity, entries: entries(first) })
  if (members === 1) return
  const second = members === 3 ? content() : first.map(() => 0)
  const also = members === 3 ? between(1.2, 1.5) : 0
  if (members === 3)
    rows.push({ id: 'high second', lower: also * total, upper: Infinity, entries: entries(second) })
  const both = first.map((value, j) => value + second[j]! + between(0, 0.2))
  rows.push({
    id: 'low both',
    lower: -Infinity,
    upper: (reach + also) * total * between(0.9, 0.99),
    entries: entries(both),
  })
}

/** The first `count` problems: every family in turn. */
export function randomMixes(count: number): { seed: number; family: Family; lp: LinearProgram }[] {
  return Array.from({ length: count }, (_, k) => {
    const family = FAMILIES[k % FAMILIES.length]!
    const seed = 1 + Math.floor(k / FAMILIES.length)
    return { seed, family, lp: randomMix(seed, family) }
  })
}
