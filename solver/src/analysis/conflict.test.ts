import { describe, expect, it } from 'vitest'
import { findConflict, smallestLoosening } from '.'
import { solveLinearProgram, type LinearProgram, type LinearRow } from '../lp'
import { instances } from '../lp/instances'

const column = (id: string, cost: number, lower = 0, upper = Infinity) => ({ id, cost, lower, upper })
const least = (id: string, lower: number, entries: [number, number][]): LinearRow => ({
  id,
  lower,
  upper: Infinity,
  entries,
})
const most = (id: string, upper: number, entries: [number, number][]): LinearRow => ({
  id,
  lower: -Infinity,
  upper,
  entries,
})

/** Hay and soya, 100 in all; protein and fibre limits that only together are too much. */
const mix: LinearProgram = {
  columns: [column('hay', 1), column('soya', 4)],
  rows: [
    {
      id: 'total',
      lower: 100,
      upper: 100,
      entries: [
        [0, 1],
        [1, 1],
      ],
    },
    least('protein', 30, [
      [0, 0.1],
      [1, 0.5],
    ]),
    least('fibre', 25, [
      [0, 0.35],
      [1, 0.05],
    ]),
    most('soya', 80, [[1, 1]]),
    least('energy', 500, [
      [0, 8],
      [1, 13],
    ]),
  ],
}

describe('a conflict', () => {
  it('names the limits that cannot hold together and no other', async () => {
    const conflict = await findConflict(mix, { keep: ['total'] })
    expect(conflict).toEqual({
      members: [
        { row: 'protein', side: 'lower' },
        { row: 'fibre', side: 'lower' },
      ],
      found: true,
      keptAloneInfeasible: false,
    })
    for (const { row } of conflict.members) {
      const rest = await solveLinearProgram({ ...mix, rows: mix.rows.filter(({ id }) => id !== row) })
      expect(rest.status).toBe('optimal')
    }
  })

  it('says that there is none where the program can be met', async () => {
    const lp = { ...mix, rows: mix.rows.filter(({ id }) => id !== 'fibre') }
    expect(await findConflict(lp)).toEqual({ members: [], found: false, keptAloneInfeasible: false })
  })

  it('says so where the kept rows and the bounds alone cannot be met', async () => {
    const lp = instances.find(({ name }) => name === 'bounds-against-row')!.lp
    expect(await findConflict(lp, { keep: ['need'] })).toEqual({
      members: [],
      found: true,
      keptAloneInfeasible: true,
    })
    expect((await findConflict(lp)).members).toEqual([{ row: 'need', side: 'lower' }])
  })

  it('blames an equality as a whole, and the side of a window that is at fault', async () => {
    const lp: LinearProgram = {
      columns: [column('x', 1)],
      rows: [
        { id: 'exactly', lower: 5, upper: 5, entries: [[0, 1]] },
        { id: 'window', lower: 1, upper: 4, entries: [[0, 1]] },
      ],
    }
    expect((await findConflict(lp)).members).toEqual([
      { row: 'exactly', side: 'equal' },
      { row: 'window', side: 'upper' },
    ])
  })

  it('finds what only whole numbers make impossible', async () => {
    const lp: LinearProgram = {
      columns: [{ ...column('bags', 1, 0, 10), integer: true }],
      rows: [least('need', 1.2, [[0, 1]]), most('room', 1.8, [[0, 1]]), most('purse', 9, [[0, 1]])],
    }
    expect((await findConflict(lp)).members).toEqual([
      { row: 'need', side: 'lower' },
      { row: 'room', side: 'upper' },
    ])
  })

  it('refuses a row that is not there', async () => {
    await expect(findConflict(mix, { keep: ['weight'] })).rejects.toThrow('no row called weight')
  })
})

describe('the smallest loosening', () => {
  const all = [
    { row: 'protein', side: 'lower' as const },
    { row: 'fibre', side: 'lower' as const },
    { row: 'soya', side: 'upper' as const },
    { row: 'energy', side: 'lower' as const },
  ]
  const loosen = (
    lp: LinearProgram,
    moves: { row: string; side: string; newLimit: number }[],
  ): LinearProgram => ({
    columns: lp.columns,
    rows: lp.rows.map((row) =>
      moves
        .filter((move) => move.row === row.id)
        .reduce((r, move) => ({ ...r, [move.side === 'upper' ? 'upper' : 'lower']: move.newLimit }), row),
    ),
  })

  it('is the least in shares of the limits, and works when applied', async () => {
    // With s of soya, protein is 10 + 0.4 s and fibre 35 − 0.3 s. Protein 30 asks s = 50, where fibre is 20: short by a
    // fifth. Fibre 25 asks s = 33⅓, where protein is 23⅓: short by two ninths. The former is less.
    const loosening = await smallestLoosening(mix, { rows: all })
    expect(loosening.possible).toBe(true)
    expect(loosening.moves).toEqual([
      { row: 'fibre', side: 'lower', limit: 25, by: expect.closeTo(5, 9), newLimit: expect.closeTo(20, 6) },
    ])
    expect(loosening.total).toBeCloseTo(0.2, 9)
    expect(loosening.amounts[1]).toBeCloseTo(50, 4)
    expect(loosening.objective).toBeCloseTo(250, 3)
    expect((await solveLinearProgram(loosen(mix, loosening.moves))).status).toBe('optimal')
  })

  it('follows the weights', async () => {
    const weighted = all.map((side) => ({ ...side, weight: side.row === 'fibre' ? 100 : 1 }))
    const { moves } = await smallestLoosening(mix, { rows: weighted })
    expect(moves.map(({ row }) => row)).toEqual(['protein'])
    expect(moves[0]!.by).toBeCloseTo(20 / 3, 9)
  })

  it('leaves alone what it may not touch, and says when that cannot be', async () => {
    const loosening = await smallestLoosening(mix, { rows: [{ row: 'soya', side: 'upper' }] })
    expect(loosening).toEqual({ possible: false, moves: [], total: 0, amounts: [], objective: null })
  })

  it('moves nothing where the program can be met', async () => {
    const lp = { ...mix, rows: mix.rows.filter(({ id }) => id !== 'fibre') }
    const loosening = await smallestLoosening(lp, { rows: [{ row: 'protein', side: 'lower' }] })
    expect(loosening).toMatchObject({ possible: true, moves: [], total: 0, objective: 250 })
  })

  it('lets an equality give way in either direction', async () => {
    const lp: LinearProgram = {
      columns: [column('x', 1, 0, 4)],
      rows: [{ id: 'exactly', lower: 5, upper: 5, entries: [[0, 1]] }],
    }
    const { moves } = await smallestLoosening(lp, { rows: [{ row: 'exactly', side: 'equal' }] })
    expect(moves).toEqual([
      { row: 'exactly', side: 'equal', limit: 5, by: expect.closeTo(1, 9), newLimit: expect.closeTo(4, 6) },
    ])
  })

  it('refuses a side that has no limit', async () => {
    await expect(smallestLoosening(mix, { rows: [{ row: 'protein', side: 'upper' }] })).rejects.toThrow(
      'Row protein has no upper limit to loosen.',
    )
  })
})
