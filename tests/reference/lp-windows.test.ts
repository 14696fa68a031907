import { beforeAll, describe, expect, it } from 'vitest'
import {
  buyInCosts,
  costCurve,
  costWindows,
  solveLinearProgram,
  type LinearProgram,
  type OptimalOutcome,
} from '@maslin/solver'
import { requireGlpsol, solveWithGlpsol } from './lp-glpk'
import { FAMILIES, randomMix } from './lp-random'

/**
 * Cost windows, buy-in costs and curves on seeded random mixes, many of them degenerate, judged by GLPK's least cost at
 * changed costs and limits. Pass line: 1e-8 of the least cost.
 */

const SEEDS = 6
const RELATIVE = 1e-8
/** A change of cost this large shows beside solver noise; the costs of the mixes lie between 0.05 and 6. */
const STEP = 0.02

beforeAll(requireGlpsol)

/** Runs checks side by side: each waits for GLPK most of its time. */
const each = async <Item>(items: Item[], check: (item: Item) => Promise<void>): Promise<void> => {
  await Promise.all(items.map(check))
}
const seeds = Array.from({ length: SEEDS }, (_, k) => k + 1)

async function optimum(lp: LinearProgram): Promise<OptimalOutcome> {
  const outcome = await solveLinearProgram(lp)
  if (outcome.status !== 'optimal') throw new Error(outcome.status)
  return outcome
}

const withCost = (lp: LinearProgram, column: string, cost: number): LinearProgram => ({
  columns: lp.columns.map((candidate) => (candidate.id === column ? { ...candidate, cost } : candidate)),
  rows: lp.rows,
})

async function leastCost(lp: LinearProgram): Promise<number> {
  const { status, objective } = await solveWithGlpsol(lp)
  expect(status).toBe('optimal')
  return objective
}

describe.each(FAMILIES.filter((family) => family !== 'infeasible'))('mixes of the family "%s"', (family) => {
  it('keep their amounts inside each cost window and change them beyond', async () => {
    let ends = 0
    await each(seeds, async (seed) => {
      const lp = randomMix(seed, family)
      const outcome = await optimum(lp)
      const amount = new Map(lp.columns.map(({ id }, j) => [id, outcome.columns[j]!.value]))
      await each(await costWindows(lp, outcome), async ({ column, cost, lower, upper }) => {
        expect(lower).toBeLessThanOrEqual(cost)
        expect(upper).toBeGreaterThanOrEqual(cost)
        for (const [end, direction] of [
          [lower, -1],
          [upper, 1],
        ] as const) {
          const name = `${family} ${seed}, ${column} ${direction}`
          /** What the very same amounts cost when this feed costs `other`. */
          const unchanged = (other: number) => outcome.objective + (other - cost) * amount.get(column)!
          const noise = RELATIVE * Math.abs(outcome.objective)
          const inside = Number.isFinite(end) ? cost + 0.99 * (end - cost) : cost + direction
          expect(
            Math.abs((await leastCost(withCost(lp, column, inside))) - unchanged(inside)),
            name,
          ).toBeLessThan(noise)
          if (!Number.isFinite(end)) continue
          const beyond = end + direction * STEP
          expect(await leastCost(withCost(lp, column, beyond)), name).toBeLessThan(unchanged(beyond))
          ends++
        }
      })
    })
    expect(ends).toBeGreaterThan(SEEDS)
  })

  it('take in an unused feed below its buy-in cost and not above, as much as is said', async () => {
    let entered = 0
    await each(seeds, async (seed) => {
      const lp = randomMix(seed, family)
      const outcome = await optimum(lp)
      const noise = RELATIVE * Math.abs(outcome.objective)
      await each(
        await buyInCosts(lp, outcome, { amounts: true }),
        async ({ column, entersBelow, amount }) => {
          const name = `${family} ${seed}, ${column}`
          if (entersBelow === null) {
            expect(
              Math.abs((await leastCost(withCost(lp, column, -1e3))) - outcome.objective),
              name,
            ).toBeLessThan(noise)
            return
          }
          const above = await leastCost(withCost(lp, column, entersBelow + STEP / 100))
          expect(Math.abs(above - outcome.objective), name).toBeLessThan(noise)
          // Just past the threshold the whole stated amount comes in: it saves that amount times the difference.
          const below = await leastCost(withCost(lp, column, entersBelow - STEP))
          expect(below, name).toBeLessThanOrEqual(outcome.objective - STEP * amount! + noise)
          const slight = await leastCost(withCost(lp, column, entersBelow - STEP / 1e4))
          expect(Math.abs(slight - (outcome.objective - (STEP / 1e4) * amount!)), name).toBeLessThan(
            noise + 1e-3 * (STEP / 1e4) * amount!,
          )
          entered++
        },
      )
    })
    expect(entered).toBeGreaterThan(10 * SEEDS)
  })

  it('cost along a curve what GLPK finds between its corners', async () => {
    let checked = 0
    await each(seeds, async (seed) => {
      const lp = randomMix(seed, family)
      const outcome = await optimum(lp)
      const used = outcome.columns.findIndex(({ value }) => value > 0)
      const binding = outcome.rows.findIndex(({ dual }, i) => i > 0 && dual !== 0)
      const { id, lower, upper } = lp.rows[binding]!
      const side = lower === upper ? 'equal' : outcome.rows[binding]!.dual > 0 ? 'lower' : 'upper'
      const level = side === 'upper' ? upper : lower
      const reach = 0.4 * Math.max(Math.abs(level), 1e-3)
      const { id: column, cost } = lp.columns[used]!
      const tasks = [
        { along: { kind: 'cost', column } as const, from: 0, to: 3 * cost },
        { along: { kind: 'limit', row: id, side } as const, from: level - reach, to: level + reach },
      ]
      for (const task of tasks) {
        const { points, feasible, complete } = await costCurve(lp, task)
        expect(complete).toBe(true)
        const { from, to } = feasible!
        await each(to > from ? [0, 1, 2, 3, 4, 5] : [], async (k) => {
          const at = from + ((to - from) * (k + 0.5)) / 6
          const after = points.findIndex((point) => point.at >= at)
          const [left, right] = [points[after - 1]!, points[after]!]
          const share = (at - left.at) / (right.at - left.at)
          const onCurve = left.objective + share * (right.objective - left.objective)
          const moved =
            task.along.kind === 'cost'
              ? withCost(lp, column, at)
              : {
                  columns: lp.columns,
                  rows: lp.rows.map((row) =>
                    row.id === id
                      ? { ...row, lower: side === 'upper' ? lower : at, upper: side === 'lower' ? upper : at }
                      : row,
                  ),
                }
          const found = await leastCost(moved)
          expect(
            Math.abs(onCurve - found),
            `${family} ${seed} ${task.along.kind} at ${at}`,
          ).toBeLessThanOrEqual(1e-7 * Math.abs(found))
          checked++
        })
      }
    })
    expect(checked).toBeGreaterThan(6 * SEEDS)
  })
})
