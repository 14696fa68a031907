import type { FormulationInput, Limit, NutrientId, SolverFeed } from '@maslin/shared'

/**
 * What a limit reads for a given mix, worked out feed by feed in plain arithmetic: the tests' own reading of the
 * definitions, which shares nothing with the program builder.
 */

interface Eaten {
  feed: SolverFeed
  dry: number
  inMix: boolean
}

/** @param kgAsFed of each feed, in the batch or per head and day */
export function eatenWith(input: FormulationInput, kgAsFed: Map<string, number>): Eaten[] {
  const mix = input.feeds.map((feed) => ({
    feed,
    dry: (kgAsFed.get(feed.id) ?? 0) * feed.dryMatter,
    inMix: true,
  }))
  if (input.basis === 'batch') return mix
  const filling = mix.filter(({ feed }) => !['mineral', 'premix'].includes(feed.class))
  const supplement = filling.reduce((sum, part) => sum + part.dry, 0)
  const base = input.baseDiet.flatMap((item) => {
    if (input.basis === 'perHead' && item.mode === 'freeChoice') return []
    const feed = input.baseFeeds.find(({ id }) => id === item.feedId)!
    const givenUp = item.mode === 'freeChoice' ? item.substitutionRate * supplement : 0
    return [{ feed, dry: item.dryMatterKg - givenUp, inMix: false }]
  })
  return [...mix, ...base]
}

function content(
  input: FormulationInput,
  feed: SolverFeed,
  nutrient: NutrientId,
  end: 'low' | 'high',
): number {
  const known = feed.values[nutrient]
  if (known) return end === 'low' ? (known.low ?? known.value) : (known.high ?? known.value)
  if (end === 'low') return 0
  return (input.assumedHighs[feed.class]?.[nutrient] ?? input.assumedHighs.any?.[nutrient])?.value ?? 0
}

/** The reading as a minimum counts it and as a maximum does. */
export function readingsOf(
  input: FormulationInput,
  limit: Limit,
  kgAsFed: Map<string, number>,
): { low: number; high: number } {
  const eaten = eatenWith(input, kgAsFed)
  const mix = eaten.filter((part) => part.inMix)
  const dry = (parts: Eaten[]): number => parts.reduce((sum, part) => sum + part.dry, 0)
  const wet = (parts: Eaten[]): number => parts.reduce((sum, part) => sum + part.dry / part.feed.dryMatter, 0)
  const amount = (parts: Eaten[], nutrient: NutrientId, end: 'low' | 'high'): number =>
    parts.reduce((sum, part) => sum + part.dry * content(input, part.feed, nutrient, end), 0)
  const heads = input.basis === 'batch' ? input.batchDryMatterKg / input.group.intakeDryMatterKg : 1
  const ratio = (a: number, b: number): number => (b > 0 ? a / b : a > 0 ? 1e9 : 0)
  const read = (end: 'low' | 'high'): number => {
    switch (limit.kind) {
      case 'nutrient':
        if (limit.measure === 'perHeadDay') return amount(eaten, limit.nutrient, end) / heads
        if (limit.measure === 'perKgDryMatter') return ratio(amount(eaten, limit.nutrient, end), dry(eaten))
        return ratio(amount(mix, limit.nutrient, end), wet(mix))
      case 'ratio':
        return ratio(
          amount(eaten, limit.numerator, end),
          amount(eaten, limit.denominator, end === 'low' ? 'high' : 'low'),
        )
      case 'feeds': {
        const whole = limit.within === 'mix' ? mix : eaten
        const { of } = limit
        const chosen = whole.filter(({ feed }) =>
          of.by === 'feeds'
            ? of.feedIds.includes(feed.id)
            : of.by === 'forage'
              ? feed.forage
              : feed.class === of.class,
        )
        if (limit.measure === 'kgDryMatter') return dry(chosen)
        if (limit.measure === 'kgAsFed') return wet(chosen)
        return limit.measure === 'shareOfDryMatter'
          ? ratio(dry(chosen), dry(whole))
          : ratio(wet(chosen), wet(whole))
      }
      case 'intake':
        return dry(eaten) / heads
      case 'rate':
        return wet(mix) / heads
    }
  }
  return { low: read('low'), high: read('high') }
}
