import { curveSchema, type Curve } from '@maslin/shared'
import { describe, expect, it } from 'vitest'
import { traceMixCurve } from './curve'
import { feed, mix, type MixBuilder } from './testing/builders'
import { kilogramsOf, leastCost, mixed } from './testing/leastCost'
import { randomMix } from './testing/randomMixes'

const bases = ['batch', 'perHead', 'besideForage'] as const
const randomMixes = bases.flatMap((basis) =>
  Array.from({ length: 10 }, (_, i) => randomMix(900 + i, { basis, round: i % 2 === 0 })),
)

const grain = feed('grain', 0.9, 0.2, { crudeProtein: 100 })
const meal = feed('meal', 0.9, 0.4, { crudeProtein: 300 })
const other = feed('other', 0.9, 0.35, { crudeProtein: 200 })
const protein = (min: number) =>
  mix('batch')
    .with(grain, meal, other)
    .limit({ id: 'cp', kind: 'nutrient', nutrient: 'crudeProtein', measure: 'perKgDryMatter', min })

const blendAt = ({ points }: Curve, i: number) =>
  Object.fromEntries(points[i]!.blend.map(({ feedId, kgAsFed }) => [feedId, kgAsFed]))

describe('along a limit', () => {
  it('gives the corners of the cost and where no mix is possible', async () => {
    const curve = await traceMixCurve(
      protein(150).input,
      { kind: 'limit', limitId: 'cp', side: 'min' },
      50,
      400,
    )
    expect(curve).toMatchObject({ exact: true, at: 150, possible: { to: expect.closeTo(300, 6) } })
    expect(curve.possible.from).toBeUndefined()
    expect(curve.points.map(({ value }) => value)).toEqual(
      [50, 100, 300].map((value) => expect.closeTo(value, 5)),
    )
    expect(curve.points.map(({ cost }) => cost)).toEqual(
      [200, 200, 400].map((price) => expect.closeTo(price / 0.9, 4)),
    )
    expect(blendAt(curve, 2)).toEqual({ [meal.id]: expect.closeTo(1000 / 0.9, 4) })
  })

  it('works for a side that has no limit yet, from where the mix lies', async () => {
    const curve = await traceMixCurve(
      protein(150).input,
      { kind: 'limit', limitId: 'cp', side: 'max' },
      150,
      200,
    )
    expect(curve.at).toBeCloseTo(150, 9)
    expect(curve.points.every(({ cost }) => Math.abs(cost - curve.points[0]!.cost) < 1e-9)).toBe(true)
  })

  it('gives no points where nothing is possible', async () => {
    const curve = await traceMixCurve(
      protein(150).input,
      { kind: 'limit', limitId: 'cp', side: 'min' },
      310,
      400,
    )
    expect(curve.points).toEqual([])
  })

  it('is the least cost at and between its points, for limits of every kind in random mixes', async () => {
    let exact = 0
    let bent = 0
    for (const builder of randomMixes)
      for (const limit of builder.input.limits)
        for (const side of ['min', 'max'] as const) {
          const today = limit[side]
          if (!today) continue
          const curve = curveSchema.parse(
            await traceMixCurve(
              builder.input,
              { kind: 'limit', limitId: limit.id, side },
              0.6 * today,
              1.4 * today,
            ),
          )
          exact += curve.exact ? 1 : 0
          bent += curve.exact ? 0 : 1
          await checkAlongLimit(builder, limit.id, side, curve)
        }
    expect(exact).toBeGreaterThan(60)
    expect(bent).toBeGreaterThan(40)
  }, 60_000)
})

async function checkAlongLimit(
  builder: MixBuilder,
  limitId: string,
  side: 'min' | 'max',
  curve: Curve,
): Promise<void> {
  const at = (value: number) => leastCost(builder.moved(limitId, { [side]: value }))
  const ends = [curve.possible.from, curve.possible.to]
  for (const [i, point] of curve.points.entries()) {
    const context = `${limitId} ${side} at ${point.value}`
    const cost = await at(point.value)
    const isEnd = ends.some((end) => end !== undefined && Math.abs(end - point.value) <= 1e-6 * point.value)
    if (!isEnd || cost !== undefined)
      expect(Math.abs(cost! - point.cost), context).toBeLessThanOrEqual(1e-6 * point.cost)
    const next = curve.points[i + 1]
    if (!next) continue
    expect(next.value).toBeGreaterThanOrEqual(point.value)
    const between = (await at((point.value + next.value) / 2))!
    const straight = (point.cost + next.cost) / 2
    expect(Math.abs(between - straight), context).toBeLessThanOrEqual((curve.exact ? 1e-7 : 1e-3) * between)
  }
  const today = curve.at
  if (curve.possible.to !== undefined && curve.points.length > 0)
    expect(await at(curve.possible.to + 1e-3 * today)).toBeUndefined()
  if (curve.possible.from !== undefined && curve.points.length > 0)
    expect(await at(curve.possible.from - 1e-3 * today)).toBeUndefined()
}

describe('along a price', () => {
  it('changes the mix in steps: two points share the price of a step, with the mix on either side', async () => {
    const curve = await traceMixCurve(protein(200).input, { kind: 'price', feedId: other.id }, 0.2, 0.5)
    expect(curve.at).toBe(0.35)
    expect(curve.points.map(({ value }) => value)).toEqual(
      [0.2, 0.3, 0.3, 0.5].map((value) => expect.closeTo(value, 9)),
    )
    expect(blendAt(curve, 1)).toEqual({ [other.id]: expect.closeTo(1000 / 0.9, 6) })
    expect(blendAt(curve, 2)).toEqual({
      [grain.id]: expect.closeTo(500 / 0.9, 6),
      [meal.id]: expect.closeTo(500 / 0.9, 6),
    })
    expect(curve.points[1]!.cost).toBeCloseTo(curve.points[2]!.cost, 9)
  })

  it('finds a feed without a price a place at the prices asked for', async () => {
    const unpriced = { ...other, pricePerKg: undefined }
    const builder = mix('batch').with(grain, meal, unpriced).limit(protein(200).input.limits[0]!)
    const curve = await traceMixCurve(builder.input, { kind: 'price', feedId: other.id }, 0.2, 0.5)
    expect(curve.points.map(({ value }) => value)).toEqual(
      [0.2, 0.3, 0.3, 0.5].map((value) => expect.closeTo(value, 9)),
    )
  })

  it('gives cost and mix as a solve at that price does, in random mixes', async () => {
    let steps = 0
    for (const builder of randomMixes)
      for (const { id, pricePerKg } of builder.input.feeds.slice(0, 2)) {
        const curve = await traceMixCurve(builder.input, { kind: 'price', feedId: id }, 0, 2 * pricePerKg!)
        for (let i = 0; i + 1 < curve.points.length; i += 2) {
          const [start, end] = [curve.points[i]!, curve.points[i + 1]!]
          const price = (start.value + end.value) / 2
          const answer = await mixed(builder.priced(id, price))
          expect(answer.cost.least).toBeCloseTo((start.cost + end.cost) / 2, 7)
          for (const { feedId, kgAsFed } of start.blend)
            expect(kilogramsOf(answer, feedId)).toBeCloseTo(kgAsFed, 5)
        }
        steps += curve.points.length / 2 - 1
      }
    expect(steps).toBeGreaterThan(20)
  }, 60_000)
})

describe('what no curve can be drawn of', () => {
  const { input } = protein(150)
  it.each([
    {
      name: 'a feed that is not in the mix',
      along: { kind: 'price', feedId: feed('no', 1, 1).id },
      code: 'unknownFeed',
      given: input,
    },
    {
      name: 'a limit that is not there',
      along: { kind: 'limit', limitId: 'no', side: 'min' },
      code: 'unknownLimit',
      given: input,
    },
    {
      name: 'a feed that the animal rules keep out',
      along: { kind: 'price', feedId: grain.id },
      code: 'excludedFeed',
      given: { ...input, feeds: [{ ...grain, addedCopper: true }, meal] },
    },
    {
      name: 'a mix without feeds',
      along: { kind: 'limit', limitId: 'cp', side: 'min' },
      code: 'invalid',
      given: { ...input, feeds: [] },
    },
  ] as const)('says so: $name', async ({ along, code, given }) => {
    const spread = { ...given, feeds: [...given.feeds] }
    await expect(traceMixCurve(spread, along, 1, 2)).rejects.toMatchObject({ name: 'CurveUnavailable', code })
  })

  it('stops when the time is up', async () => {
    await expect(
      traceMixCurve(input, { kind: 'limit', limitId: 'cp', side: 'min' }, 1, 2, { deadlineMs: 0 }),
    ).rejects.toMatchObject({ code: 'stopped' })
  })
})
