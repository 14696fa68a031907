import { describe, expect, it } from 'vitest'
import { findProblems, solveLinearProgram } from '.'
import type { LinearProgram } from './types'

const sound = (): LinearProgram => ({
  columns: [
    { id: 'x', cost: 1, lower: 0, upper: Infinity },
    { id: 'y', cost: 2, lower: -Infinity, upper: 5 },
  ],
  rows: [
    {
      id: 'r',
      lower: 1,
      upper: Infinity,
      entries: [
        [0, 1],
        [1, 1],
      ],
    },
    { id: 's', lower: -Infinity, upper: 4, entries: [[0, 2]] },
  ],
})

describe('a program as given', () => {
  it('is sound with infinite bounds on their own sides', () => {
    expect(findProblems(sound())).toEqual([])
  })

  it.each<{ name: string; spoil: (lp: LinearProgram) => void; code: string; id: string; field: string }>([
    {
      name: 'a cost that is NaN',
      spoil: (lp) => (lp.columns[1]!.cost = NaN),
      code: 'notANumber',
      id: 'y',
      field: 'cost',
    },
    {
      name: 'an infinite cost',
      spoil: (lp) => (lp.columns[0]!.cost = Infinity),
      code: 'infiniteCost',
      id: 'x',
      field: 'cost',
    },
    {
      name: 'a bound that is NaN',
      spoil: (lp) => (lp.columns[0]!.upper = NaN),
      code: 'notANumber',
      id: 'x',
      field: 'upper',
    },
    {
      name: 'a limit that is NaN',
      spoil: (lp) => (lp.rows[0]!.lower = NaN),
      code: 'notANumber',
      id: 'r',
      field: 'lower',
    },
    {
      name: 'a lower bound above the upper',
      spoil: (lp) => (lp.columns[1]!.lower = 6),
      code: 'crossedBounds',
      id: 'y',
      field: 'lower',
    },
    {
      name: 'a least amount above the most',
      spoil: (lp) => (lp.rows[1]!.lower = 4.5),
      code: 'crossedBounds',
      id: 's',
      field: 'lower',
    },
    {
      name: 'a lower limit of +Infinity',
      spoil: (lp) => (lp.rows[0]!.lower = Infinity),
      code: 'wrongInfinity',
      id: 'r',
      field: 'lower',
    },
    {
      name: 'an upper bound of -Infinity',
      spoil: (lp) => (lp.columns[1]!.upper = -Infinity),
      code: 'wrongInfinity',
      id: 'y',
      field: 'upper',
    },
    {
      name: 'two columns of one name',
      spoil: (lp) => (lp.columns[1]!.id = 'x'),
      code: 'duplicateId',
      id: 'x',
      field: 'id',
    },
    {
      name: 'two rows of one name',
      spoil: (lp) => (lp.rows[1]!.id = 'r'),
      code: 'duplicateId',
      id: 'r',
      field: 'id',
    },
    {
      name: 'a coefficient that is NaN',
      spoil: (lp) => (lp.rows[0]!.entries[1]![1] = NaN),
      code: 'notANumber',
      id: 'r',
      field: 'entries',
    },
    {
      name: 'an infinite coefficient',
      spoil: (lp) => (lp.rows[0]!.entries[1]![1] = -Infinity),
      code: 'infiniteCoefficient',
      id: 'r',
      field: 'entries',
    },
    {
      name: 'a column that is not there',
      spoil: (lp) => (lp.rows[0]!.entries[1]![0] = 2),
      code: 'unknownColumn',
      id: 'r',
      field: 'entries',
    },
    {
      name: 'a column position that is negative',
      spoil: (lp) => (lp.rows[0]!.entries[1]![0] = -1),
      code: 'unknownColumn',
      id: 'r',
      field: 'entries',
    },
    {
      name: 'a column position that is a fraction',
      spoil: (lp) => (lp.rows[0]!.entries[1]![0] = 0.5),
      code: 'unknownColumn',
      id: 'r',
      field: 'entries',
    },
    {
      name: 'a column named twice in a row',
      spoil: (lp) => (lp.rows[0]!.entries[1]![0] = 0),
      code: 'repeatedColumn',
      id: 'r',
      field: 'entries',
    },
  ])('is refused for $name', async ({ spoil, code, id, field }) => {
    const lp = sound()
    spoil(lp)
    const outcome = await solveLinearProgram(lp)
    if (outcome.status !== 'invalid') throw new Error(outcome.status)
    expect(outcome.problems).toHaveLength(1)
    expect(outcome.problems[0]).toMatchObject({ code, where: { id, field } })
    expect(outcome.problems[0]!.message).toContain(id)
  })

  it('lists everything that is wrong, not only the first', () => {
    const lp = sound()
    lp.columns[0]!.cost = NaN
    lp.rows[0]!.entries = [
      [7, NaN],
      [0, Infinity],
    ]
    lp.rows[1]!.upper = -Infinity
    expect(findProblems(lp).map(({ code }) => code)).toEqual([
      'notANumber',
      'unknownColumn',
      'infiniteCoefficient',
      'wrongInfinity',
    ])
  })
})
