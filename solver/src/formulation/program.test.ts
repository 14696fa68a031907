import { describe, expect, it } from 'vitest'
import { DRY_MATTER_ROW, buildProgram, type Formulation } from './program'
import { feed, idOf, mix, type MixBuilder } from './testing/builders'
import { kilogramsOf, leastCost, mixed } from './testing/leastCost'

const barley = feed('barley', 0.88, 0.25, { crudeProtein: 120, metabolizableEnergy: 3 })
const meal = feed('meal', 0.9, 0.5, { crudeProtein: 480, metabolizableEnergy: 3 })

function formulated({ input }: MixBuilder): Formulation {
  const built = buildProgram(input)
  if (!built.ok) throw new Error(JSON.stringify(built.reasons))
  return built.formulation
}

describe('wet feeds', () => {
  const dry = feed('dry', 0.9, 0.2, { crudeProtein: 120 })
  const wet = feed('wet', 0.2, 0.05, { crudeProtein: 120 })

  it('fixes the dry matter of a batch, so that a feed that is cheap only because it is wet does not win', async () => {
    const answer = await mixed(mix('batch').with(dry, wet))
    expect(answer.blend.map((part) => part.feedId)).toEqual([dry.id])
    expect(answer.totals.kgDryMatter).toBeCloseTo(1000, 9)
    expect(answer.totals.kgAsFed).toBeCloseTo(1000 / 0.9, 9)
    expect(answer.cost.mixPerKgDryMatter).toBeCloseTo(0.2 / 0.9, 12)
  })

  it('says at which price as fed the wet feed would come in: its dry matter at the price of the dry one', async () => {
    const answer = await mixed(mix('batch').with(dry, wet))
    expect(answer.leftOut).toEqual([
      {
        feedId: wet.id,
        reason: 'price',
        pricePerKg: 0.05,
        buyInPrice: expect.closeTo((0.2 / 0.9) * 0.2, 12),
        thenShareAsFed: 1,
        replaces: dry.id,
      },
    ])
  })

  it('has no column for water', () => {
    const { program } = formulated(mix('batch').with(dry, wet))
    expect(program.columns.map(({ id }) => id)).toEqual([dry.id, wet.id])
    expect(program.rows.map(({ id }) => id)).toEqual([DRY_MATTER_ROW])
  })
})

describe('change of basis', () => {
  const base = mix('batch').with(barley, meal)
  const atLeast = (measure: 'perKgDryMatter' | 'perHeadDay', min: number) =>
    base.limit({ id: 'cp', kind: 'nutrient', nutrient: 'crudeProtein', measure, min })

  it('takes a need per head and day in a batch by the intake of the group', async () => {
    expect(await leastCost(atLeast('perHeadDay', 400))).toBeCloseTo(
      (await leastCost(atLeast('perKgDryMatter', 200)))!,
      9,
    )
  })

  it('takes a limit as fed as the same limit on dry matter where every feed is as dry as the other', async () => {
    const feeds = [barley, meal].map((entry) => ({ ...entry, dryMatter: 0.9 }))
    const on = (measure: 'perKgAsFed' | 'perKgDryMatter', min: number) =>
      leastCost(
        mix('batch')
          .with(...feeds)
          .limit({ id: 'cp', kind: 'nutrient', nutrient: 'crudeProtein', measure, min }),
      )
    expect(await on('perKgAsFed', 180)).toBeCloseTo((await on('perKgDryMatter', 200))!, 9)
  })

  it('gives a batch of any size the same shares, and kilograms and cost in proportion', async () => {
    const limits = atLeast('perKgDryMatter', 200)
    const large = await mixed(limits.batchOf(1000))
    const small = await mixed(limits.batchOf(50))
    expect(small.blend.map((part) => part.shareAsFed)).toEqual(
      large.blend.map((part) => expect.closeTo(part.shareAsFed, 12)),
    )
    expect(small.totals.kgDryMatter).toBeCloseTo(50, 9)
    expect(small.cost.least).toBeCloseTo(large.cost.least / 20, 9)
    expect(small.cost.perHeadDay).toBeCloseTo(large.cost.perHeadDay, 12)
    expect(small.limits[0]!.raise!.perUnit! * 20).toBeCloseTo(large.limits[0]!.raise!.perUnit!, 9)
  })

  it('holds kilograms of a feed to the batch as it is mixed, not as it is solved', async () => {
    const answer = await mixed(
      base.batchOf(50).limit({
        id: 'm',
        kind: 'feeds',
        of: { by: 'feeds', feedIds: [meal.id] },
        measure: 'kgAsFed',
        min: 7,
        max: 7,
      }),
    )
    expect(kilogramsOf(answer, meal.id)).toBeCloseTo(7, 9)
    expect(answer.limits[0]).toMatchObject({ value: 7, state: 'costs', bindingSide: 'min' })
  })

  it('finds the same diet per head as in a batch of one intake', async () => {
    const need = {
      id: 'cp',
      kind: 'nutrient',
      nutrient: 'crudeProtein',
      measure: 'perHeadDay',
      min: 400,
    } as const
    const perHead = await mixed(
      mix('perHead').with(barley, meal).limit(need, { id: 'intake', kind: 'intake', min: 2, max: 2 }),
    )
    const batch = await mixed(mix('batch').with(barley, meal).limit(need))
    expect(perHead.cost.perHeadDay).toBeCloseTo(batch.cost.perHeadDay, 9)
    expect(perHead.totals.kgDryMatter).toBeCloseTo(2, 9)
  })
})

describe('rows', () => {
  const both = { min: 100, max: 300 }

  it('holds both ends of an amount in one row, and of a quotient whose size may change in two', () => {
    const nutrient = { kind: 'nutrient', nutrient: 'crudeProtein', ...both } as const
    const rowIds = (measure: 'perKgDryMatter' | 'perKgAsFed') =>
      formulated(
        mix('batch')
          .with(barley, meal)
          .limit({ id: 'cp', measure, ...nutrient }),
      ).program.rows.map(({ id }) => id)
    expect(rowIds('perKgDryMatter')).toEqual([DRY_MATTER_ROW, 'both:cp'])
    expect(rowIds('perKgAsFed')).toEqual([DRY_MATTER_ROW, 'min:cp', 'max:cp'])
  })

  it('makes a fixed amount one equality', () => {
    const { program, sides } = formulated(
      mix('batch').with(barley, meal).limit({
        id: 'cp',
        kind: 'ratio',
        numerator: 'crudeProtein',
        denominator: 'metabolizableEnergy',
        min: 50,
        max: 50,
      }),
    )
    expect(program.rows.map(({ id, lower, upper }) => [id, lower, upper])[1]).toEqual(['both:cp', 0, 0])
    expect(sides.map(({ rowSide }) => rowSide)).toEqual(['equal', 'equal'])
  })

  it('does not count a feed that lies on the limit by itself, where rounding would leave something of it', () => {
    const [low, high] = [0.1 + 0.2, 0.3]
    const feeds = [
      feed('even', 0.7, 0.2, { calcium: low, phosphorus: 1 }),
      feed('rich', 0.9, 0.3, { calcium: 5, phosphorus: 1 }),
    ]
    const { program } = formulated(
      mix('batch')
        .with(...feeds)
        .limit({ id: 'ratio', kind: 'ratio', numerator: 'calcium', denominator: 'phosphorus', min: high }),
    )
    expect(low).not.toBe(high)
    expect(program.rows[1]!.entries.map(([column]) => column)).toEqual([1])
  })

  it('leaves out limits that are switched off', () => {
    const off = {
      id: 'cp',
      kind: 'nutrient',
      nutrient: 'crudeProtein',
      measure: 'perKgDryMatter',
      min: 900,
      enabled: false,
    } as const
    expect(formulated(mix('batch').with(barley).limit(off)).sides).toEqual([])
  })
})

describe('feeds that may not go in', () => {
  it('keeps them out by the animal rules, whatever they cost, and says why', async () => {
    const copperMineral = feed('copper', 0.99, 0.01, { crudeProtein: 500 }, { addedCopper: true })
    const boneMeal = feed('bone', 0.95, 0.01, { crudeProtein: 500 }, { ruminantOrigin: 'yes' })
    const urea = feed('urea', 0.99, 0.01, { crudeProtein: 2800 }, { nonProteinNitrogen: 1 })
    const coccidiostat = feed('monensin', 0.99, 0.01, {}, { ionophore: true })
    const noPrice = feed('free', 0.9, undefined, { crudeProtein: 500 })
    const answer = await mixed(
      mix('batch')
        .group({ equidsCanReach: true })
        .with(barley, copperMineral, boneMeal, urea, coccidiostat, noPrice),
    )
    expect(answer.blend.map((part) => part.feedId)).toEqual([barley.id])
    expect(Object.fromEntries(answer.leftOut.map(({ feedId, reason }) => [feedId, reason]))).toEqual({
      [copperMineral.id]: 'addedCopper',
      [boneMeal.id]: 'ruminantOrigin',
      [urea.id]: 'nonProteinNitrogen',
      [coccidiostat.id]: 'ionophore',
      [noPrice.id]: 'noPrice',
    })
    expect(answer.cautions.map(({ code }) => code)).toContain('addedCopperLeftOut')
  })

  it('warns where a lowered limit leaves the animals short of their need, in every basis', async () => {
    const energy = feed('energy', 0.9, 0.2, { metabolizableEnergy: 3 })
    const filler = feed('filler', 0.9, 0.05, { metabolizableEnergy: 1 })
    const needs = [
      {
        nutrient: 'metabolizableEnergy',
        kind: 'min',
        perHeadDay: 4,
        source: 'a table',
        status: 'read',
      } as const,
    ]
    const cautionsAt = async (basis: 'batch' | 'perHead', perHeadDay: number) => {
      const limit = {
        id: 'me',
        kind: 'nutrient',
        nutrient: 'metabolizableEnergy',
        measure: 'perHeadDay',
      } as const
      const intake = { id: 'intake', kind: 'intake', min: 2, max: 2 } as const
      const made = mix(basis).group({ species: 'goat', needs, intakeDryMatterKg: 2 }).with(energy, filler)
      const { cautions } = await mixed(made.limit({ ...limit, min: perHeadDay }, intake))
      return cautions.map(({ code, level, params }) => ({ code, level, params }))
    }
    for (const basis of ['batch', 'perHead'] as const) {
      expect(await cautionsAt(basis, 4), basis).toEqual([])
      expect(await cautionsAt(basis, 3), basis).toEqual([
        {
          code: 'belowNeed',
          level: 'acknowledge',
          params: { nutrient: 'metabolizableEnergy', share: expect.closeTo(0.75, 9) as number },
        },
      ])
    }
  })

  it('stops where tested lots alone bring too much copper, whatever book feeds stand beside them', async () => {
    const tested = feed('tested', 0.9, 0.1, {})
    tested.values.copper = { value: 30, status: 'laboratory' }
    const book = feed('book', 0.9, 0.2, { copper: 2 })
    const of = { by: 'feeds' as const, feedIds: [tested.id] }
    const levelAt = async (share: number) => {
      const exactly = {
        id: 'half',
        kind: 'feeds',
        measure: 'shareOfDryMatter',
        min: share,
        max: share,
      } as const
      const sheep = mix('batch').group({ species: 'sheep' }).with(tested, book)
      return (await mixed(sheep.limit({ ...exactly, of }))).cautions.map(({ code }) => code)
    }
    expect(await levelAt(0.6)).toEqual(['copperBlock'])
    expect(await levelAt(0.4)).toEqual(['copperWarn'])
  })

  // Greatest safe copper for sheep and where a look is due: the figures and their sources stand beside the thresholds.
  it.each([
    { copper: 9.9, code: 'copperLow', limit: 10 },
    { copper: 10.1, code: 'copperWarn', limit: 10 },
    { copper: 14.9, code: 'copperWarn', limit: 10 },
    { copper: 15.1, code: 'copperAcknowledge', limit: 15 },
  ])('says $code of book values of $copper mg copper per kg of dry matter for sheep', async (given) => {
    const { cautions } = await mixed(mix('batch').with(feed('natural', 0.9, 0.1, { copper: given.copper })))
    expect(cautions).toMatchObject([
      { code: given.code, params: { totalPerKg: expect.closeTo(given.copper, 9), limit: given.limit } },
    ])
  })

  it('warns of natural copper in a diet for sheep and shows how much of it is assumed', async () => {
    const rich = feed('rich', 0.9, 0.2, { copper: 18 })
    const unknown = feed('unknown', 0.9, 0.1)
    const half = { kind: 'feeds', measure: 'shareOfDryMatter', within: 'mix', min: 0.5 } as const
    const answer = await mixed(
      mix('batch')
        .with(rich, unknown)
        .assume({ any: { copper: { value: 6, basis: 'invented' } } })
        .limit({ id: 'rich', of: { by: 'feeds', feedIds: [rich.id] }, ...half }),
    )
    expect(answer.cautions).toMatchObject([
      {
        code: 'copperWarn',
        params: { totalPerKg: expect.closeTo(12, 9), assumedShare: expect.closeTo(0.25, 9) },
      },
    ])
    expect((await mixed(mix('batch').group({ species: 'goat' }).with(rich))).cautions).toEqual([])
  })
})

describe('inputs that cannot be solved', () => {
  const invalid = (builder: MixBuilder) => {
    const built = buildProgram(builder.input)
    return built.ok ? [] : built.reasons.map(({ code }) => code)
  }

  it.each([
    { name: 'no feeds', given: mix('batch'), expected: ['noFeeds'] },
    {
      name: 'no feed with a price',
      given: mix('batch').with(feed('a', 0.9, undefined)),
      expected: ['noPricedFeeds'],
    },
    { name: 'one feed twice', given: mix('batch').with(barley, barley), expected: ['badNumber'] },
    { name: 'no base diet beside forage', given: mix('besideForage').with(barley), expected: ['noBaseDiet'] },
    {
      name: 'a limit as fed beside forage',
      given: mix('besideForage')
        .with(barley)
        .beside(feed('hay', 0.9, 0.1), { dryMatterKg: 1 })
        .limit({ id: 'x', kind: 'nutrient', nutrient: 'calcium', measure: 'perKgAsFed', min: 1 }),
      expected: ['badLimit'],
    },
    {
      name: 'two limits with one id',
      given: mix('batch')
        .with(barley)
        .limit({ id: 'x', kind: 'intake', max: 3 }, { id: 'x', kind: 'rate', max: 3 }),
      expected: ['badLimit'],
    },
  ])('says so of $name', ({ given, expected }) => {
    expect(invalid(given)).toEqual(expected)
  })

  it('says which feed of the base diet is not known', () => {
    const { input } = mix('besideForage')
      .with(barley)
      .beside(feed('hay', 0.9, 0.1), { dryMatterKg: 1 })
    const built = buildProgram({ ...input, baseFeeds: [] })
    expect(built).toMatchObject({ ok: false, reasons: [{ code: 'unknownFeed', feedId: idOf('hay') }] })
  })
})
