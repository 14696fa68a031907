import loadRealHighs, { type Highs, type InitOptions, type Model } from 'highs'
import { afterEach, describe, expect, it } from 'vitest'
import { configureHighs, releaseHighs, secondOpinion, solveLinearProgram } from '.'
import { instances } from './instances'
import type { LinearProgram, Outcome } from './types'

const named = (name: string): LinearProgram => instances.find((instance) => instance.name === name)!.lp

/** A HiGHS whose models are changed before use: what happens when the engine lies or dies. */
function tamperedHighs(change: (model: Model) => Partial<Model>) {
  return async (options: InitOptions): Promise<Highs> => {
    const highs = await loadRealHighs(options)
    return new Proxy(highs, {
      get(target, property, receiver) {
        if (property !== 'createModel') return Reflect.get(target, property, receiver)
        return () => {
          const model = target.createModel()
          const changed = change(model)
          return new Proxy(model, {
            get: (inner, key) => {
              const source = key in changed ? changed : inner
              const value: unknown = Reflect.get(source, key, source)
              return typeof value === 'function' ? value.bind(source) : value
            },
          })
        }
      },
    })
  }
}

afterEach(() => {
  releaseHighs()
  configureHighs({})
})

const mix = named('minerals-per-kg')
const leastCost = instances.find(({ name }) => name === 'minerals-per-kg')!.expect.objective!

function expectLeastCost(outcome: Outcome, engine: string): void {
  if (outcome.status !== 'optimal') throw new Error(outcome.status)
  expect(outcome.engine).toBe(engine)
  expect(outcome.objective).toBeCloseTo(leastCost, 12)
  expect(outcome.certificate.valid).toBe(true)
}

describe('when an engine fails', () => {
  it('answers with the other engine where HiGHS cannot be loaded, and says why', async () => {
    configureHighs({ load: () => Promise.reject(new Error('no wasm here')) })
    const outcome = await solveLinearProgram(mix)
    expectLeastCost(outcome, 'javascript-lp-solver')
    expect(outcome).toMatchObject({ rejected: [{ engine: 'highs', reason: 'Error: no wasm here' }] })
  })

  it('tries to load again at the next call', async () => {
    let calls = 0
    configureHighs({
      load: (options) => (++calls === 1 ? Promise.reject(new Error('offline')) : loadRealHighs(options)),
    })
    expectLeastCost(await solveLinearProgram(mix), 'javascript-lp-solver')
    expectLeastCost(await solveLinearProgram(mix), 'highs')
  })

  it('never passes on an answer that fails its check', async () => {
    // A basis in which every column rests at its lower bound, with numbers to match: a lie in good order.
    configureHighs({
      load: tamperedHighs((model) => ({
        getBasis: () => {
          const basis = model.getBasis()
          return { colStatus: basis.colStatus.map(() => 0), rowStatus: basis.rowStatus.map(() => 1) }
        },
        getSolution: () => {
          const solution = model.getSolution()
          return { ...solution, colValue: solution.colValue.map((value) => value * 0.99) }
        },
      })),
    })
    const outcome = await solveLinearProgram(mix)
    expectLeastCost(outcome, 'javascript-lp-solver')
    expect(outcome).toMatchObject({ rejected: [{ engine: 'highs' }, { engine: 'highs' }] })
    const alone = await solveLinearProgram(mix, { engine: 'highs' })
    expect(alone).toMatchObject({ status: 'stopped', reason: 'numerical' })
  })

  it('does not believe an unproved "infeasible"', async () => {
    configureHighs({
      load: tamperedHighs((model) => ({
        run: () => ({ ...model.run(), modelStatus: 8 as const }),
        getDualRay: () => undefined,
      })),
    })
    expectLeastCost(await solveLinearProgram(mix), 'javascript-lp-solver')
  })

  it('survives a runtime that dies with a very long message', async () => {
    let dead = true
    configureHighs({
      load: tamperedHighs((model) => ({
        run: () => {
          if (dead) throw new Error(`abort ${'x'.repeat(200_000)}`)
          return model.run()
        },
      })),
    })
    const outcome = await solveLinearProgram(mix)
    expectLeastCost(outcome, 'javascript-lp-solver')
    if (outcome.status !== 'optimal') throw new Error(outcome.status)
    for (const { reason } of outcome.rejected!) expect(reason.length).toBeLessThan(200)
    dead = false
    expectLeastCost(await solveLinearProgram(mix), 'highs')
  })

  it('cures a warm run that the runtime refuses by starting cold', async () => {
    let refusals = 1
    configureHighs({
      load: tamperedHighs((model) => ({
        run: () => {
          if (refusals-- > 0) throw new Error('run failed with HiGHS status -1')
          return model.run()
        },
      })),
    })
    const outcome = await solveLinearProgram(mix)
    expectLeastCost(outcome, 'highs')
    expect(outcome).not.toHaveProperty('rejected')
  })
})

describe('the deadline', () => {
  it.each(['auto', 'highs', 'javascript-lp-solver'] as const)(
    'stops engine %s when no time is left',
    async (engine) => {
      const outcome = await solveLinearProgram(mix, { engine, deadlineMs: 0 })
      expect(outcome).toMatchObject({ status: 'stopped', reason: 'deadline' })
    },
  )

  it('ends a program that javascript-lp-solver would pivot on for ever, as stopped and not as infeasible', async () => {
    const outcome = await solveLinearProgram(named('endless-pivots'), { engine: 'javascript-lp-solver' })
    expect(outcome).toMatchObject({ status: 'stopped', reason: 'numerical' })
    expect(outcome).toMatchObject({ detail: expect.stringContaining('pivot budget') })
  })

  it('ends a search over whole numbers that would take for ever', async () => {
    // Market-split rows (Cornuéjols and Dawande 1998): tiny, and far beyond branch and bound in the time.
    let state = 1
    const next = () => (state = (state * 48_271) % 2_147_483_647) % 100
    const columns = Array.from({ length: 50 }, (_, j) => ({
      id: `x${j}`,
      cost: 0,
      lower: 0,
      upper: 1,
      integer: true,
    }))
    const rows = Array.from({ length: 6 }, (_, i) => {
      const entries = columns.map((_, j): [number, number] => [j, next()])
      const half = Math.floor(entries.reduce((sum, [, value]) => sum + value, 0) / 2)
      return { id: `r${i}`, lower: half, upper: half, entries }
    })
    const started = performance.now()
    const outcome = await solveLinearProgram({ columns, rows }, { deadlineMs: 300 })
    expect(performance.now() - started).toBeLessThan(3_000)
    expect(outcome).toMatchObject({ status: 'stopped', reason: 'deadline' })
  })
})

describe('whole-number columns', () => {
  const bags: LinearProgram = {
    columns: [
      { id: 'bags of barley', cost: 7, lower: 0, upper: Infinity, integer: true },
      { id: 'loose barley', cost: 0.4, lower: 0, upper: 13 },
    ],
    rows: [
      {
        id: 'need',
        lower: 60,
        upper: Infinity,
        entries: [
          [0, 20],
          [1, 1],
        ],
      },
    ],
  }

  it('are whole, and the prices are those with the whole numbers fixed', async () => {
    const outcome = await solveLinearProgram(bags)
    if (outcome.status !== 'optimal') throw new Error(outcome.status)
    expect(outcome.columns.map((column) => column.value)).toEqual([3, 0])
    expect(outcome.objective).toBeCloseTo(21, 9)
    expect(outcome.gap).toBeLessThanOrEqual(1e-6)
    expect(outcome.certificate).toMatchObject({ valid: true })
  })

  it('can make a program impossible that fractions could meet', async () => {
    const lp: LinearProgram = {
      columns: [{ id: 'x', cost: 1, lower: 0, upper: 10, integer: true }],
      rows: [{ id: 'between', lower: 1.2, upper: 1.8, entries: [[0, 1]] }],
    }
    const outcome = await solveLinearProgram(lp)
    expect(outcome).toMatchObject({
      status: 'infeasible',
      ray: [],
      certificate: { valid: true, bySearch: true },
    })
  })

  it('keep the proof where fractions could not meet it either', async () => {
    const lp: LinearProgram = {
      columns: [{ id: 'x', cost: 1, lower: 0, upper: 1, integer: true }],
      rows: [{ id: 'much', lower: 2, upper: Infinity, entries: [[0, 1]] }],
    }
    const outcome = await solveLinearProgram(lp)
    expect(outcome).toMatchObject({ status: 'infeasible', ray: [expect.any(Number)] })
    expect(outcome).toMatchObject({ certificate: { proof: expect.any(Number) } })
  })
})

describe('the second opinion', () => {
  it('agrees on a least cost', async () => {
    const opinion = await secondOpinion(mix, await solveLinearProgram(mix))
    expect(opinion).toMatchObject({ engine: 'javascript-lp-solver', agrees: true })
    expect(opinion.relativeDifference).toBeLessThan(1e-9)
  })

  it('disagrees with a cost that is wrong by two millionths', async () => {
    const outcome = await solveLinearProgram(mix)
    if (outcome.status !== 'optimal') throw new Error(outcome.status)
    const opinion = await secondOpinion(mix, { ...outcome, objective: outcome.objective * (1 + 2e-6) })
    expect(opinion.agrees).toBe(false)
    expect(opinion.note).toContain('another least cost')
  })

  it.each(['sodium-cap', 'unbounded'])('confirms the verdict on %s', async (name) => {
    const lp = named(name)
    expect(await secondOpinion(lp, await solveLinearProgram(lp))).toMatchObject({ agrees: true })
  })

  it('disagrees with a wrong verdict', async () => {
    const verdict = await solveLinearProgram(named('sodium-cap'))
    expect(await secondOpinion(mix, verdict)).toMatchObject({ agrees: false })
  })

  it('comes from HiGHS where the other engine answered', async () => {
    const outcome = await solveLinearProgram(mix, { engine: 'javascript-lp-solver' })
    expect(await secondOpinion(mix, outcome)).toMatchObject({ engine: 'highs', agrees: true })
  })

  it('says so where there is nothing to compare', async () => {
    const lp = named('endless-pivots')
    expect(await secondOpinion(lp, await solveLinearProgram(lp))).toMatchObject({ agrees: null })
    expect(await secondOpinion(lp, await solveLinearProgram(lp, { deadlineMs: 0 }))).toMatchObject({
      agrees: null,
    })
  })
})
