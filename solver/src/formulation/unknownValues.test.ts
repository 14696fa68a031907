import type { LimitInput } from '@maslin/shared'
import { describe, expect, it } from 'vitest'
import { feed, mix } from './testing/builders'
import { kilogramsOf, mixed } from './testing/leastCost'

const known = feed('known', 0.9, 0.3, { crudeProtein: 200, sulfur: 2, calcium: 6, phosphorus: 4 })
const unknown = feed('unknown', 0.9, 0.1)
const assumed = {
  any: { sulfur: { value: 5, basis: 'invented' }, phosphorus: { value: 8, basis: 'invented' } },
}
const only = (feedId: string, share: number): LimitInput => ({
  id: 'part',
  kind: 'feeds',
  of: { by: 'feeds', feedIds: [feedId] },
  measure: 'shareOfDryMatter',
  min: share,
})

describe('unknown values', () => {
  it('count as nothing towards a minimum, so that the unknown feed cannot win by meeting it', async () => {
    const answer = await mixed(
      mix('batch')
        .with(known, unknown)
        .limit({ id: 'cp', kind: 'nutrient', nutrient: 'crudeProtein', measure: 'perKgDryMatter', min: 100 }),
    )
    expect(kilogramsOf(answer, unknown.id)).toBeCloseTo(500 / 0.9, 6)
    expect(answer.limits[0]).toMatchObject({
      value: 100,
      assumedShare: expect.closeTo(0.5, 9),
      unknownFeeds: [unknown.id],
      state: 'costs',
    })
    expect(answer.supply.find(({ nutrient }) => nutrient === 'crudeProtein')).toMatchObject({
      unknownShare: expect.closeTo(0.5, 9),
    })
  })

  it('take the assumed high value of their class, else of the library, against a maximum', async () => {
    const limit = {
      id: 's',
      kind: 'nutrient',
      nutrient: 'sulfur',
      measure: 'perKgDryMatter',
      max: 3,
    } as const
    const library = await mixed(mix('batch').with(known, unknown).assume(assumed).limit(limit))
    expect(kilogramsOf(library, unknown.id)).toBeCloseTo(1000 / 3 / 0.9, 6)
    expect(library.limits[0]).toMatchObject({
      value: 3,
      bindingSide: 'max',
      assumedShare: expect.closeTo(5 / 9, 9),
      state: 'notCheckable',
    })
    const ofClass = await mixed(
      mix('batch')
        .with(known, unknown)
        .assume({ ...assumed, grain: { sulfur: { value: 3, basis: 'invented' } } })
        .limit(limit),
    )
    expect(kilogramsOf(ofClass, known.id)).toBe(0)
    expect(ofClass.limits[0]).toMatchObject({ value: 3, assumedShare: 1, state: 'notCheckable' })
  })

  it('take the highest known value at hand where nothing is assumed', async () => {
    const answer = await mixed(
      mix('batch')
        .with(known, unknown)
        .limit({ id: 's', kind: 'nutrient', nutrient: 'sulfur', measure: 'perKgDryMatter', max: 2.5 }),
    )
    expect(answer.limits[0]).toMatchObject({ value: 2, assumedShare: 1, state: 'notCheckable' })
  })

  it('stay checkable while less than half of the total is assumed', async () => {
    const answer = await mixed(
      mix('batch')
        .with(known, unknown)
        .assume(assumed)
        .limit(
          { id: 's', kind: 'nutrient', nutrient: 'sulfur', measure: 'perKgDryMatter', max: 3 },
          only(known.id, 0.8),
        ),
    )
    expect(answer.limits[0]).toMatchObject({
      value: expect.closeTo(2.6, 9),
      state: 'room',
      assumedShare: expect.closeTo(1 / 2.6, 9),
    })
  })

  it('choose their end in a ratio by the sign: no calcium, and phosphorus as high as assumed', async () => {
    const answer = await mixed(
      mix('batch')
        .with(known, unknown)
        .assume(assumed)
        .limit({ id: 'r', kind: 'ratio', numerator: 'calcium', denominator: 'phosphorus', min: 1 }),
    )
    // 6 k ≥ 4 k + 8 u with k + u = 1: u = 0.2.
    expect(kilogramsOf(answer, unknown.id)).toBeCloseTo(200 / 0.9, 6)
  })

  it('count intervals at their low end for a minimum and at their high end for a maximum', async () => {
    const wide = feed('wide', 0.9, 0.1, { crudeProtein: { value: 100, low: 80, high: 130 } })
    const limit = { id: 'cp', kind: 'nutrient', nutrient: 'crudeProtein', measure: 'perKgDryMatter' } as const
    const atLeast = await mixed(
      mix('batch')
        .with(wide, known)
        .limit({ ...limit, min: 140 }),
    )
    expect(kilogramsOf(atLeast, wide.id)).toBeCloseTo(500 / 0.9, 6)
    const atMost = await mixed(
      mix('batch')
        .with({ ...wide, pricePerKg: 0.5 }, known)
        .limit({ ...limit, max: 165 }),
    )
    expect(kilogramsOf(atMost, wide.id)).toBeCloseTo(500 / 0.9, 6)
  })
})
