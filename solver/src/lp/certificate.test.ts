import { beforeAll, describe, expect, it } from 'vitest'
import { checkOutcome, solveLinearProgram } from '.'
import { instances } from './instances'
import type { InfeasibleOutcome, LinearProgram, OptimalOutcome, UnboundedOutcome } from './types'

/** Three feeds, a total, a floor, a cap, a window; every kind of limit is either binding or slack. */
const lp: LinearProgram = {
  columns: [
    { id: 'hay', cost: 0.12, lower: 0, upper: Infinity },
    { id: 'barley', cost: 0.21, lower: 0, upper: 400 },
    { id: 'soya', cost: 0.45, lower: 0, upper: Infinity },
    { id: 'molasses', cost: 0.3, lower: 20, upper: 50 },
  ],
  rows: [
    { id: 'total', lower: 1000, upper: 1000, entries: [0, 1, 2, 3].map((j): [number, number] => [j, 1]) },
    {
      id: 'protein',
      lower: 140_000,
      upper: Infinity,
      entries: [
        [0, 110],
        [1, 118],
        [2, 490],
        [3, 60],
      ],
    },
    {
      id: 'energy',
      lower: 10_300,
      upper: 11_500,
      entries: [
        [0, 8.8],
        [1, 12.9],
        [2, 13.3],
        [3, 11.8],
      ],
    },
    {
      id: 'fibre',
      lower: -Infinity,
      upper: 300_000,
      entries: [
        [0, 320],
        [1, 50],
        [2, 70],
      ],
    },
  ],
}

describe('the certificate of an optimum', () => {
  let honest: OptimalOutcome
  beforeAll(async () => {
    const outcome = await solveLinearProgram(lp)
    if (outcome.status !== 'optimal') throw new Error(outcome.status)
    honest = outcome
  })
  const corrupted = (change: (outcome: OptimalOutcome) => void) => {
    const outcome = structuredClone(honest)
    change(outcome)
    return checkOutcome(lp, outcome)
  }
  /** The smallest corruption that must be caught: ten times the tolerance. */
  const BIT = 1 + 1e-6
  const used = () => honest.columns.findIndex((column) => column.basis === 'basic')
  const binding = () => honest.rows.findIndex((row, i) => row.dual > 0 && lp.rows[i]!.upper === Infinity)

  it('accepts the true answer with room to spare', () => {
    const certificate = checkOutcome(lp, honest)
    expect(certificate.failures).toEqual([])
    for (const value of [certificate.rowViolation, certificate.gap, certificate.dualViolation])
      expect(value).toBeLessThan(1e-12)
  })

  it.each<{ name: string; change: (outcome: OptimalOutcome) => void; caught: string }>([
    {
      name: 'an amount a millionth too large',
      change: (o) => (o.columns[used()]!.value *= BIT),
      caught: 'rowViolation',
    },
    {
      name: 'an amount below its lower bound',
      change: (o) => (o.columns[3]!.value = 19.9999),
      caught: 'boundViolation',
    },
    {
      name: 'an amount above its upper bound',
      change: (o) => (o.columns[1]!.value = 400.01),
      caught: 'boundViolation',
    },
    { name: 'a negative amount', change: (o) => (o.columns[0]!.value = -1e-3), caught: 'boundViolation' },
    {
      name: 'an objective that is not the cost of the mix',
      change: (o) => (o.objective *= BIT),
      caught: 'consistency',
    },
    {
      name: 'an activity that is not that of the mix',
      change: (o) => (o.rows[1]!.activity *= BIT),
      caught: 'consistency',
    },
    {
      name: 'a reduced cost that does not follow from the prices',
      change: (o) => (o.columns[3]!.reducedCost += 1e-4),
      caught: 'consistency',
    },
    {
      name: 'a price with the wrong sign',
      change: (o) => (o.rows[binding()]!.dual *= -1),
      caught: 'dualViolation',
    },
    {
      name: 'a price on a cap that is not met',
      change: (o) => (o.rows[3]!.dual = -1e-6),
      caught: 'complementarity',
    },
    {
      name: 'a price a millionth too high',
      change: (o) => (o.rows[binding()]!.dual *= BIT),
      caught: 'consistency',
    },
    {
      name: 'all prices scaled',
      change: (o) => o.rows.forEach((row) => (row.dual *= 1.01)),
      caught: 'consistency',
    },
    { name: 'no prices', change: (o) => o.rows.forEach((row) => (row.dual = 0)), caught: 'consistency' },
    { name: 'NaN for an amount', change: (o) => (o.columns[0]!.value = NaN), caught: 'incomplete' },
    { name: 'an infinite price', change: (o) => (o.rows[0]!.dual = Infinity), caught: 'incomplete' },
    { name: 'a missing column', change: (o) => o.columns.pop(), caught: 'incomplete' },
    { name: 'a missing row', change: (o) => o.rows.pop(), caught: 'incomplete' },
  ])('rejects $name', ({ change, caught }) => {
    const certificate = corrupted(change)
    expect(certificate.valid).toBe(false)
    expect(certificate.failures).toContain(caught)
  })

  it('rejects a mix that meets every limit but is not the cheapest', async () => {
    const dearer = { ...lp, columns: lp.columns.map((column) => ({ ...column, cost: -column.cost })) }
    const worst = await solveLinearProgram(dearer)
    if (worst.status !== 'optimal') throw new Error(worst.status)
    const posing: OptimalOutcome = {
      ...honest,
      objective: -worst.objective,
      columns: worst.columns.map((column, j) => ({ ...column, reducedCost: honest.columns[j]!.reducedCost })),
      rows: worst.rows.map((row, i) => ({ ...row, dual: honest.rows[i]!.dual })),
    }
    const certificate = checkOutcome(lp, posing)
    expect(certificate.rowViolation).toBeLessThan(1e-9)
    expect(certificate.failures).toContain('gap')
  })

  it('rejects prices under which a feed would earn without end, though all numbers follow from one another', () => {
    const certificate = corrupted((outcome) => {
      outcome.rows[binding()]!.dual *= 1.5
      outcome.columns.forEach((column, j) => {
        column.reducedCost = lp.rows.reduce(
          (rest, { entries }, i) =>
            rest - outcome.rows[i]!.dual * (entries.find(([other]) => other === j)?.[1] ?? 0),
          lp.columns[j]!.cost,
        )
      })
    })
    expect(certificate.consistency).toBeLessThan(1e-12)
    expect(certificate.failures).toContain('dualViolation')
  })

  it('rejects an amount off its bound though its reduced cost is not zero', () => {
    const capped: LinearProgram = {
      columns: [
        { id: 'cheap', cost: 1, lower: 0, upper: 6 },
        { id: 'dear', cost: 2, lower: 0, upper: Infinity },
      ],
      rows: [
        {
          id: 'total',
          lower: 10,
          upper: 10,
          entries: [
            [0, 1],
            [1, 1],
          ],
        },
      ],
    }
    const answerWith = (cheap: number): OptimalOutcome => ({
      ...honest,
      objective: cheap + 2 * (10 - cheap),
      columns: [
        { value: cheap, reducedCost: -1, basis: 'upper' },
        { value: 10 - cheap, reducedCost: 0, basis: 'basic' },
      ],
      rows: [{ activity: 10, dual: 2, basis: 'lower' }],
    })
    expect(checkOutcome(capped, answerWith(6)).failures).toEqual([])
    expect(checkOutcome(capped, answerWith(5)).failures).toEqual(['complementarity', 'gap'])
  })

  it('measures a row against its own terms: a trace mineral of a millionth may not be short by a tenth', () => {
    const trace: LinearProgram = {
      columns: [{ id: 'premix', cost: 1, lower: 0, upper: Infinity }],
      rows: [{ id: 'selenium', lower: 1e-9, upper: Infinity, entries: [[0, 1e-9]] }],
    }
    const certificate = checkOutcome(trace, {
      ...honest,
      objective: 0.9,
      columns: [{ value: 0.9, reducedCost: 0, basis: 'basic' }],
      rows: [{ activity: 0.9e-9, dual: 1e9, basis: 'lower' }],
    })
    expect(certificate.failures).toContain('rowViolation')
    expect(certificate.rowViolation).toBeCloseTo(0.1 / 1.9, 9)
  })

  it('rejects an answer to another program', () => {
    const changed = {
      ...lp,
      columns: lp.columns.map((c) => (c.id === 'hay' ? { ...c, cost: c.cost * 1.001 } : c)),
    }
    expect(checkOutcome(changed, honest).valid).toBe(false)
  })

  it('rejects a fraction where whole numbers are asked', () => {
    const whole = { ...lp, columns: lp.columns.map((column) => ({ ...column, integer: true })) }
    expect(checkOutcome(whole, honest).failures).toContain('integrality')
  })
})

describe('the certificate of an impossible program', () => {
  const { lp: program } = instances.find(({ name }) => name === 'sodium-cap')!
  let honest: InfeasibleOutcome
  beforeAll(async () => {
    const outcome = await solveLinearProgram(program)
    if (outcome.status !== 'infeasible') throw new Error(outcome.status)
    honest = outcome
  })
  const corrupted = (change: (ray: number[]) => number[]) =>
    checkOutcome(program, { ...honest, ray: change([...honest.ray]) })

  it('accepts the proof', () => {
    expect(checkOutcome(program, honest)).toMatchObject({ valid: true, failures: [] })
    expect(checkOutcome(program, honest).proof).toBeGreaterThan(1e-6)
  })

  it.each<{ name: string; change: (ray: number[]) => number[]; caught: string }>([
    { name: 'no ray at all', change: (ray) => ray.map(() => 0), caught: 'proof' },
    { name: 'the ray turned round', change: (ray) => ray.map((y) => -y), caught: 'absentLimit' },
    {
      name: 'a ray that leans on an absent limit',
      change: (ray) => ray.map((y, i) => (i === 1 ? 1 : y)),
      caught: 'absentLimit',
    },
    { name: 'a ray that is too short', change: (ray) => ray.slice(1), caught: 'incomplete' },
    { name: 'NaN in the ray', change: (ray) => ray.map((y, i) => (i === 0 ? NaN : y)), caught: 'incomplete' },
    {
      name: 'only one limit of the ray',
      change: (ray) => {
        const k = ray.findIndex((y) => y !== 0)
        return ray.map((y, i) => (i === k ? y : 0))
      },
      caught: 'proof',
    },
  ])('rejects $name', ({ change, caught }) => {
    const certificate = corrupted(change)
    expect(certificate.valid).toBe(false)
    expect(certificate.failures).toContain(caught)
  })

  it('rejects the proof once the sodium limit is the one that can be met', () => {
    const feasible: LinearProgram = {
      ...program,
      rows: program.rows.map((row) => (row.id === 'NA_max' ? { ...row, upper: 50_000 } : row)),
    }
    expect(checkOutcome(feasible, honest).valid).toBe(false)
  })

  it('counts what a column must bring at least, and rejects the proof where that is less', () => {
    const atLeast = (lower: number): LinearProgram => ({
      columns: [{ id: 'hay', cost: 1, lower, upper: Infinity }],
      rows: [{ id: 'most', lower: -Infinity, upper: 5, entries: [[0, 1]] }],
    })
    expect(checkOutcome(atLeast(6), { ...honest, ray: [-1] })).toMatchObject({ valid: true, proof: 1 / 11 })
    expect(checkOutcome(atLeast(4), { ...honest, ray: [-1] }).failures).toEqual(['proof'])
  })

  it('rejects a ray that needs a column without an upper bound', () => {
    const uncapped = {
      ...program,
      columns: program.columns.map((column) => ({ ...column, upper: Infinity })),
    }
    expect(
      checkOutcome(uncapped, { ...honest, ray: program.rows.map((row) => (row.lower > 0 ? 1 : 0)) }).failures,
    ).toEqual(['unlimitedColumn'])
  })
})

describe('the certificate of an unbounded program', () => {
  const { lp: program } = instances.find(({ name }) => name === 'unbounded')!
  let honest: UnboundedOutcome
  beforeAll(async () => {
    const outcome = await solveLinearProgram(program)
    if (outcome.status !== 'unbounded') throw new Error(outcome.status)
    honest = outcome
  })

  it('accepts a mix and a direction', () => {
    expect(checkOutcome(program, honest)).toMatchObject({ valid: true, failures: [] })
  })

  it.each<{ name: string; change: Partial<UnboundedOutcome>; caught: string }>([
    { name: 'a starting mix that breaks a limit', change: { point: [5, 0] }, caught: 'rowViolation' },
    { name: 'a negative starting amount', change: { point: [0, -1] }, caught: 'boundViolation' },
    { name: 'a direction that breaks a limit', change: { direction: [1, 0] }, caught: 'consistency' },
    { name: 'a direction into a bound', change: { direction: [-1, -1] }, caught: 'consistency' },
    { name: 'a direction that costs', change: { direction: [0, 1] }, caught: 'descent' },
    { name: 'no direction', change: { direction: [0, 0] }, caught: 'descent' },
    { name: 'half a direction', change: { direction: [1] }, caught: 'incomplete' },
  ])('rejects $name', ({ change, caught }) => {
    const certificate = checkOutcome(program, { ...honest, ...change })
    expect(certificate.valid).toBe(false)
    expect(certificate.failures).toContain(caught)
  })
})

it('finds nothing to certify in a stopped or an invalid outcome', () => {
  expect(checkOutcome(lp, { status: 'invalid', problems: [] }).failures).toEqual(['claimsNothing'])
  expect(
    checkOutcome(lp, { status: 'stopped', reason: 'deadline', detail: '', engine: 'highs', milliseconds: 0 })
      .valid,
  ).toBe(false)
})
