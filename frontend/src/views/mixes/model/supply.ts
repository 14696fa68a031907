import type { Limit, OptimalAnswer } from '@maslin/shared'
import { limitName, measureOf, type FeedName } from './measures'
import type { Words } from './words'

/** One need with what each feed brings to it, the base diet first. Figures are percent of the limit. */
export interface SupplyStrip {
  limitId: string
  name: string
  side: 'min' | 'max'
  /** Where the diet lies, in words with unit and basis. */
  valueText: string
  /** Percent of the limit that is reached, all feeds together. */
  reached: number
  parts: { feedId: string; base: boolean; percent: number }[]
}

/** Strips for the nutrient limits of an answer, in the order of the limits. Ratios and feed limits have no strip. */
export function supplyStrips(
  answer: OptimalAnswer,
  limits: readonly Limit[],
  basis: Parameters<typeof measureOf>[1],
  nameOf: FeedName,
  words: Words,
): SupplyStrip[] {
  return limits.flatMap((limit): SupplyStrip[] => {
    if (limit.kind !== 'nutrient' || !limit.enabled) return []
    const result = answer.limits.find((one) => one.limitId === limit.id)
    const supply = answer.supply.find((one) => one.nutrient === limit.nutrient)
    const side = limit.min === undefined ? 'max' : 'min'
    const bound = limit[side]
    if (!result || !supply || !bound || supply.amount <= 0) return []
    const measure = measureOf(limit, basis, words)
    const reached = (result.value / bound) * 100
    const parts = supply.parts
      .filter((part) => part.amount > 0)
      .map((part) => ({
        feedId: part.feedId,
        base: part.base,
        percent: (part.amount / supply.amount) * reached,
      }))
    return [
      {
        limitId: limit.id,
        name: limitName(limit, nameOf, words),
        side,
        valueText: `${measure.text(result.value)} ${measure.basis}`.trim(),
        reached,
        parts: [...parts.filter((part) => part.base), ...parts.filter((part) => !part.base)],
      },
    ]
  })
}
