import type { Limit, LimitResult, Margin, OptimalAnswer } from '@maslin/shared'
import { describe, expect, it } from 'vitest'
import { feed, mix, type MixBuilder } from './testing/builders'
import { leastCost, mixed } from './testing/leastCost'
import { readingsOf } from './testing/plainReading'
import { randomMix } from './testing/randomMixes'

/**
 * Every margin against one-sided differences: the limit is moved, the program built and solved anew. The difference is
 * extrapolated from two steps, since along a limit that is a coefficient the cost bends. Seeds are fixed.
 */

const SEEDS = 45
const bases = ['batch', 'perHead', 'besideForage'] as const

/** Kinds of limits seen, so that the test cannot pass by never meeting one. */
const expectedKinds = [
  'nutrient perHeadDay', 'nutrient perKgDryMatter', 'nutrient perKgAsFed', 'ratio', 'feeds shareOfDryMatter', 'feeds shareAsFed',
  'feeds kgDryMatter', 'feeds kgAsFed', 'intake', 'rate',
] // prettier-ignore

const kindOf = (limit: Limit): string => ('measure' in limit ? `${limit.kind} ${limit.measure}` : limit.kind)

interface Move {
  builder: MixBuilder
  limit: Limit
  result: LimitResult
  direction: 1 | -1
}

/** Least cost with the binding side moved by `distance` in the direction; of a fixed amount both ends. */
function costAt({ builder, limit, result, direction }: Move, distance: number): Promise<number | undefined> {
  const side = result.bindingSide!
  const bound = limit[side]! + direction * distance
  return leastCost(
    builder.moved(limit.id, limit.min === limit.max ? { min: bound, max: bound } : { [side]: bound }),
  )
}

/** Change of the least cost per unit moved, at the start of the move. */
async function slopeOf(move: Move, start: number, step: number): Promise<number> {
  const far = await costAt(move, step)
  const near = await costAt(move, step / 2)
  if (far === undefined || near === undefined) throw new Error('A move said to be possible is not.')
  return 2 * ((near - start) / (step / 2)) - (far - start) / step
}

async function checkMargin(move: Move, margin: Margin, answer: OptimalAnswer): Promise<void> {
  const bound = move.limit[move.result.bindingSide!]!
  const size = Math.max(bound, 1e-2)
  if (margin.impossible) {
    const step = 1e-5 * size
    if (move.direction > 0 || bound > step) expect(await costAt(move, step)).toBeUndefined()
    return
  }
  if (bound === 0 && move.direction < 0) return
  const reach = margin.until === undefined ? Infinity : Math.abs(margin.until - bound)
  expect(reach).toBeGreaterThan(0)
  const step = Math.min(1e-4 * size, reach / 100)
  const slope = await slopeOf(move, answer.cost.least, step)
  const noise = (1e-13 * answer.cost.least) / step
  const allowed = 2e-5 * Math.abs(margin.perUnit!) + noise + (1e-7 * answer.cost.least) / size
  expect(Math.abs(slope - margin.perUnit!)).toBeLessThanOrEqual(allowed)
}

/** Which feeds are used and which limits bind, to tell whether the same mix is only shifted. */
function shapeOf(answer: OptimalAnswer): string {
  const feeds = answer.blend.map((part) => part.feedId).sort()
  const limits = answer.limits.filter((limit) => limit.bindingSide).map((limit) => limit.limitId)
  return [...feeds, ...limits.sort()].join(' ')
}

describe.each(bases)('what a limit costs, basis %s', (basis) => {
  const randomMixes = Array.from({ length: SEEDS * 2 }, (_, i) => ({
    seed: i + 1,
    builder: randomMix(i + 1, { basis, round: i % 2 === 0, unknown: i % 3 === 0 ? 0.15 : 0 }),
  }))

  it(`agrees with the limit moved either way in ${SEEDS * 2} random mixes`, async () => {
    const kinds = new Set<string>()
    let degenerate = 0
    for (const { seed, builder } of randomMixes) {
      const answer = await mixed(builder)
      degenerate += answer.degenerate ? 1 : 0
      for (const result of answer.limits) {
        if (!result.bindingSide) continue
        const limit = builder.input.limits.find(({ id }) => id === result.limitId)!
        kinds.add(kindOf(limit))
        for (const direction of [1, -1] as const) {
          const margin = direction > 0 ? result.raise! : result.lower!
          try {
            await checkMargin({ builder, limit, result, direction }, margin, answer)
          } catch (error) {
            throw new Error(`seed ${seed}, ${JSON.stringify({ limit, margin, direction })}`, { cause: error })
          }
        }
      }
    }
    const here = expectedKinds.filter((kind) => basis !== 'besideForage' || kind !== 'nutrient perKgAsFed')
    expect([...kinds].sort()).toEqual(
      expect.arrayContaining(here.filter((kind) => basis !== 'batch' || kind !== 'intake')),
    )
    expect(degenerate).toBeGreaterThan(0)
  }, 60_000)

  it('holds up to the value it names, with the same feeds and limits, and not beyond', async () => {
    let inside = 0
    let beyond = 0
    for (const { seed, builder } of randomMixes.slice(0, 20)) {
      const answer = await mixed(builder)
      for (const result of answer.limits) {
        if (!result.bindingSide) continue
        const limit = builder.input.limits.find(({ id }) => id === result.limitId)!
        const bound = limit[result.bindingSide]!
        for (const margin of [result.raise!, result.lower!]) {
          const reach = margin.until === undefined ? 0 : margin.until - bound
          if (margin.impossible || Math.abs(reach) < 1e-6 * bound || limit.min === limit.max) continue
          const at = (share: number) =>
            builder.moved(limit.id, { [result.bindingSide!]: bound + share * reach })
          const straight = (cost: number, share: number) =>
            Math.abs(cost - answer.cost.least - share * Math.abs(reach) * margin.perUnit!) <=
            1e-8 * answer.cost.least
          const context = `seed ${seed}, ${JSON.stringify({ limit, margin })}`
          const near = await mixed(at(0.97))
          if (!straight(near.cost.least, 0.97))
            expect(shapeOf(near), context).toBe(shapeOf(await mixed(at(0.3))))
          inside++
          const otherEnd = result.bindingSide === 'min' ? limit.max : limit.min
          if (margin.until === 0 || Math.abs(margin.until! - (otherEnd ?? NaN)) <= 1e-6 * bound) continue
          const cost = await leastCost(at(1.03))
          if (cost === undefined) continue
          expect(shapeOf(await mixed(at(1.03))), context).not.toBe(shapeOf(near))
          beyond++
        }
      }
    }
    expect(inside).toBeGreaterThan(50)
    expect(beyond).toBeGreaterThan(30)
  }, 60_000)

  it('reports every limit as plain arithmetic reads it, and within its bounds', async () => {
    for (const { builder } of randomMixes) {
      const answer = await mixed(builder)
      const kilograms = new Map(answer.blend.map((part) => [part.feedId, part.kgAsFed]))
      for (const { limitId, value } of answer.limits) {
        const limit = builder.input.limits.find(({ id }) => id === limitId)!
        const { low, high } = readingsOf(builder.input, limit, kilograms)
        const near = 1e-7 * Math.max(low, high, 1e-6)
        expect(Math.min(Math.abs(value - low), Math.abs(value - high))).toBeLessThanOrEqual(near)
        expect(low).toBeGreaterThanOrEqual((limit.min ?? 0) - near)
        expect(high).toBeLessThanOrEqual((limit.max ?? Infinity) + near)
      }
    }
  }, 60_000)
})

describe('a limit that differs for more and less', () => {
  const grain = feed('grain', 0.9, 0.2, { crudeProtein: 100, metabolizableEnergy: 3, digestibleEnergy: 3.6 })
  const meal = feed('meal', 0.9, 0.4, { crudeProtein: 300, metabolizableEnergy: 3.2, digestibleEnergy: 3.84 })
  const twice = mix('batch')
    .with(grain, meal)
    .limit(
      { id: 'me', kind: 'nutrient', nutrient: 'metabolizableEnergy', measure: 'perKgDryMatter', min: 3.1 },
      { id: 'de', kind: 'nutrient', nutrient: 'digestibleEnergy', measure: 'perKgDryMatter', min: 3.72 },
    )

  it('costs when tightened and saves nothing when loosened, where another limit asks for the same', async () => {
    const answer = await mixed(twice)
    expect(answer.degenerate).toBe(true)
    for (const limit of answer.limits) {
      expect(limit).toMatchObject({ state: 'costs', differs: true, bindingSide: 'min' })
      expect(limit.raise!.perUnit).toBeGreaterThan(0)
      expect(limit.lower).toEqual({ perUnit: 0, until: 0, impossible: false })
    }
  })

  it('is impossible to tighten beyond what the richest feed holds', async () => {
    const answer = await mixed(
      mix('batch')
        .with(grain, meal)
        .limit({ id: 'cp', kind: 'nutrient', nutrient: 'crudeProtein', measure: 'perKgDryMatter', min: 300 }),
    )
    expect(answer.limits[0]).toMatchObject({ raise: { impossible: true }, differs: true, state: 'costs' })
    expect(answer.limits[0]!.lower!.perUnit).toBeCloseTo((-1000 * (0.4 - 0.2)) / 0.9 / 200, 9)
  })

  it('is tight, and costs nothing, where the only feed there is just meets it', async () => {
    const answer = await mixed(
      mix('batch')
        .with(grain)
        .limit({ id: 'cp', kind: 'nutrient', nutrient: 'crudeProtein', measure: 'perKgDryMatter', min: 100 }),
    )
    expect(answer.limits[0]).toMatchObject({
      value: 100,
      state: 'tight',
      bindingSide: 'min',
      raise: { impossible: true },
      lower: { perUnit: 0, impossible: false },
    })
  })

  it('counts what raising a minimum of nothing costs', async () => {
    const answer = await mixed(
      mix('batch')
        .with(grain, meal)
        .limit({
          id: 'meal',
          kind: 'feeds',
          of: { by: 'feeds', feedIds: [meal.id] },
          measure: 'shareOfDryMatter',
          min: 0,
        }),
    )
    expect(answer.limits[0]).toMatchObject({
      value: 0,
      state: 'costs',
      raise: { perUnit: expect.closeTo((1000 * (0.4 - 0.2)) / 0.9, 9), until: expect.closeTo(1, 6) },
      lower: { perUnit: 0, until: 0 },
    })
  })

  it('moves both ends of a fixed amount together', async () => {
    const answer = await mixed(
      mix('batch')
        .with(grain, meal)
        .limit({
          id: 'g',
          kind: 'feeds',
          of: { by: 'feeds', feedIds: [grain.id] },
          measure: 'kgDryMatter',
          min: 400,
          max: 400,
        }),
    )
    const perKilogram = (0.2 - 0.4) / 0.9
    expect(answer.limits[0]).toMatchObject({
      state: 'costs',
      bindingSide: 'max',
      raise: { perUnit: expect.closeTo(perKilogram, 9), until: expect.closeTo(1000, 6) },
      lower: { perUnit: expect.closeTo(-perKilogram, 9), until: expect.closeTo(0, 6) },
    })
  })
})
