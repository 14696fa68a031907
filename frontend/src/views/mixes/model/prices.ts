import type { Offer, PackageUnit, SolverFeed } from '@maslin/shared'
import { packageUnits } from '@maslin/shared'
import { Decimal } from 'decimal.js'
import type { Words } from './words'

/** The package that a feed's price is told for: its offer's, else one pound or kilogram as the farm weighs. */
export interface PricePackage {
  quantity: number
  unit: PackageUnit
  kg: number
}

export function packageOf(feed: SolverFeed | undefined, words: Words): PricePackage {
  const origin = feed?.priceOrigin
  const unit = packageUnits.find((one) => one === origin?.packageUnit)
  if (origin && unit && origin.packageKg > 0) {
    return { quantity: origin.packageQuantity, unit, kg: origin.packageKg }
  }
  return { quantity: 1, unit: words.q.weightUnit.value, kg: words.q.storedWeight(1) }
}

/** A price per kg as fed as people read it: `$9.20 / 50 lb`. */
export function priceText(perKg: number, size: PricePackage, words: Words): string {
  const price = perKg * size.kg
  return Math.abs(price) < 1
    ? `${words.q.money(price)} / ${size.quantity === 1 ? words.q.unitLabel(size.unit) : words.q.packageText(size.quantity, size.unit)}`
    : words.q.packagePrice(price, size.quantity, size.unit)
}

/** The figure alone, for the ends of a window beside a price that names the package. */
export const priceFigure = (perKg: number, size: PricePackage, words: Words): string =>
  words.q.money(perKg * size.kg, Math.abs(perKg * size.kg) < 1 ? {} : { maximumFractionDigits: 2 })

/**
 * A typed price as a draft keeps it.
 * @param price decimal string per package
 * @param packageKg weight of the package, kg as fed
 * @returns currency per kg as fed, a decimal string with at most six places
 */
export function perKgOf(price: string, packageKg: number): string {
  return new Decimal(price).div(packageKg).toDecimalPlaces(6).toFixed()
}

/** The offer of each feed that is cheapest per kg as fed, as the origin of a price. Offers without a price or a weight are left out. */
export function cheapestOffers(
  offers: readonly Offer[],
): Map<string, NonNullable<SolverFeed['priceOrigin']>> {
  const cheapest = new Map<string, { perKg: number; origin: NonNullable<SolverFeed['priceOrigin']> }>()
  for (const { feedId, supplierName, packageQuantity, packageUnit, packageKg, current } of offers) {
    const perKg = Number(current?.perKgAsFed)
    if (!current || packageKg === undefined || !Number.isFinite(perKg)) continue
    if (perKg >= (cheapest.get(feedId)?.perKg ?? Infinity)) continue
    const { price, date } = current
    cheapest.set(feedId, {
      perKg,
      origin: { supplierName, packageQuantity, packageUnit, packageKg, price, date },
    })
  }
  return new Map([...cheapest].map(([feedId, { origin }]) => [feedId, origin]))
}
