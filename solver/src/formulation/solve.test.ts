import { answerSchema, formulationInputSchema } from '@maslin/shared'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { solveMix } from './solve'
import { feed, mix, MixBuilder } from './testing/builders'
import { leastCost, mixed } from './testing/leastCost'
import { randomMix } from './testing/randomMixes'
import { wildInput } from './testing/wildInputs'

const bases = ['batch', 'perHead', 'besideForage'] as const
const randomSeed = fc.record({
  seed: fc.integer({ min: 1, max: 1e6 }),
  basis: fc.constantFrom(...bases),
  round: fc.boolean(),
})

describe('any mix', () => {
  it('has an answer of the agreed shape for any input within the schema, however senseless', async () => {
    const counts = { optimal: 0, infeasible: 0, invalid: 0, unbounded: 0, stopped: 0 }
    await fc.assert(
      fc.asyncProperty(wildInput, async (input) => {
        formulationInputSchema.parse(input)
        const answer = answerSchema.parse(await solveMix(input))
        counts[answer.status]++
        // Silence is for numbers that no engine can be trusted with, never for a slip of ours.
        if (answer.status === 'stopped')
          expect(answer.detail).toMatch(/failed the check of|no proof of that was found/)
      }),
      { numRuns: 400, seed: 20 },
    )
    expect(counts.optimal).toBeGreaterThan(40)
    expect(counts.infeasible).toBeGreaterThan(40)
    expect(counts.stopped).toBeLessThan(20)
  }, 60_000)

  it('weighs what it says: parts make the batch, shares make one, costs make the cost', async () => {
    await fc.assert(
      fc.asyncProperty(randomSeed, async ({ seed, basis, round }) => {
        const builder = randomMix(seed, { basis, round })
        const answer = await mixed(builder)
        const sum = (pick: (part: (typeof answer.blend)[number]) => number) =>
          answer.blend.reduce((total, part) => total + pick(part), 0)
        if (basis === 'batch')
          expect(sum((part) => part.kgDryMatter)).toBeCloseTo(builder.input.batchDryMatterKg, 6)
        expect(sum((part) => part.shareAsFed)).toBeCloseTo(1, 9)
        expect(sum((part) => part.shareOfDryMatter)).toBeCloseTo(1, 9)
        expect(sum((part) => part.cost)).toBeCloseTo(answer.cost.mix, 9)
        expect(answer.cost.least).toBeCloseTo(answer.cost.mix + answer.cost.baseDiet, 6)
        expect(answer.proof.certified).toBe(true)
        for (const { amount, parts } of answer.supply)
          expect(parts.reduce((total, part) => total + part.amount, 0)).toBeCloseTo(amount, 6)
      }),
      { numRuns: 80, seed: 21 },
    )
  }, 60_000)

  it('never costs more with a limit relaxed, nor less with one tightened', async () => {
    await fc.assert(
      fc.asyncProperty(
        randomSeed,
        fc.double({ min: 0.5, max: 1, noNaN: true }),
        async ({ seed, basis, round }, share) => {
          const builder = randomMix(seed, { basis, round })
          const cost = (await leastCost(builder))!
          for (const { id, min, max } of builder.input.limits) {
            const relaxed = builder.moved(id, {
              ...(min === undefined ? {} : { min: min * share }),
              ...(max === undefined ? {} : { max: max / share }),
            })
            expect((await leastCost(relaxed))!).toBeLessThanOrEqual(cost * (1 + 1e-9))
            if (min === undefined || max !== undefined) continue
            expect(
              (await leastCost(builder.moved(id, { min: min / share }))) ?? Infinity,
            ).toBeGreaterThanOrEqual(cost * (1 - 1e-9))
          }
        },
      ),
      { numRuns: 40, seed: 22 },
    )
  }, 60_000)

  it('does not depend on the order of its feeds', async () => {
    for (let seed = 1; seed <= 20; seed++) {
      const builder = randomMix(seed, { basis: bases[seed % 3]!, round: true })
      const { input } = builder
      const there = await mixed(builder)
      const back = await mixed(new MixBuilder({ ...input, feeds: [...input.feeds].reverse() }))
      expect(back.blend.map(({ feedId, kgAsFed }) => [feedId, kgAsFed])).toEqual(
        there.blend.map(({ feedId, kgAsFed }) => [feedId, expect.closeTo(kgAsFed, 6)]),
      )
    }
  }, 30_000)
})

describe('several mixes that cost the same', () => {
  const twins = ['first', 'second', 'third'].map((name) => feed(name, 0.9, 0.2, { crudeProtein: 120 }))

  it('are told of, and one of them is always chosen', async () => {
    const chosen = new Set<string>()
    for (const feeds of [twins, [...twins].reverse(), [twins[1]!, twins[0]!, twins[2]!]]) {
      const answer = await mixed(mix('batch').with(...feeds))
      expect(answer.degenerate).toBe(true)
      expect(answer.blend).toHaveLength(1)
      chosen.add(answer.blend[0]!.feedId)
    }
    expect(chosen.size).toBe(1)
  })

  it('are chosen among alike by both engines', async () => {
    const builder = mix('batch').with(...twins)
    const small = await mixed(builder, { engine: 'javascript-lp-solver' })
    const large = await mixed(builder, { engine: 'highs' })
    expect(small.blend[0]!.feedId).toBe(large.blend[0]!.feedId)
    expect(small.proof.engine).toBe('javascript-lp-solver')
  })

  it('never give way to one that is a millionth dearer', async () => {
    for (let i = 0; i < 12; i++) {
      const nearly = feed(`nearly${i}`, 0.9, 0.2 * (1 + 1e-6), { crudeProtein: 120 })
      const answer = await mixed(mix('batch').with(...twins, nearly))
      expect(answer.blend.map(({ feedId }) => feedId)).not.toContain(nearly.id)
      expect(Math.abs(answer.cost.least / (200 / 0.9) - 1)).toBeLessThan(1e-10)
    }
  })

  it('have windows that end at today’s price, and buy-in prices that are today’s', async () => {
    const answer = await mixed(mix('batch').with(...twins))
    expect(answer.blend[0]!.priceWindow).toEqual({ high: expect.closeTo(0.2, 9) })
    for (const { buyInPrice, thenShareAsFed } of answer.leftOut) {
      expect(buyInPrice).toBeCloseTo(0.2, 9)
      expect(thenShareAsFed).toBeCloseTo(1, 9)
    }
  })

  it('are not claimed where the cheapest mix is the only one', async () => {
    const answer = await mixed(mix('batch').with(twins[0]!, feed('dear', 0.9, 0.3)))
    expect(answer.degenerate).toBe(false)
  })
})

describe('the edges', () => {
  const grain = feed('grain', 0.9, 0.2, { crudeProtein: 100 })

  it('is an empty mix where nothing asks for anything', async () => {
    const answer = answerSchema.parse(
      await solveMix(
        mix('perHead')
          .with(grain)
          .limit({ id: 'cp', kind: 'nutrient', nutrient: 'crudeProtein', measure: 'perKgDryMatter', min: 90 })
          .input,
      ),
    )
    expect(answer).toMatchObject({
      status: 'optimal',
      blend: [],
      cost: { least: 0, mixPerKgAsFed: 0 },
      totals: { kgAsFed: 0 },
    })
  })

  it('ends with a reason when the time is up', async () => {
    expect(await solveMix(mix('batch').with(grain).input, { deadlineMs: 0 })).toMatchObject({
      status: 'stopped',
    })
  })

  it('says why it cannot be solved', async () => {
    expect(await solveMix(mix('batch').input)).toMatchObject({
      status: 'invalid',
      reasons: [{ code: 'noFeeds' }],
    })
  })

  it('says what the other engine found, where asked', async () => {
    const { proof } = await mixed(mix('batch').with(grain), { secondOpinion: true })
    expect(proof.secondOpinion).toMatchObject({ engine: 'javascript-lp-solver', agrees: true })
    expect((await mixed(mix('batch').with(grain))).proof.secondOpinion).toBeUndefined()
  })

  it('costs the group what its heads eat in thirty days', async () => {
    const answer = await mixed(mix('batch').with(grain).group({ heads: 12, intakeDryMatterKg: 1.8 }))
    expect(answer.cost.perHeadDay).toBeCloseTo((0.2 / 0.9) * 1.8, 9)
    expect(answer.cost.perGroup30Days).toBeCloseTo((0.2 / 0.9) * 1.8 * 12 * 30, 6)
  })
})
