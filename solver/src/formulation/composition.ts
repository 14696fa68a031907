import type { FeedClass, FormulationInput, NutrientId, SolverFeed } from '@maslin/shared'

/** Which end of a feed's value a row counts: the one that is unsafe for the row. */
export type End = 'low' | 'high'

/** A feed's content of a nutrient as a row counts it, per kg of dry matter in the nutrient's unit. */
export interface Counted {
  value: number
  /** Nothing is known of it: the low end counts it as zero, the high end takes an assumed value. */
  unknown: boolean
}

/**
 * Figures below this are nothing: a picogram in a kilogram. Kept as they are they would only spoil the arithmetic of the
 * rows they stand in.
 */
export const NEGLIGIBLE = 1e-12
export const orNothing = (value: number): number => (value < NEGLIGIBLE ? 0 : value)

/** Reads contents of feeds; the same for every row of a program. */
export type Composition = (feed: SolverFeed, nutrient: NutrientId, end: End) => Counted

/**
 * How contents are counted: a known value as it is, an interval at the end asked for, an unknown one as zero at the
 * low end and as the assumed high value at the high end (of the feed's class, else of the whole library, else the
 * highest known among the feeds at hand, of its class first; where not even that exists zero, and the limit cannot be checked).
 */
export function compositionOf(input: FormulationInput): Composition {
  const highestKnown = new Map<string, number>()
  /** The highest known value at hand: of the feed's own class, else of any. */
  const highestOf = (nutrient: NutrientId, feedClass: FeedClass): number => {
    const key = `${feedClass} ${nutrient}`
    const before = highestKnown.get(key)
    if (before !== undefined) return before
    const known = [...input.feeds, ...input.baseFeeds].filter((feed) => feed.values[nutrient])
    const ofClass = known.filter((feed) => feed.class === feedClass)
    const highest = (ofClass.length > 0 ? ofClass : known).reduce((most, feed) => {
      const { value, high = value } = feed.values[nutrient]!
      return Math.max(most, value, high)
    }, 0)
    highestKnown.set(key, highest)
    return highest
  }
  return (feed, nutrient, end) => {
    const known = feed.values[nutrient]
    if (known)
      return {
        value: orNothing(
          end === 'low'
            ? Math.min(known.value, known.low ?? known.value)
            : Math.max(known.value, known.high ?? known.value),
        ),
        unknown: false,
      }
    if (end === 'low') return { value: 0, unknown: true }
    const assumed = input.assumedHighs[feed.class]?.[nutrient] ?? input.assumedHighs.any?.[nutrient]
    return { value: orNothing(assumed?.value ?? highestOf(nutrient, feed.class)), unknown: true }
  }
}
