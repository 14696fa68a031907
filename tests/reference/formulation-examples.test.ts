import {
  convertMass,
  kilogramsPer,
  packageWeightKg,
  pricePerKg,
  type LimitInput,
  type NutrientId,
  type OptimalAnswer,
  type SolverFeed,
} from '@maslin/shared'
import { solveMix } from '@maslin/solver'
import { describe, expect, it } from 'vitest'
import { feed, mix, type MixBuilder } from '../../solver/src/formulation/testing/builders'

/**
 * Published worked examples of rations, solved as mixes and compared within what the source rounds to. Composition in
 * percent of dry matter unless said otherwise; where a source reckons on one basis only, feeds are taken as dry.
 */

const POUND = kilogramsPer('lb')
const percent = (value: number): number => value * 10
const pounds = (kilograms: number): number => convertMass(kilograms, 'kg', 'lb')

async function answerTo({ input }: MixBuilder): Promise<OptimalAnswer> {
  const answer = await solveMix(input)
  if (answer.status !== 'optimal') throw new Error(JSON.stringify(answer))
  expect(answer.proof.certified).toBe(true)
  return answer
}

const partOf = (answer: OptimalAnswer, { id }: SolverFeed) =>
  answer.blend.find((part) => part.feedId === id) ?? { kgAsFed: 0, kgDryMatter: 0, shareAsFed: 0 }

const supplyOf = (answer: OptimalAnswer, nutrient: NutrientId) =>
  answer.supply.find((supply) => supply.nutrient === nutrient)!

const within = (value: number, published: number, tolerance: number) =>
  expect(Math.abs(value - published), `${value} against ${published}`).toBeLessThanOrEqual(tolerance)

const exactly = (nutrient: NutrientId, figure: number): LimitInput => ({
  id: nutrient,
  kind: 'nutrient',
  nutrient,
  measure: 'perKgDryMatter',
  min: figure,
  max: figure,
})

const share = (of: SolverFeed | SolverFeed[], figure: number): LimitInput => {
  const feeds = Array.isArray(of) ? of : [of]
  return {
    id: feeds
      .map(({ name }) => name)
      .join('+')
      .slice(0, 60),
    kind: 'feeds',
    of: { by: 'feeds', feedIds: feeds.map(({ id }) => id) },
    measure: 'shareAsFed',
    min: figure,
    max: figure,
  }
}

// Montana State University Extension, https://animalrangeextension.montana.edu/beef/articles/pearson-sqaures.html
describe('two feeds to one protein', () => {
  it('mixes hay of 12.25 % and corn silage of 10.8 % to 11 %: 13.8 and 86.2 %', async () => {
    const hay = feed('hay', 1, 0.2, { crudeProtein: percent(12.25) })
    const silage = feed('silage', 1, 0.1, { crudeProtein: percent(10.8) })
    const answer = await answerTo(
      mix('batch')
        .with(hay, silage)
        .limit(exactly('crudeProtein', percent(11))),
    )
    within(100 * partOf(answer, hay).shareAsFed, 13.8, 0.05)
    within(100 * partOf(answer, silage).shareAsFed, 86.2, 0.05)
  })

  it('feeds a 1020 lb heifer, 2 % of body weight, hay of 8.95 % and supplement of 40 % to 9.8 %: 19.8 and 0.55 lb', async () => {
    const hay = feed('hay', 1, 0.2, { crudeProtein: percent(8.95) })
    const supplement = feed('supplement', 1, 0.5, { crudeProtein: percent(40) })
    const intake = 0.02 * convertMass(1020, 'lb', 'kg')
    const answer = await answerTo(
      mix('perHead')
        .group({ species: 'beefCattle', intakeDryMatterKg: intake })
        .with(hay, supplement)
        .limit(exactly('crudeProtein', percent(9.8)), {
          id: 'intake',
          kind: 'intake',
          min: intake,
          max: intake,
        }),
    )
    within(100 * partOf(answer, hay).shareAsFed, 97.3, 0.05)
    within(100 * partOf(answer, supplement).shareAsFed, 2.7, 0.05)
    within(pounds(answer.totals.kgDryMatter), 20.4, 0.001)
    within(pounds(partOf(answer, hay).kgDryMatter), 19.8, 0.05)
    within(pounds(partOf(answer, supplement).kgDryMatter), 0.55, 0.05)
  })
})

// ANSC 221, Homework 5, answer key, https://www.studylib.net/doc/7819592/answer-keys-are-here.
describe('a pig feed with fixed parts, minerals, premixes and a filler', () => {
  // The copper asked for is the added one, so that of grain and meal counts as none.
  const corn = feed('corn', 1, 0.2, {
    copper: 0,
    crudeProtein: percent(7.5),
    calcium: percent(0.02),
    phosphorus: percent(0.29),
  })
  const oats = feed('oats', 1, 0.2, {
    copper: 0,
    crudeProtein: percent(11),
    calcium: percent(0.1),
    phosphorus: percent(0.44),
  })
  const meal = feed('meal', 1, 0.4, {
    copper: 0,
    crudeProtein: percent(44.1),
    calcium: percent(0.25),
    phosphorus: percent(0.6),
  })
  const nothing = { crudeProtein: 0, calcium: 0, phosphorus: 0, copper: 0 }
  const dicalcium = feed('dical', 1, 0.5, { ...nothing, calcium: percent(24), phosphorus: percent(18.5) })
  const limestone = feed('lime', 1, 0.1, { ...nothing, calcium: percent(38) })
  const salt = feed('salt', 1, 0.1, nothing)
  const trace = feed('trace', 1, 2, nothing)
  const selenium = feed('seleni', 1, 2, nothing)
  const vitamins = feed('vitami', 1, 3, nothing)
  const tylosin = feed('tylosi', 1, 5, nothing)
  const sulfate = feed('cuso', 1, 3, { ...nothing, copper: 250_000 }, { addedCopper: true })
  const filler = feed('filler', 1, 0.1, nothing)
  const slack = [dicalcium, limestone, salt, trace, selenium, vitamins, tylosin, sulfate, filler]
  const perTon = (lb: number) => lb / 2000

  const builder = mix('batch')
    .group({ species: 'pig' })
    .batchOf(convertMass(100, 'lb', 'kg'))
    .with(corn, oats, meal, ...slack)
    .limit(
      exactly('crudeProtein', percent(12.1)),
      exactly('calcium', percent(0.6)),
      exactly('phosphorus', percent(0.5)),
      exactly('copper', 250),
      share(oats, 0.05),
      share(slack, 0.03),
      share(salt, 0.0025),
      share(trace, perTon(2)),
      share(selenium, perTon(1)),
      share(vitamins, perTon(6)),
      // 80 g a ton from an article of 10 g a pound.
      share(tylosin, perTon(80 / 10)),
    )

  it.each([
    { name: 'corn', of: corn, published: 79.3, tolerance: 0.05 },
    { name: 'soybean meal', of: meal, published: 12.7, tolerance: 0.05 },
    { name: 'oats', of: oats, published: 5, tolerance: 1e-9 },
    { name: 'dicalcium phosphate', of: dicalcium, published: 0.92881, tolerance: 0.001 },
    { name: 'limestone', of: limestone, published: 0.85388, tolerance: 0.001 },
    { name: 'copper sulphate', of: sulfate, published: 0.1, tolerance: 1e-9 },
    { name: 'tylosin article', of: tylosin, published: 0.4, tolerance: 1e-9 },
    { name: 'filler', of: filler, published: 0.01731, tolerance: 0.001 },
  ])('holds $published % of $name', async ({ of, published, tolerance }) => {
    within(100 * partOf(await answerTo(builder), of).shareAsFed, published, tolerance)
  })

  it('comes to the published pounds in a ton', async () => {
    const answer = await answerTo(builder.batchOf(kilogramsPer('shortTon')))
    within(pounds(partOf(answer, corn).kgAsFed), 1586, 1)
    within(pounds(partOf(answer, meal).kgAsFed), 254, 1)
    within(pounds(partOf(answer, dicalcium).kgAsFed), 18.576, 0.02)
    within(pounds(partOf(answer, limestone).kgAsFed), 17.078, 0.02)
  })
})

// Simultaneous equations in diet balancing,
// https://slidetodoc.com/simultaneous-equations-diet-balancing-simultaneous-equations-used-to/
it('meets 0.80 lb of protein and 4.0 lb of TDN exactly from two feeds: 4.36 and 1.04 lb', async () => {
  const a = feed('a', 1, 0.2, { crudeProtein: percent(10), totalDigestibleNutrients: percent(80) })
  const b = feed('b', 1, 0.3, { crudeProtein: percent(35), totalDigestibleNutrients: percent(50) })
  const amount = (nutrient: NutrientId, lb: number): LimitInput => {
    const grams = convertMass(lb, 'lb', 'g')
    return { id: nutrient, kind: 'nutrient', nutrient, measure: 'perHeadDay', min: grams, max: grams }
  }
  const answer = await answerTo(
    mix('perHead').with(a, b).limit(amount('crudeProtein', 0.8), amount('totalDigestibleNutrients', 4)),
  )
  within(pounds(partOf(answer, a).kgAsFed), 4.36, 0.02)
  within(pounds(partOf(answer, b).kgAsFed), 1.04, 0.02)
})

describe('hay alone', () => {
  const hay = feed(
    'orchardgrass',
    0.89,
    0.15,
    {
      crudeProtein: percent(12),
      totalDigestibleNutrients: percent(60),
      calcium: percent(0.27),
      phosphorus: percent(0.34),
    },
    { forage: true, class: 'dryForage' },
  )
  const atLeast = (nutrient: NutrientId, lb: number): LimitInput => ({
    id: nutrient,
    kind: 'nutrient',
    nutrient,
    measure: 'perHeadDay',
    min: convertMass(lb, 'lb', 'g'),
  })

  // Penn State Extension, http://bedford.extension.psu.edu/agriculture/lessons/Sheep%20Ration%20Balancing.htm
  it('gives a 150 lb ewe in her last four weeks 2.5 lb of TDN from 4.2 lb of dry matter, 4.68 lb as fed', async () => {
    const answer = await answerTo(mix('perHead').with(hay).limit(atLeast('totalDigestibleNutrients', 2.5)))
    const gramsToPounds = (nutrient: NutrientId) => convertMass(supplyOf(answer, nutrient).amount, 'g', 'lb')
    within(pounds(answer.totals.kgDryMatter), 4.2, 0.05)
    within(pounds(answer.totals.kgAsFed), 4.68, 0.005)
    within(gramsToPounds('crudeProtein'), 0.504, 0.005)
    within(gramsToPounds('calcium'), 0.0113, 0.0001)
    within(gramsToPounds('phosphorus'), 0.0142, 0.0001)
  })

  it('leaves her short of 0.02 lb of calcium within 4.2 lb, and says that the two conflict', async () => {
    const answer = await solveMix(
      mix('perHead')
        .with(hay)
        .limit(atLeast('calcium', 0.02), { id: 'intake', kind: 'intake', max: convertMass(4.2, 'lb', 'kg') })
        .input,
    )
    expect(answer).toMatchObject({
      status: 'infeasible',
      conflict: expect.arrayContaining([
        { limitId: 'calcium', side: 'min' },
        { limitId: 'intake', side: 'max' },
      ]),
    })
  })

  // Penn State Extension, How to balance a ration for mature does,
  // http://extension.psu.edu/courses/meat-goat/nutrition/basic-ration-balancing/how-to-balance-a-ration-for-mature-does
  it('cannot give a 110 lb doe 2.3 lb of TDN within 3.5 lb of dry matter: it takes 9.5 % more', async () => {
    const doe = mix('perHead')
      .group({ species: 'goat' })
      .with(hay)
      .limit(atLeast('totalDigestibleNutrients', 2.3), { id: 'intake', kind: 'intake', max: 3.5 * POUND })
    const answer = await solveMix(doe.input)
    if (answer.status !== 'infeasible') throw new Error(answer.status)
    expect(answer.proof.certified).toBe(true)
    expect(answer.conflict).toHaveLength(2)
    const moreIntake = answer.proposals.find(({ loosenings }) => loosenings[0]!.limitId === 'intake')!
    within(pounds(moreIntake.loosenings[0]!.to), 3.833, 0.002)
    within(moreIntake.loosenings[0]!.to / (3.5 * POUND), 1.095, 0.001)
    const overEating = await answerTo(doe.moved('intake', { max: 3.9 * POUND }))
    within(pounds(overEating.totals.kgDryMatter), 3.8, 0.05)
    within(convertMass(supplyOf(overEating, 'crudeProtein').amount, 'g', 'lb'), 0.456, 0.005)
  })
})

// Montana State University Extension, https://animalrangeextension.montana.edu/beef/articles/mineral-intake.html
describe('copper eaten with forage and a mineral', () => {
  const copperOf = async (forageKg: number, forageMg: number, mineralKg: number, mineralMg: number) => {
    const forage = feed('forage', 1, 0.1, { copper: forageMg }, { forage: true })
    const mineral = feed('mineral', 1, 1, { copper: mineralMg }, { class: 'mineral', addedCopper: true })
    const answer = await answerTo(
      mix('perHead')
        .group({ species: 'beefCattle' })
        .with(mineral)
        .ration(forage, { dryMatterKg: forageKg })
        .limit({ id: 'rate', kind: 'rate', min: mineralKg, max: mineralKg }),
    )
    const dryMatter = answer.totals.kgDryMatter + answer.baseDiet[0]!.kgDryMatter
    return { ...supplyOf(answer, 'copper'), dryMatter }
  }

  it('is 292.8 mg and 22.9 mg/kg from 12.7 kg at 4 ppm and 0.11 kg at 2200 ppm, as the source rounds them', async () => {
    const { amount, fromBaseDiet, perKgDryMatter, dryMatter } = await copperOf(12.7, 4, 0.11, 2200)
    within(fromBaseDiet, 50.8, 0.05)
    within(amount, 292.8, 0.05)
    within(dryMatter, 12.81, 0.005)
    within(perKgDryMatter, 22.9, 0.05)
  })

  it('is 23.4 mg/kg from 28 lb and 4 oz unrounded', async () => {
    const { perKgDryMatter } = await copperOf(28 * POUND, 4, convertMass(4, 'oz', 'kg'), 2200)
    within(perKgDryMatter, 23.4, 0.05)
  })

  it('is 158.7 mg and 11.48 mg/kg from 30 lb at 10 ppm and half a pound at 0.01 %', async () => {
    const { amount, perKgDryMatter, dryMatter } = await copperOf(30 * POUND, 10, 0.5 * POUND, 100)
    within(amount, 158.7, 0.5)
    within(dryMatter, 13.83, 0.01)
    within(perKgDryMatter, 11.48, 0.01)
  })
})

// Oregon State University, ANS 312, https://courses.ecampus.oregonstate.edu/ans312/six/ration_2_trans.htm
it('turns pasture of 80 % water from as fed into dry: 20 lb of dry matter, protein 20, carbohydrate 65, ash 10, fat 5 %', async () => {
  const asFed = { crudeProtein: 4, nonFiberCarbohydrate: 13, ash: 2, crudeFat: 1 } as const
  const dry = { crudeProtein: 20, nonFiberCarbohydrate: 65, ash: 10, crudeFat: 5 } as const
  const nutrientIds = Object.keys(dry) as (keyof typeof dry)[]
  const values = Object.fromEntries(nutrientIds.map((id) => [id, percent(dry[id])]))
  const pasture = feed('pasture', 0.2, 0.02, values, { forage: true, class: 'wetForage' })
  const reading = (id: NutrientId): LimitInput => ({
    id,
    kind: 'nutrient',
    nutrient: id,
    measure: 'perKgAsFed',
    min: 0,
  })
  const answer = await answerTo(
    mix('batch')
      .batchOf(convertMass(20, 'lb', 'kg'))
      .with(pasture)
      .limit(...nutrientIds.map(reading)),
  )
  within(pounds(answer.totals.kgAsFed), 100, 1e-9)
  for (const id of nutrientIds) {
    within(answer.limits.find(({ limitId }) => limitId === id)!.value, percent(asFed[id]), 1e-9)
    within(supplyOf(answer, id).perKgDryMatter, percent(dry[id]), 1e-9)
  }
})

// Alabama Cooperative Extension System, https://www.aces.edu/blog/topics/beef/by-product-feeds-quick-reference-guide/
it('prices soybean hulls of 90 % dry matter, 75 % TDN and 12 % protein at $180 a ton: $0.13 a pound of TDN, $0.833 of protein', async () => {
  const perKg = Number(pricePerKg('180', packageWeightKg(1, 'shortTon')!))
  const hulls = feed('hulls', 0.9, perKg, {
    totalDigestibleNutrients: percent(75),
    crudeProtein: percent(12),
  })
  const answer = await answerTo(
    mix('batch')
      .batchOf(0.9 * kilogramsPer('shortTon'))
      .with(hulls),
  )
  const poundsOf = (nutrient: NutrientId) => convertMass(supplyOf(answer, nutrient).amount, 'g', 'lb')
  within(answer.cost.mix, 180, 0.001)
  within(poundsOf('totalDigestibleNutrients'), 1350, 1e-6)
  within(answer.cost.mix / poundsOf('totalDigestibleNutrients'), 0.1333, 0.0001)
  within(poundsOf('crudeProtein'), 216, 1e-6)
  within(answer.cost.mix / poundsOf('crudeProtein'), 0.833, 0.0005)
})

// UF/IFAS Extension, https://blogs.ifas.ufl.edu/calhounco/2024/11/05/minimizing-round-bale-hay-waste
it('feeds a 1200 lb cow 2 % of her weight for 150 days: 1.8 tons dry, 2.05 as fed, 2.56 bought where a fifth is wasted', async () => {
  const hay = feed('hay', 0.88, 0.1, {}, { forage: true, class: 'dryForage' })
  const salt = feed('salt', 1, 0.3)
  const answer = await answerTo(
    mix('perHead')
      .group({ species: 'beefCattle' })
      .with(salt)
      .ration(hay, { dryMatterKg: 0.02 * convertMass(1200, 'lb', 'kg'), wasteShare: 0.2 }),
  )
  const [eaten] = answer.baseDiet
  const tons = (perDay: number) => convertMass(150 * perDay, 'kg', 'shortTon')
  within(pounds(eaten!.kgDryMatter), 24, 1e-9)
  within(tons(eaten!.kgDryMatter), 1.8, 1e-9)
  within(tons(eaten!.kgAsFed), 2.05, 0.005)
  within(tons(eaten!.kgOffered), 2.56, 0.005)
  expect(answer.cost.baseDiet).toBeCloseTo(0.1 * eaten!.kgOffered, 12)
})
