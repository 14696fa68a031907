import type { FeedClass, NutrientId } from '@maslin/shared'
import type { AssumedHigh } from './types'

/**
 * What an unknown value of a feed is taken as where a maximum counts it, per kg of dry matter: the row of its class,
 * else that of the whole library. Undefined where the library knows no value of the nutrient at all.
 */
export function assumedHigh(
  table: readonly AssumedHigh[],
  feedClass: FeedClass,
  nutrient: NutrientId,
): AssumedHigh | undefined {
  const find = (wanted: AssumedHigh['class']) =>
    table.find((row) => row.class === wanted && row.nutrient === nutrient)
  return find(feedClass) ?? find('any')
}
