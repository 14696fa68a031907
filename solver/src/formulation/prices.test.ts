import type { OptimalAnswer } from '@maslin/shared'
import { describe, expect, it } from 'vitest'
import { kilogramsOf, leastCost, mixed } from './testing/leastCost'
import type { MixBuilder } from './testing/builders'
import { randomMix } from './testing/randomMixes'

const bases = ['batch', 'perHead', 'besideForage'] as const
const randomMixes = bases.flatMap((basis) =>
  Array.from({ length: 24 }, (_, i) => randomMix(500 + i, { basis, round: i % 2 === 0 })),
)

/** Cost of the answer's own blend with one feed at another price. */
const costOfBlend = (answer: OptimalAnswer, feedId: string, change: number): number =>
  answer.cost.least + change * kilogramsOf(answer, feedId)

async function costWith(builder: MixBuilder, feedId: string, price: number): Promise<number> {
  return (await leastCost(builder.priced(feedId, price)))!
}

describe('price windows', () => {
  it('are the prices between which no other mix is cheaper', async () => {
    let windows = 0
    for (const builder of randomMixes) {
      const answer = await mixed(builder)
      for (const { feedId, pricePerKg: price, priceWindow } of answer.blend) {
        const { low, high } = priceWindow!
        const inside = [
          low === undefined ? 0 : low + 0.02 * (price - low),
          high === undefined ? 50 * price : high - 0.02 * (high - price),
        ]
        for (const other of inside) {
          const expected = costOfBlend(answer, feedId, other - price)
          expect(Math.abs((await costWith(builder, feedId, other)) - expected)).toBeLessThanOrEqual(
            1e-8 * expected,
          )
        }
        for (const other of [
          low === undefined ? undefined : low * 0.95,
          high === undefined ? undefined : high * 1.05,
        ]) {
          if (other === undefined) continue
          windows++
          expect(await costWith(builder, feedId, other)).toBeLessThan(
            costOfBlend(answer, feedId, other - price),
          )
        }
      }
    }
    expect(windows).toBeGreaterThan(200)
  }, 60_000)
})

describe('buy-in prices', () => {
  it('are the prices below which a feed comes in, with the share it takes and the feed it replaces', async () => {
    let entering = 0
    let never = 0
    for (const builder of randomMixes) {
      const answer = await mixed(builder)
      for (const { feedId, reason, buyInPrice, thenShareAsFed, replaces } of answer.leftOut) {
        expect(reason).toBe('price')
        if (buyInPrice === undefined) {
          never++
          expect(await costWith(builder, feedId, 0)).toBeCloseTo(answer.cost.least, 7)
          continue
        }
        entering++
        expect(
          Math.abs((await costWith(builder, feedId, buyInPrice * 1.0001)) - answer.cost.least),
        ).toBeLessThanOrEqual(1e-9 * answer.cost.least)
        const below = await mixed(builder.priced(feedId, buyInPrice * (1 - 1e-5)))
        expect(below.cost.least).toBeLessThan(answer.cost.least)
        const entered = below.blend.find((part) => part.feedId === feedId)
        expect(entered?.shareAsFed).toBeCloseTo(thenShareAsFed!, 6)
        const shareNow = (id: string) => answer.blend.find((part) => part.feedId === id)!.shareAsFed
        const shareThen = (id: string) => below.blend.find((part) => part.feedId === id)?.shareAsFed ?? 0
        const falls = answer.blend.map((part) => shareNow(part.feedId) - shareThen(part.feedId))
        if (replaces) expect(shareNow(replaces) - shareThen(replaces)).toBeCloseTo(Math.max(...falls), 6)
      }
    }
    expect(entering).toBeGreaterThan(150)
    expect(never).toBeGreaterThan(10)
  }, 60_000)

  it('stand nearest first', async () => {
    for (const builder of randomMixes) {
      const { leftOut } = await mixed(builder)
      const distances = leftOut.map(({ pricePerKg, buyInPrice }) =>
        buyInPrice ? pricePerKg! / buyInPrice : Infinity,
      )
      expect(distances).toEqual([...distances].sort((a, b) => a - b))
    }
  }, 30_000)
})
