import { nutrientIds, speciesList, type FormulationInput, type LimitInput } from '@maslin/shared'
import fc from 'fast-check'
import { feed, mix } from './builders'

/** Inputs within the schema, many of them senseless: extreme figures, contradictions, names of feeds that are not there. */

const nutrients = ['crudeProtein', 'metabolizableEnergy', 'calcium', 'phosphorus', 'copper'] as const
const amount = fc.oneof(
  fc.constantFrom(0, 1e-9, 1e-3, 1, 50, 1e3, 1e9),
  fc.double({ min: 0, max: 1000, noNaN: true }),
)
const share = fc.oneof(fc.constantFrom(0.01, 0.5, 1), fc.double({ min: 0.01, max: 1, noNaN: true }))

const feedArbitrary = (name: string) =>
  fc
    .record({
      dryMatter: share,
      price: fc.option(
        fc.oneof(fc.constantFrom(0, 1e-6, 0.2, 1e7), fc.double({ min: 0, max: 2, noNaN: true })),
        {
          nil: undefined,
        },
      ),
      values: fc.dictionary(fc.constantFrom(...nutrients), amount, { maxKeys: nutrients.length }),
      forage: fc.boolean(),
      ruminantOrigin: fc.constantFrom('no', 'no', 'no', 'yes', 'exempt'),
      nonProteinNitrogen: fc.constantFrom(0, 0, 0, 1),
      addedCopper: fc.constantFrom(false, false, true),
      ionophore: fc.constantFrom(false, false, true),
    })
    .map(({ dryMatter, price, values, ...flags }) =>
      feed(name, dryMatter, price, values, flags as Partial<ReturnType<typeof feed>>),
    )

const bounds = fc
  .tuple(fc.option(amount, { nil: undefined }), fc.option(amount, { nil: undefined }))
  .map(([a, b]) => {
    if (a === undefined && b === undefined) return { min: 1 }
    if (a === undefined || b === undefined) return a === undefined ? { max: b } : { min: a }
    return { min: Math.min(a, b), max: Math.max(a, b) }
  })

const limitArbitrary = (id: string, feedIds: string[]): fc.Arbitrary<LimitInput> => {
  const nutrient = fc.constantFrom(...nutrients)
  const ids = fc.uniqueArray(fc.constantFrom(...feedIds, '00000000-0000-4000-8000-00000000dead'), {
    minLength: 1,
    maxLength: 4,
  })
  return fc
    .tuple(
      fc.oneof(
        fc.record({
          kind: fc.constant('nutrient' as const),
          nutrient,
          measure: fc.constantFrom('perHeadDay' as const, 'perKgDryMatter' as const, 'perKgAsFed' as const),
        }),
        fc.record({ kind: fc.constant('ratio' as const), numerator: nutrient, denominator: nutrient }),
        fc.record({
          kind: fc.constant('feeds' as const),
          of: fc.oneof(
            ids.map((feedIds) => ({ by: 'feeds' as const, feedIds })),
            fc.constant({ by: 'forage' as const }),
            fc.constant({ by: 'class' as const, class: 'grain' as const }),
          ),
          measure: fc.constantFrom(
            'shareOfDryMatter' as const,
            'shareAsFed' as const,
            'kgDryMatter' as const,
            'kgAsFed' as const,
          ),
          within: fc.constantFrom('mix' as const, 'diet' as const),
        }),
        fc.record({ kind: fc.constantFrom('intake' as const, 'rate' as const) }),
      ),
      bounds,
      fc.boolean(),
    )
    .map(([what, range, negotiable]) => ({ id, ...what, ...range, negotiable }))
}

export const wildInput: fc.Arbitrary<FormulationInput> = fc
  .tuple(
    fc.constantFrom('batch' as const, 'perHead' as const, 'besideForage' as const),
    fc.tuple(...['f0', 'f1', 'f2', 'f3', 'f4'].map(feedArbitrary)),
    fc.integer({ min: 0, max: 5 }),
    feedArbitrary('hay'),
    fc.record({
      species: fc.constantFrom(...speciesList),
      young: fc.boolean(),
      equidsCanReach: fc.boolean(),
      intakeDryMatterKg: fc.constantFrom(0.005, 2, 60),
    }),
    fc.constantFrom(0.1, 1000, 1e6),
    fc.record({
      mode: fc.constantFrom('fixed' as const, 'freeChoice' as const),
      dryMatterKg: fc.constantFrom(0, 1.4, 100),
      wasteShare: fc.constantFrom(0, 0.9),
      substitutionRate: fc.constantFrom(0, 0.6, 1, 1.5),
    }),
    fc.boolean(),
  )
  .chain(([basis, feeds, used, hay, group, batch, item, assume]) => {
    const chosen = feeds.slice(0, used)
    const ids = [...feeds, hay].map((entry) => entry.id)
    return fc
      .tuple(...['a', 'b', 'c', 'd', 'e', 'f'].map((id) => limitArbitrary(id, ids)))
      .chain((limits) => fc.tuple(fc.constant(limits), fc.integer({ min: 0, max: limits.length })))
      .map(([limits, count]) => {
        let built = mix(basis)
          .with(...chosen)
          .group(group)
          .batchOf(batch)
        if (basis !== 'batch') built = built.eaten(hay, item)
        if (assume)
          built = built.assume({
            any: Object.fromEntries(nutrientIds.map((id) => [id, { value: 100, basis: 'invented' }])),
          })
        return built.limit(...limits.slice(0, count)).input
      })
  })
