import { describe, expect, it } from 'vitest'
import { feed, mix } from './testing/builders'
import { mixed } from './testing/leastCost'

/** A worked case of our own: hay of 54 % TDN of which 1.4 kg dry matter is eaten alone, a mix of 85 %, a need of 1.24 kg. */
const hay = feed('hay', 0.9, 0.18, { totalDigestibleNutrients: 540 }, { forage: true, class: 'dryForage' })
const grain = feed('grain', 0.88, 0.3, { totalDigestibleNutrients: 850 })
const need = {
  id: 'tdn',
  kind: 'nutrient',
  nutrient: 'totalDigestibleNutrients',
  measure: 'perHeadDay',
  min: 1240,
} as const

const beside = (substitutionRate: number, wasteShare = 0) =>
  mix('besideForage').with(grain).beside(hay, { dryMatterKg: 1.4, substitutionRate, wasteShare }).limit(need)

describe('a supplement beside hay', () => {
  it('is 0.57 kg of dry matter where the hay is eaten as before', async () => {
    const answer = await mixed(beside(0))
    expect(answer.totals.kgDryMatter).toBeCloseTo((1240 - 540 * 1.4) / 850, 9)
    expect(answer.totals.kgDryMatter).toBeCloseTo(0.57, 2)
    expect(answer.baseDiet).toEqual([
      { feedId: hay.id, kgDryMatter: 1.4, kgAsFed: 1.4 / 0.9, kgOffered: 1.4 / 0.9 },
    ])
  })

  it('is 0.92 kg where each kilogram takes the place of 0.6 kg of hay', async () => {
    const answer = await mixed(beside(0.6))
    expect(answer.totals.kgDryMatter).toBeCloseTo(0.92, 2)
    expect(answer.baseDiet[0]!.kgDryMatter).toBeCloseTo(1.4 - 0.6 * answer.totals.kgDryMatter, 9)
    expect(answer.limits[0]).toMatchObject({ value: 1240, state: 'costs' })
    expect(answer.supply[0]).toMatchObject({
      amount: expect.closeTo(1240, 9),
      fromBaseDiet: expect.closeTo(540 * answer.baseDiet[0]!.kgDryMatter, 9),
    })
  })

  it.each(['mineral', 'premix'] as const)(
    'leaves the hay as it is for a %s, which fills no rumen',
    async (kind) => {
      const limestone = feed(
        'limestone',
        1,
        0.1,
        { totalDigestibleNutrients: 0, calcium: 380 },
        { class: kind },
      )
      const calcium = {
        id: 'ca',
        kind: 'nutrient',
        nutrient: 'calcium',
        measure: 'perHeadDay',
        min: 8,
      } as const
      const answer = await mixed(beside(0.6).with(limestone).limit(calcium))
      const grains = answer.blend.find(({ feedId }) => feedId === grain.id)!
      expect(answer.totals.kgDryMatter).toBeGreaterThan(grains.kgDryMatter)
      expect(answer.baseDiet[0]!.kgDryMatter).toBeCloseTo(1.4 - 0.6 * grains.kgDryMatter, 9)
    },
  )

  it.each([0, 0.6])(
    'takes the place of all free-choice hay as a whole diet (substitution %d)',
    async (rate) => {
      const answer = await mixed(
        mix('perHead').with(grain).beside(hay, { dryMatterKg: 1.4, substitutionRate: rate }).limit(need),
      )
      expect(answer.baseDiet).toEqual([])
      expect(answer.totals.kgDryMatter).toBeCloseTo(1240 / 850, 9)
      expect(answer.cost.least).toBeCloseTo(answer.cost.mix, 12)
    },
  )

  it('leaves the animal 15 % short of its need where 0.57 kg is fed in spite of that', () => {
    const fed = (1240 - 540 * 1.4) / 850
    const brought = 850 * fed + 540 * (1.4 - 0.6 * fed)
    expect(1 - brought / 1240).toBeCloseTo(0.15, 2)
  })

  it('pays for the hay that is eaten and wasted, and counts the hay saved', async () => {
    const answer = await mixed(beside(0.6, 0.2))
    const eaten = answer.baseDiet[0]!
    expect(eaten.kgOffered).toBeCloseTo(eaten.kgAsFed / 0.8, 12)
    expect(answer.cost.baseDiet).toBeCloseTo(0.18 * eaten.kgOffered, 9)
    expect(answer.cost.least).toBeCloseTo(answer.cost.mix + answer.cost.baseDiet, 12)
    expect(answer.cost.perHeadDay).toBe(answer.cost.least)
  })

  it('never takes more hay out of the diet than was in it', async () => {
    const filler = feed('filler', 0.9, 0.001, { totalDigestibleNutrients: 100 })
    const answer = await mixed(
      mix('besideForage')
        .with(filler)
        .beside(hay, { dryMatterKg: 1.4, substitutionRate: 1 })
        .limit({ id: 'rate', kind: 'rate', min: 0 }),
    )
    expect(answer.baseDiet[0]!.kgDryMatter).toBeCloseTo(0, 9)
    expect(answer.totals.kgDryMatter).toBeCloseTo(1.4, 9)
  })

  it('holds concentrations, shares and intake for the whole diet', async () => {
    const answer = await mixed(
      beside(0.6).limit(
        {
          id: 'forage',
          kind: 'feeds',
          of: { by: 'forage' },
          measure: 'shareOfDryMatter',
          within: 'diet',
          min: 0.4,
        },
        {
          id: 'density',
          kind: 'nutrient',
          nutrient: 'totalDigestibleNutrients',
          measure: 'perKgDryMatter',
          max: 800,
        },
        { id: 'intake', kind: 'intake', max: 2 },
        { id: 'rate', kind: 'rate', max: 2 },
      ),
    )
    const mixDry = answer.totals.kgDryMatter
    const hayDry = answer.baseDiet[0]!.kgDryMatter
    const value = (id: string) => answer.limits.find(({ limitId }) => limitId === id)!.value
    expect(value('forage')).toBeCloseTo(hayDry / (hayDry + mixDry), 9)
    expect(value('density')).toBeCloseTo(1240 / (hayDry + mixDry), 6)
    expect(value('intake')).toBeCloseTo(hayDry + mixDry, 9)
    expect(value('rate')).toBeCloseTo(mixDry / 0.88, 9)
  })

  it('counts the copper of the hay in the diet of sheep, and looks at what the hay itself is made of', async () => {
    const rich = { ...hay, values: { ...hay.values, copper: { value: 20, status: 'typed' as const } } }
    const poor = { ...grain, values: { ...grain.values, copper: { value: 3, status: 'typed' as const } } }
    const diet = (forage: typeof hay) =>
      mix('besideForage').with(poor).beside(forage, { dryMatterKg: 1.4, substitutionRate: 0.6 }).limit(need)
    const answer = await mixed(diet(rich))
    const [mixDry, hayDry] = [answer.totals.kgDryMatter, answer.baseDiet[0]!.kgDryMatter]
    const whole = (3 * mixDry + 20 * hayDry) / (mixDry + hayDry)
    expect(whole).toBeGreaterThan(10)
    expect(answer.cautions).toMatchObject([
      { code: 'copperWarn', params: { totalPerKg: expect.closeTo(whole, 9) } },
    ])
    const { cautions } = await mixed(diet({ ...rich, ruminantOrigin: 'yes' }))
    expect(cautions).toContainEqual(
      expect.objectContaining({ code: 'ruminantOriginInBaseDiet', level: 'block', feedIds: [hay.id] }),
    )
  })

  it('adds rations that are fed anyway and names those whose price is not known', async () => {
    const ration = feed('ration', 0.9, undefined, { totalDigestibleNutrients: 600 })
    const answer = await mixed(beside(0).ration(ration, { dryMatterKg: 0.2 }))
    expect(answer.totals.kgDryMatter).toBeCloseTo((1240 - 540 * 1.4 - 600 * 0.2) / 850, 9)
    expect(answer.cost.unpricedBaseFeeds).toEqual([ration.id])
  })
})
