import { describe, expect, it } from 'vitest'
import { AnalysisStopped, costCurve, traceCurve } from '.'
import { solveLinearProgram, type LinearProgram } from '../lp'

const column = (id: string, cost: number, lower = 0, upper = Infinity) => ({ id, cost, lower, upper })

/** Energy from barley, oats or hay, with room for 0.6 of barley and 0.5 of oats. */
const mix: LinearProgram = {
  columns: [column('barley', 2), column('oats', 2.5), column('hay', 4)],
  rows: [
    {
      id: 'energy',
      lower: 10,
      upper: Infinity,
      entries: [
        [0, 10],
        [1, 10],
        [2, 10],
      ],
    },
    { id: 'barley', lower: -Infinity, upper: 0.6, entries: [[0, 1]] },
    { id: 'oats', lower: -Infinity, upper: 0.5, entries: [[1, 1]] },
    {
      id: 'stomach',
      lower: -Infinity,
      upper: 2,
      entries: [
        [0, 1],
        [1, 1],
        [2, 1],
      ],
    },
  ],
}
const corners = (points: { at: number; objective: number }[]) =>
  points.map(({ at, objective }) => [at, objective])
const near = (pairs: [number, number][]) => pairs.map((pair) => pair.map((value) => expect.closeTo(value, 9)))

describe('the curve along a cost', () => {
  it('has its corners where the mix changes, and no others', async () => {
    const curve = await costCurve(mix, { along: { kind: 'cost', column: 'barley' }, from: 0, to: 6 })
    // 0.6 of barley up to the cost of oats, then 0.5 up to that of hay, then none.
    expect(corners(curve.points)).toEqual(
      near([
        [0, 1],
        [2.5, 2.5],
        [4, 3.25],
        [6, 3.25],
      ]),
    )
    expect(curve).toMatchObject({ complete: true, feasible: { from: 0, to: 6 } })
  })

  it('shows how much is used at each corner', async () => {
    const { points } = await costCurve(mix, { along: { kind: 'cost', column: 'barley' }, from: 1, to: 2 })
    expect(points.map(({ amounts }) => amounts[0])).toEqual([
      expect.closeTo(0.6, 12),
      expect.closeTo(0.6, 12),
    ])
  })
})

describe('the curve along a limit', () => {
  const along = { kind: 'limit', row: 'energy', side: 'lower' } as const

  it('bends at every change of feed and ends where no mix is left', async () => {
    const curve = await costCurve(mix, { along, from: 0, to: 30 })
    expect(corners(curve.points)).toEqual(
      near([
        [0, 0],
        [6, 1.2],
        [11, 2.45],
        [20, 6.05],
      ]),
    )
    expect(curve.feasible).toEqual({ from: 0, to: expect.closeTo(20, 9) })
  })

  it('keeps a corner that falls on a point already evaluated', async () => {
    const { points } = await costCurve(mix, { along, from: 6, to: 11 })
    expect(corners(points)).toEqual(
      near([
        [6, 1.2],
        [11, 2.45],
      ]),
    )
    const straddling = await costCurve(mix, { along, from: 1, to: 11 })
    expect(corners(straddling.points)).toEqual(
      near([
        [1, 0.2],
        [6, 1.2],
        [11, 2.45],
      ]),
    )
  })

  it('says where there is nothing to draw', async () => {
    expect(await costCurve(mix, { along, from: 21, to: 30 })).toEqual({
      points: [],
      feasible: null,
      complete: true,
    })
  })

  it('runs along an upper limit', async () => {
    const curve = await costCurve(mix, {
      along: { kind: 'limit', row: 'barley', side: 'upper' },
      from: -1,
      to: 2,
    })
    expect(corners(curve.points)).toEqual(
      near([
        [0, 3.25],
        [0.5, 2.25],
        [1, 2],
        [2, 2],
      ]),
    )
    expect(curve.feasible).toEqual({ from: 0, to: 2 })
  })

  it('says when corners are missing', async () => {
    const curve = await costCurve(mix, { along, from: 0, to: 20, maxPoints: 3 })
    expect(curve.complete).toBe(false)
    expect(curve.points.length).toBeLessThanOrEqual(3)
  })

  it('refuses whole numbers, a range turned round and unknown rows', async () => {
    const whole = { ...mix, columns: mix.columns.map((c) => ({ ...c, integer: true })) }
    await expect(costCurve(whole, { along, from: 0, to: 1 })).rejects.toThrow('trace it instead')
    await expect(costCurve(mix, { along, from: 1, to: 0 })).rejects.toThrow('smaller to the larger')
    await expect(costCurve(mix, { along: { ...along, row: 'fibre' }, from: 0, to: 1 })).rejects.toThrow(
      'no row called fibre',
    )
  })

  it('stops when its time is up', async () => {
    await expect(costCurve(mix, { along, from: 0, to: 20, deadlineMs: 0 })).rejects.toThrow(AnalysisStopped)
  })
})

describe('a traced curve', () => {
  /** A limit that is a coefficient: hay at least as a share of the whole. */
  const family = (share: number): LinearProgram => ({
    columns: mix.columns,
    rows: [
      ...mix.rows,
      {
        id: 'hay share',
        lower: 0,
        upper: Infinity,
        entries: [
          [0, -share],
          [1, -share],
          [2, 1 - share],
        ],
      },
    ],
  })

  it('samples both ends and what lies between, and says that it is sampled', async () => {
    const curve = await traceCurve(family, { from: 0, to: 1, samples: 5 })
    expect(curve.sampled).toBe(true)
    expect(curve.points.map(({ at }) => at)).toEqual([0, 0.25, 0.5, 0.75, 1])
    for (const { at, objective } of curve.points) {
      const outcome = await solveLinearProgram(family(at))
      expect(outcome).toMatchObject({ status: 'optimal', objective })
    }
  })

  it('says where a sample has no answer', async () => {
    const { points } = await traceCurve(
      (at) => ({ ...mix, rows: [{ ...mix.rows[0]!, lower: at }, ...mix.rows.slice(1)] }),
      {
        from: 10,
        to: 30,
        samples: 3,
      },
    )
    expect(points.map(({ status }) => status)).toEqual(['optimal', 'optimal', 'infeasible'])
    expect(points[2]).toEqual({ at: 30, objective: null, amounts: [], status: 'infeasible' })
  })

  it('stops when its time is up', async () => {
    await expect(traceCurve(family, { from: 0, to: 1, samples: 3, deadlineMs: 0 })).rejects.toThrow(
      'Only 0 of 3',
    )
  })
})
