import { describe, expect, it } from 'vitest'
import { buyInCosts, costWindows } from '.'
import { solveLinearProgram, type LinearProgram, type OptimalOutcome } from '../lp'
import { instances } from '../lp/instances'

const named = (name: string): LinearProgram => instances.find((instance) => instance.name === name)!.lp
const column = (id: string, cost: number, lower = 0, upper = Infinity) => ({ id, cost, lower, upper })

async function optimum(lp: LinearProgram): Promise<OptimalOutcome> {
  const outcome = await solveLinearProgram(lp)
  if (outcome.status !== 'optimal') throw new Error(outcome.status)
  return outcome
}

/** Barley is cheapest per unit of energy; oats would be next; straw has no energy at all; salt is capped at zero. */
const energy: LinearProgram = {
  columns: [column('barley', 2), column('oats', 2), column('straw', 0.5), column('salt', 1, 0, 0)],
  rows: [
    {
      id: 'energy',
      lower: 12,
      upper: Infinity,
      entries: [
        [0, 12],
        [1, 10],
      ],
    },
  ],
}

describe('the window of a cost', () => {
  it('ends where another feed takes over', async () => {
    const windows = await costWindows(energy, await optimum(energy))
    expect(windows).toEqual([{ column: 'barley', cost: 2, lower: 0, upper: expect.closeTo(2.4, 12) }])
  })

  it('is open to one side for a feed at its cap', async () => {
    const capped = { ...energy, columns: [column('barley', 2, 0, 0.5), ...energy.columns.slice(1)] }
    const windows = await costWindows(capped, await optimum(capped))
    expect(windows.map(({ column: id, lower, upper }) => [id, lower, upper])).toEqual([
      ['barley', -Infinity, expect.closeTo(2.4, 12)],
      ['oats', expect.closeTo(20 / 12, 12), Infinity],
    ])
  })

  it('is exact at a degenerate optimum, where basis ranging is not', async () => {
    // x ≥ 2, y ≥ 2, x + y ≥ 4: x = y = 2 stays optimal while both costs are at least zero, whatever the basis.
    const lp = named('two-prices')
    const windows = await costWindows(lp, await optimum(lp))
    expect(windows).toEqual([
      { column: 'x', cost: 1, lower: 0, upper: Infinity },
      { column: 'y', cost: 1, lower: 0, upper: Infinity },
    ])
  })

  it('touches the cost itself where mixes tie', async () => {
    const lp = named('two-mixes')
    const outcome = await optimum(lp)
    for (const { cost, lower, upper } of await costWindows(lp, outcome))
      expect([lower, upper]).toContain(cost)
  })
})

describe('the buy-in cost', () => {
  it('is what the feed in use costs for the same', async () => {
    const outcome = await optimum(energy)
    const entries = await buyInCosts(energy, outcome, { amounts: true })
    expect(entries).toEqual([
      { column: 'oats', cost: 2, entersBelow: expect.closeTo(20 / 12, 12), amount: expect.closeTo(1.2, 12) },
      // Straw brings nothing: it enters when it is given away with money, and then without end.
      { column: 'straw', cost: 0.5, entersBelow: expect.closeTo(0, 12), amount: null },
      { column: 'salt', cost: 1, entersBelow: null, amount: null },
    ])
  })

  it('does not exist where no mix has room', async () => {
    // The total is met by its floor alone: anything else in the mix would break the cap, at any cost.
    const lp: LinearProgram = {
      columns: [column('hay', 1, 3), column('molasses', 1)],
      rows: [
        {
          id: 'total',
          lower: 3,
          upper: 3,
          entries: [
            [0, 1],
            [1, 1],
          ],
        },
      ],
    }
    expect(await buyInCosts(lp, await optimum(lp), { amounts: true })).toEqual([
      { column: 'molasses', cost: 1, entersBelow: null, amount: null },
    ])
  })

  it('is exact at a degenerate optimum', async () => {
    // Three limits meet in x = y = 2; z would relieve the sum and y together.
    const base = named('two-prices')
    const lp: LinearProgram = {
      columns: [...base.columns, column('z', 5)],
      rows: base.rows.map((row, i) => (i === 0 ? row : { ...row, entries: [...row.entries, [2, 1]] })),
    }
    const [entry] = await buyInCosts(lp, await optimum(lp), { columns: ['z'], amounts: true })
    expect(entry!.entersBelow).toBeCloseTo(1, 12)
    const below = await optimum({
      ...lp,
      columns: lp.columns.map((c) => (c.id === 'z' ? { ...c, cost: 0.999 } : c)),
    })
    expect(below.columns[2]!.value).toBeCloseTo(entry!.amount!, 12)
    const above = await optimum({
      ...lp,
      columns: lp.columns.map((c) => (c.id === 'z' ? { ...c, cost: 1.001 } : c)),
    })
    expect(above.columns[2]!.value).toBe(0)
  })

  it('refuses a column that is not there', async () => {
    const outcome = await optimum(energy)
    await expect(buyInCosts(energy, outcome, { columns: ['maize'] })).rejects.toThrow(
      'no column called maize',
    )
  })
})
