import { answerSchema, type InfeasibleAnswer } from '@maslin/shared'
import { describe, expect, it } from 'vitest'
import { solveMix } from './solve'
import { feed, mix, MixBuilder } from './testing/builders'
import { leastCost } from './testing/leastCost'
import { randomMix, randomStream } from './testing/randomMixes'

const bases = ['batch', 'perHead', 'besideForage'] as const

/** A random mix with some limits tightened past what is possible, some of them fixed. */
function tightened(seed: number): MixBuilder {
  const random = randomStream(seed * 31 + 5)
  let builder = randomMix(seed, {
    basis: bases[seed % 3]!,
    round: seed % 2 === 0,
    unknown: seed % 5 === 0 ? 0.15 : 0,
  })
  for (const { id, min, max } of builder.input.limits) {
    if (min !== undefined && max !== undefined) continue
    if (random() < 0.6)
      builder = builder.moved(
        id,
        min === undefined ? { max: max! * (1 - 0.4 * random()) } : { min: min * (1 + 0.5 * random()) },
      )
  }
  const limits = builder.input.limits.map((limit) => ({ ...limit, negotiable: random() > 0.2 }))
  return new MixBuilder({ ...builder.input, limits })
}

/** The mix with the sides of the conflict alone as limits, one of them left out. */
function onlyConflict({ input }: MixBuilder, { conflict }: InfeasibleAnswer, without?: number): MixBuilder {
  const members = conflict.filter((_, i) => i !== without)
  const limits = input.limits.flatMap((limit) => {
    const sides = members.filter(({ limitId }) => limitId === limit.id).map(({ side }) => side)
    if (sides.length === 0) return []
    return [
      {
        ...limit,
        min: sides.includes('min') ? limit.min : undefined,
        max: sides.includes('max') ? limit.max : undefined,
      },
    ]
  })
  return new MixBuilder({ ...input, limits })
}

describe('a mix that is impossible', () => {
  const found: { builder: MixBuilder; answer: InfeasibleAnswer }[] = []

  it('is met often enough among tightened random mixes to try the rest on', async () => {
    for (let seed = 1; seed <= 240; seed++) {
      const builder = tightened(seed)
      const answer = answerSchema.parse(await solveMix(builder.input))
      if (answer.status === 'infeasible') found.push({ builder, answer })
      else expect(answer.status).toBe('optimal')
    }
    expect(found.length).toBeGreaterThan(60)
  }, 60_000)

  it('names limits that cannot hold together, though any of them left out makes the others possible', async () => {
    for (const { builder, answer } of found) {
      expect(answer.conflict.length).toBeGreaterThan(0)
      expect(await leastCost(onlyConflict(builder, answer))).toBeUndefined()
      for (let i = 0; i < answer.conflict.length; i++)
        expect(await leastCost(onlyConflict(builder, answer, i))).toBeDefined()
    }
  }, 60_000)

  it('proposes loosenings of negotiable limits that make a mix possible at the cost it names', async () => {
    let checked = 0
    for (const { builder, answer } of found) {
      expect(answer.proposals.length).toBeLessThanOrEqual(3)
      for (const { loosenings, leastCost: cost } of answer.proposals) {
        let loosened = builder
        for (const { limitId, side, from, to } of loosenings) {
          const limit = builder.input.limits.find(({ id }) => id === limitId)!
          expect(limit.negotiable).toBe(true)
          expect(limit[side]).toBe(from)
          expect(side === 'min' ? to < from : to > from).toBe(true)
          loosened = loosened.moved(limitId, { [side]: to })
        }
        expect(await leastCost(loosened)).toBeCloseTo(cost!, 6)
        checked++
      }
    }
    expect(checked).toBeGreaterThan(80)
  }, 60_000)

  it('proposes nothing larger than needed: one limit alone cannot be drawn in by a hundredth of the way', async () => {
    let singles = 0
    for (const { builder, answer } of found)
      for (const { loosenings } of answer.proposals) {
        const [only, ...others] = loosenings
        if (!only || others.length > 0) continue
        const { limitId, side, from, to } = only
        // Rounded to four figures on the roomy side: back by the rounding and by a hundredth.
        const back = from + 0.99 * (to - from) - Math.sign(to - from) * 1.1e-3 * to
        expect(await leastCost(builder.moved(limitId, { [side]: back }))).toBeUndefined()
        singles++
      }
    expect(singles).toBeGreaterThan(50)
  }, 60_000)

  it('is proved', () => {
    for (const { answer } of found) expect(answer.proof.certified).toBe(true)
  })

  const hay = feed('hay', 0.9, 0.1, { crudeProtein: 100 })
  const atLeast = (min: number, negotiable: boolean) =>
    mix('batch').with(hay).limit({
      id: 'cp',
      kind: 'nutrient',
      nutrient: 'crudeProtein',
      measure: 'perKgDryMatter',
      min,
      negotiable,
    })

  it('is a conflict of one limit where the feeds cannot reach it', async () => {
    const answer = await solveMix(atLeast(150, true).input)
    expect(answer).toMatchObject({
      status: 'infeasible',
      conflict: [{ limitId: 'cp', side: 'min' }],
      proposals: [
        {
          loosenings: [{ limitId: 'cp', side: 'min', from: 150, to: 100 }],
          leastCost: expect.closeTo(100 / 0.9, 6),
        },
      ],
    })
  })

  it.each(['batch', 'perHead'] as const)(
    'offers what the feeds can reach where the limit was set absurdly high, basis %s',
    async (basis) => {
      const grain = feed('grain', 0.9, 0.2, { metabolizableEnergy: 3 })
      const hay = feed('hay', 0.9, 0.1, { metabolizableEnergy: 2 })
      const answer = await solveMix(
        mix(basis).with(grain, hay).group({ intakeDryMatterKg: 2 }).limit(
          {
            id: 'me',
            kind: 'nutrient',
            nutrient: 'metabolizableEnergy',
            measure: 'perHeadDay',
            min: 999999999,
          },
          { id: 'intake', kind: 'intake', min: 2, max: 2, negotiable: false },
        ).input,
      )
      if (answer.status !== 'infeasible') throw new Error(`It is ${answer.status}.`)
      expect(answer.proposals[0]?.loosenings).toEqual([
        { limitId: 'me', side: 'min', from: 999999999, to: expect.closeTo(6, 2) as number },
      ])
    },
  )

  it('has no proposal where nothing may be loosened', async () => {
    expect(await solveMix(atLeast(150, false).input)).toMatchObject({ status: 'infeasible', proposals: [] })
  })

  it('still warns of what the animals eat beside it', async () => {
    const bone = feed('bone', 0.9, 0.1, { crudeProtein: 400 }, { ruminantOrigin: 'yes', forage: true })
    const answer = await solveMix(
      mix('besideForage')
        .with(hay)
        .beside(bone, { dryMatterKg: 1 })
        .limit({ id: 'rate', kind: 'rate', max: 1 }, { id: 'intake', kind: 'intake', min: 5 }).input,
    )
    expect(answer).toMatchObject({
      status: 'infeasible',
      cautions: [{ code: 'ruminantOriginInBaseDiet', level: 'block', feedIds: [bone.id] }],
    })
  })

  it('names a limit on feeds that are not in the mix at all', async () => {
    const absent = { by: 'feeds', feedIds: ['00000000-0000-4000-8000-000000000000'] } as const
    const answer = await solveMix(
      mix('batch')
        .with(hay)
        .limit({
          id: 'absent',
          kind: 'feeds',
          of: { ...absent, feedIds: [...absent.feedIds] },
          measure: 'kgAsFed',
          min: 1,
        }).input,
    )
    expect(answer).toMatchObject({ status: 'infeasible', conflict: [{ limitId: 'absent', side: 'min' }] })
  })
})
