import type { LeftOut, SolverFeed } from '@maslin/shared'
import { packageOf, priceText } from './prices'
import { rich, strong, type Run, type Words } from './words'

/** How far today's price has to fall for a feed to come in, as a part of it; Infinity where it never does. */
export function distance(out: LeftOut): number {
  if (out.buyInPrice === undefined || out.pricePerKg === undefined || out.pricePerKg <= 0) return Infinity
  return (out.pricePerKg - out.buyInPrice) / out.pricePerKg
}

/** Feeds that are out by price alone, nearest to coming in first. */
export const nearestFirst = (list: readonly LeftOut[]): LeftOut[] =>
  [...list].sort((a, b) => distance(a) - distance(b))

/** Left-out feeds by the feed they would replace; those that would replace none, or never come in, under `''`. */
export function byReplaced(list: readonly LeftOut[]): Map<string, LeftOut[]> {
  const groups = new Map<string, LeftOut[]>()
  for (const out of nearestFirst(list)) {
    const key = out.reason === 'price' && out.buyInPrice !== undefined ? (out.replaces ?? '') : ''
    groups.set(key, [...(groups.get(key) ?? []), out])
  }
  return groups
}

/**
 * Why a feed is not in the mix: `Barley is worth buying below $7.43 / 50 lb, then 34 % of the mix; now $11.40.`, or the
 * animal rule or the missing price that keeps it out.
 * @param keptOut the keeper's own limit holds it at nothing
 */
export function leftOutSentence(
  out: LeftOut,
  feed: SolverFeed | undefined,
  words: Words,
  keptOut = false,
): Run[] {
  const name = strong(feed?.name ?? '')
  if (keptOut) return rich(words, 'mixes.leftOut.keptOut', { name })
  if (out.reason !== 'price') return rich(words, `mixes.leftOut.${out.reason}`, { name })
  const size = packageOf(feed, words)
  const now = out.pricePerKg === undefined ? '' : priceText(out.pricePerKg, size, words)
  if (out.buyInPrice === undefined) return rich(words, 'mixes.leftOut.never', { name, now })
  const parts = { name, below: strong(priceText(out.buyInPrice, size, words)), now }
  if (out.thenShareAsFed === undefined) return rich(words, 'mixes.leftOut.price', parts)
  const share = words.q.percent(out.thenShareAsFed, out.thenShareAsFed < 0.01 ? 1 : 0)
  // A feed that comes in by traces only is not worth a figure that reads as nothing.
  if (out.thenShareAsFed < 0.0005) return rich(words, 'mixes.leftOut.priceTrace', parts)
  return rich(words, 'mixes.leftOut.priceThen', { ...parts, share })
}
