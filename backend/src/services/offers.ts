import { packageWeightKg, pricePerKg, type Offer, type PackageUnit } from '@maslin/shared'
import { Decimal } from 'decimal.js'
import type { FarmRepositories } from '../repositories/inFarm'
import type { PricedOfferRow } from '../repositories/prices'

/** Trailing zeros of a stored decimal say nothing: `12.5000` is `12.5`. */
export const plainDecimal = (stored: string): string => new Decimal(stored).toFixed()

export interface PerKg {
  /** Price and freight per kg, currency; six places. */
  perKgAsFed: string
  perKgDryMatter: string
}

/**
 * What a package costs per kg with its freight.
 * @param dryMatter kg per kg as fed
 * @returns undefined where the weight of the package is not known
 */
export function perKg(
  price: string,
  freight: string,
  packageKg: number | undefined,
  dryMatter: number,
): PerKg | undefined {
  if (packageKg === undefined) return undefined
  const total = new Decimal(price).plus(freight).toFixed()
  return {
    perKgAsFed: pricePerKg(total, packageKg),
    perKgDryMatter: pricePerKg(total, new Decimal(packageKg).times(dryMatter).toNumber()),
  }
}

export const packageKgOf = (row: {
  packageQuantity: string | number
  packageUnit: PackageUnit
  testWeightKg: number | null
}): number | undefined => packageWeightKg(Number(row.packageQuantity), row.packageUnit, row.testWeightKg)

/** An offer as the API answers it. */
export function toOffer(row: PricedOfferRow): Offer {
  const packageKg = packageKgOf(row)
  return {
    id: row.id,
    supplierId: row.supplierId,
    supplierName: row.supplierName,
    feedId: row.feedId,
    feedName: row.feedName,
    packageQuantity: Number(row.packageQuantity),
    packageUnit: row.packageUnit,
    packageKg,
    freight: plainDecimal(row.freight),
    current:
      row.price === null || row.date === null
        ? undefined
        : {
            date: row.date,
            price: plainDecimal(row.price),
            ...perKg(row.price, row.freight, packageKg, row.dryMatter),
          },
    version: row.version,
  }
}

/** An offer that has a price on the day and a known weight: what a mix can be costed with. */
export interface PricedOffer extends PerKg {
  offerId: string
  supplierName: string
  packageQuantity: number
  packageUnit: PackageUnit
  /** kg as fed. */
  packageKg: number
  /** Per package, without freight. */
  price: string
  freight: string
  date: string
}

/**
 * Offers with a price on or before the day (`YYYY-MM-DD`), by feed, the cheapest per kg as fed first. Offers whose
 * package has no known weight (a bushel without a test weight) are left out: they cannot be compared.
 */
export async function pricesAsOf(farm: FarmRepositories, date: string): Promise<Map<string, PricedOffer[]>> {
  const byFeed = new Map<string, PricedOffer[]>()
  for (const row of await farm.offerPrices.asOf(date)) {
    const {
      id: offerId,
      packageKg,
      current,
      feedId,
      supplierName,
      packageQuantity,
      packageUnit,
      freight,
    } = toOffer(row)
    if (!current?.perKgAsFed || !current.perKgDryMatter || packageKg === undefined) continue
    const { price, perKgAsFed, perKgDryMatter } = current
    const offer = { offerId, supplierName, packageQuantity, packageUnit, packageKg, price, freight }
    const offers = byFeed.get(feedId) ?? []
    offers.push({ ...offer, perKgAsFed, perKgDryMatter, date: current.date })
    byFeed.set(feedId, offers)
  }
  for (const offers of byFeed.values()) {
    offers.sort(
      (a, b) => new Decimal(a.perKgAsFed).comparedTo(b.perKgAsFed) || (a.offerId < b.offerId ? -1 : 1),
    )
  }
  return byFeed
}

/** The cheapest offer per kg as fed of each feed on a day. */
export async function cheapestByFeed(
  farm: FarmRepositories,
  date: string,
): Promise<Map<string, PricedOffer>> {
  const offers = await pricesAsOf(farm, date)
  return new Map(
    [...offers].flatMap(([feedId, [cheapest]]) => (cheapest ? [[feedId, cheapest] as const] : [])),
  )
}
