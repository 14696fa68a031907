import type { Curve } from '@maslin/shared'
import { describe, expect, it } from 'vitest'
import { curvePoints, feedsAlong, pieces, readCurve } from './curves'

const corn = '0190a0a0-0000-7000-8000-000000000011'
const barley = '0190a0a0-0000-7000-8000-000000000015'

/** Corn up to a price of 3, then barley: the cost bends there and the amounts step. */
const curve: Curve = {
  along: { kind: 'price', feedId: corn },
  exact: true,
  at: 2,
  possible: {},
  points: [
    { value: 1, cost: 10, blend: [{ feedId: corn, kgAsFed: 10 }] },
    { value: 2, cost: 20, blend: [{ feedId: corn, kgAsFed: 10 }] },
    { value: 3, cost: 30, blend: [{ feedId: corn, kgAsFed: 10 }] },
    { value: 3, cost: 30, blend: [{ feedId: barley, kgAsFed: 8 }] },
    { value: 5, cost: 30, blend: [{ feedId: barley, kgAsFed: 8 }] },
  ],
}
const axis = { shown: (stored: number) => stored * 10, stored: (shown: number) => shown / 10 }
const points = curvePoints(curve, axis, 2)

describe('reading a curve', () => {
  it('is straight between points, on the shown axis and in the shown cost', () => {
    expect(readCurve(points, 15)?.cost).toBeCloseTo(30)
    expect(readCurve(points, 15)?.blend.get(corn)).toBeCloseTo(10)
  })

  it('takes the side to the right at a step', () => {
    expect(readCurve(points, 30)?.blend.get(barley)).toBe(8)
    expect(readCurve(points, 30)?.blend.get(corn) ?? 0).toBe(0)
    expect(readCurve(points, 29.999)?.blend.get(corn)).toBeCloseTo(10)
  })

  it('says nothing outside the curve', () => {
    expect(readCurve(points, 9)).toBeUndefined()
    expect(readCurve(points, 51)).toBeUndefined()
    expect(readCurve([], 1)).toBeUndefined()
  })

  it('reads its own end', () => expect(readCurve(points, 50)?.cost).toBe(60))
})

describe('pieces of a curve', () => {
  it('join what is one straight line and keep the kink', () => {
    expect(pieces(points)).toEqual([
      { from: 10, to: 30, slope: 2 },
      { from: 30, to: 50, slope: 0 },
    ])
  })
})

describe('feeds along a curve', () => {
  it('come by the most that is used of them', () => expect(feedsAlong(points)).toEqual([corn, barley]))
})
