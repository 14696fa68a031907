import { describe, expect, it } from 'vitest'
import { AnalysisStopped, marginalPrices, openAnalysis } from '.'
import { solveLinearProgram, type LinearProgram, type OptimalOutcome } from '../lp'
import { instances } from '../lp/instances'

const named = (name: string): LinearProgram => instances.find((instance) => instance.name === name)!.lp

async function optimum(lp: LinearProgram): Promise<OptimalOutcome> {
  const outcome = await solveLinearProgram(lp)
  if (outcome.status !== 'optimal') throw new Error(outcome.status)
  return outcome
}

const prices = async (lp: LinearProgram, rows?: string[]) =>
  marginalPrices(lp, await optimum(lp), rows ? { rows } : {})

const column = (id: string, cost: number, lower = 0, upper = Infinity) => ({ id, cost, lower, upper })

describe('the price of a limit', () => {
  it('is one price with its range where the optimum is nondegenerate', async () => {
    // min 2x + 3y, x + y ≥ 10, x ≤ 6: x = 6, y = 4, cost 24. One more of the sum costs 3, one more room for x saves 1.
    const lp: LinearProgram = {
      columns: [column('x', 2), column('y', 3)],
      rows: [
        {
          id: 'sum',
          lower: 10,
          upper: Infinity,
          entries: [
            [0, 1],
            [1, 1],
          ],
        },
        { id: 'room', lower: -Infinity, upper: 6, entries: [[0, 1]] },
        { id: 'slack', lower: 1, upper: 9, entries: [[1, 1]] },
      ],
    }
    const [sum, room, slackLower, slackUpper] = await prices(lp)
    expect(sum).toMatchObject({ side: 'lower', limit: 10, activity: 10, binding: true, differs: false })
    expect(sum!.more).toEqual({ price: 3, upTo: 15 })
    expect(sum!.less).toEqual({ price: 3, downTo: 7 })
    expect(room!.more).toEqual({ price: -1, upTo: 9 })
    expect(room!.less).toEqual({ price: -1, downTo: 1 })
    expect(slackLower).toMatchObject({
      binding: false,
      more: { price: 0, upTo: 4 },
      less: { price: 0, downTo: -Infinity },
    })
    expect(slackUpper).toMatchObject({
      binding: false,
      more: { price: 0, upTo: Infinity },
      less: { price: 0, downTo: 4 },
    })
  })

  it('differs both ways where limits meet in one point', async () => {
    // x ≥ 2, y ≥ 2 and x + y ≥ 4 meet: any one raised costs 1, any one lowered saves nothing.
    for (const price of await prices(named('two-prices')))
      expect(price).toMatchObject({
        differs: true,
        more: { price: 1, upTo: Infinity },
        less: { price: 0, downTo: -Infinity },
      })
  })

  it('is "impossible" where the limit cannot move that way', async () => {
    const lp: LinearProgram = {
      columns: [column('x', 2, 0, 5), column('y', 1)],
      rows: [
        { id: 'most of x', lower: 5, upper: Infinity, entries: [[0, 1]] },
        {
          id: 'sum',
          lower: 6,
          upper: Infinity,
          entries: [
            [0, 1],
            [1, 1],
          ],
        },
      ],
    }
    const [most, sum] = await prices(lp)
    expect(most).toMatchObject({ more: 'impossible', less: { price: 1, downTo: 0 }, differs: true })
    expect(sum).toMatchObject({ differs: false, more: { price: 1 }, less: { price: 1, downTo: 5 } })
  })

  it('moves an equality as one side', async () => {
    const [one, twice] = await prices(named('redundant-equalities'))
    // Each says the same as the other: neither can move alone.
    expect(one).toMatchObject({ side: 'equal', more: 'impossible', less: 'impossible' })
    expect(twice).toMatchObject({ side: 'equal', more: 'impossible', less: 'impossible' })
    const [equal] = await prices(named('fixed-by-two-rows'), ['need'])
    expect(equal).toMatchObject({
      side: 'lower',
      more: { price: 19, upTo: Infinity },
      less: { price: 19, downTo: 0 },
    })
  })

  it('lets neither end of a window pass the other', async () => {
    const lp: LinearProgram = {
      columns: [column('x', 1)],
      rows: [{ id: 'window', lower: 2, upper: 3, entries: [[0, 1]] }],
    }
    const [lower, upper] = await prices(lp)
    expect(lower).toMatchObject({ side: 'lower', more: { price: 1, upTo: 3 }, less: { price: 1, downTo: 0 } })
    expect(upper).toMatchObject({
      side: 'upper',
      more: { price: 0, upTo: Infinity },
      less: { price: 0, downTo: 2 },
    })
  })

  it('holds to the end of the range when several mixes tie', async () => {
    // Both feeds cost 1: the sum costs 1 a unit for ever, although the basis must change at the cap of x.
    const [sum, cap] = await prices(named('two-mixes'))
    expect(sum).toMatchObject({
      differs: false,
      more: { price: 1, upTo: Infinity },
      less: { price: 1, downTo: 0 },
    })
    expect(cap!.more).toEqual({ price: 0, upTo: Infinity })
    expect(cap!.less).toEqual({ price: 0, downTo: 0 })
  })

  it('stands in the unit of the row as written, however the row is scaled', async () => {
    const scaledBy = (factor: number): LinearProgram => ({
      columns: [column('x', 2), column('y', 3)],
      rows: [
        {
          id: 'sum',
          lower: 10 * factor,
          upper: Infinity,
          entries: [
            [0, factor],
            [1, factor],
          ],
        },
        { id: 'room', lower: -Infinity, upper: 6, entries: [[0, 1]] },
      ],
    })
    for (const factor of [1e-7, 1e-3, 1, 1e6]) {
      const [sum] = await prices(scaledBy(factor), ['sum'])
      if (sum!.more === 'impossible') throw new Error('impossible')
      expect(sum!.more.price * factor).toBeCloseTo(3, 10)
      expect(sum!.more.upTo).toBe(Infinity)
    }
  })

  it('fixes whole-number columns at their amounts', async () => {
    const lp: LinearProgram = {
      columns: [{ ...column('bags', 7), integer: true }, column('loose', 0.4, 0, 13)],
      rows: [
        {
          id: 'need',
          lower: 63,
          upper: Infinity,
          entries: [
            [0, 20],
            [1, 1],
          ],
        },
      ],
    }
    const [need] = await prices(lp)
    // Three bags stay three: one more kg comes loose at 0.4, up to the 13 there are.
    expect(need).toMatchObject({ more: { price: 0.4, upTo: 73 }, less: { price: 0.4, downTo: 60 } })
  })
})

describe('the call', () => {
  it('answers only the rows asked for, in the order asked', async () => {
    const rows = ['calcium', 'total']
    expect((await prices(named('minerals-per-kg'), rows)).map(({ row }) => row)).toEqual(rows)
  })

  it('refuses a row that is not there', async () => {
    await expect(prices(named('two-prices'), ['d'])).rejects.toThrow('no row called d')
  })

  it('gives the same answers in a shared session', async () => {
    const lp = named('two-prices')
    const outcome = await optimum(lp)
    const session = openAnalysis(lp, outcome)
    try {
      const first = await marginalPrices(lp, outcome, { session })
      expect(await marginalPrices(lp, outcome, { session })).toEqual(first)
      expect(await marginalPrices(lp, outcome)).toEqual(first)
    } finally {
      session.dispose()
    }
  })

  it('works on an outcome that came through a worker', async () => {
    const lp = named('minerals-per-kg')
    const outcome = await optimum(lp)
    const copy = structuredClone(outcome)
    expect(await marginalPrices(lp, copy)).toEqual(await marginalPrices(lp, outcome))
  })

  it('works on an outcome of the other engine', async () => {
    const lp = named('minerals-per-kg')
    const other = await solveLinearProgram(lp, { engine: 'javascript-lp-solver' })
    if (other.status !== 'optimal') throw new Error(other.status)
    const [ours, theirs] = [await prices(lp), await marginalPrices(lp, other)]
    ours.forEach((price, k) => {
      const same = theirs[k]!
      if (price.more === 'impossible' || same.more === 'impossible') throw new Error(price.row)
      expect(same.more.price).toBeCloseTo(price.more.price, 9)
    })
  })

  it('stops when its time is up', async () => {
    const lp = named('two-prices')
    await expect(marginalPrices(lp, await optimum(lp), { deadlineMs: 0 })).rejects.toThrow(AnalysisStopped)
  })
})
