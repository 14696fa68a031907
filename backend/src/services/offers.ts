import {
  packageWeightKg,
  pricePerKg,
  type Offer,
  type OfferUpdate,
  type offerCreateSchema,
  type PackageUnit,
  type PriceSet,
} from '@maslin/shared'
import { Decimal } from 'decimal.js'
import type { z } from 'zod'
import { AppError, invalidField, notFound } from '../errors'
import type { FarmRepositories } from '../repositories/inFarm'
import type { OfferRow, PricedOfferRow } from '../repositories/prices'
import { withoutAbsent } from './changes'
import { putPrice } from './prices'

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

/** More per kg than any feed costs: a slip of the unit or the decimal sign. The solver counts on it. */
export const MOST_PER_KG = 1e7

/** @throws AppError `invalid_input` */
function requirePlausible({ current }: Offer): void {
  if (!current?.perKgAsFed || new Decimal(current.perKgAsFed).lessThan(MOST_PER_KG)) return
  throw invalidField(
    'price',
    'too_much_per_kg',
    `That is ${current.perKgAsFed} per kg: look at the package and its unit.`,
  )
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
 * package has no known weight (a bushel without a test weight) are left out: they cannot be compared. So are those that
 * a later change of their feed made dearer than any feed is.
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
    if (new Decimal(perKgAsFed).greaterThanOrEqualTo(MOST_PER_KG)) continue
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

/** Offers with their price on a day, by feed and supplier. */
export async function listOffers(farm: FarmRepositories, date: string, feedId?: string): Promise<Offer[]> {
  return (await farm.offerPrices.asOf(date, feedId ? { feedId } : {})).map(toOffer)
}

/** An offer with its price on a day. */
export async function getOffer(farm: FarmRepositories, id: string, date = farm.today): Promise<Offer> {
  const [row] = await farm.offerPrices.asOf(date, { offerId: id })
  if (!row) throw notFound()
  return toOffer(row)
}

/**
 * Makes an offer, with its first price where one is given (of today, unless a day is given).
 * @throws AppError `conflict` where the supplier sells the feed in that package already
 */
export async function createOffer(
  farm: FarmRepositories,
  { price, date, ...fields }: z.output<typeof offerCreateSchema>,
): Promise<Offer> {
  if (!(await farm.suppliers.findBy({ id: fields.supplierId }))) {
    throw invalidField('supplierId', 'unknown', 'The farm has no such supplier.')
  }
  if (!(await farm.feeds.findBy({ id: fields.feedId }))) {
    throw invalidField('feedId', 'unknown', 'The farm has no such feed.')
  }
  const row = { ...fields, packageQuantity: quantityText(fields.packageQuantity) }
  await requireNewPackage(farm, row)
  const { id } = await farm.offers.insert(row)
  const day = date ?? farm.today
  if (price !== undefined) await putPrice(farm, id, { date: day, price })
  const offer = await getOffer(farm, id, day)
  requirePlausible(offer)
  await farm.audit.record({ action: 'create', entity: 'offer', entityId: id, after: offer })
  return offer
}

/** @throws AppError `conflict` where the supplier sells the feed in that package already */
export async function updateOffer(
  farm: FarmRepositories,
  id: string,
  version: number,
  changes: OfferUpdate,
): Promise<Offer> {
  const before = await getOffer(farm, id)
  const row = await farm.offers.get(id)
  const { packageQuantity, ...rest } = changes
  const wanted = withoutAbsent({
    ...rest,
    packageQuantity: packageQuantity === undefined ? undefined : quantityText(packageQuantity),
  })
  if (row.version === version) await requireNewPackage(farm, { ...row, ...wanted }, id)
  await farm.offers.update(id, version, wanted)
  const after = await getOffer(farm, id)
  requirePlausible(after)
  await farm.audit.record({ action: 'update', entity: 'offer', entityId: id, before, after })
  return after
}

/** Removes an offer with its prices, which stay on record in the audit. */
export async function removeOffer(farm: FarmRepositories, id: string, version: number): Promise<void> {
  // Locked first: a price set meanwhile would be gone without being on record.
  await farm.offers.get(id, { forUpdate: true })
  const before = await getOffer(farm, id)
  const prices = await farm.prices.list({ offerId: id }, { orderBy: [['date', 'ASC']] })
  await farm.offers.remove(id, version)
  await farm.audit.record({
    action: 'delete',
    entity: 'offer',
    entityId: id,
    before: { ...before, prices: prices.map(({ date, price }) => ({ date, price: plainDecimal(price) })) },
  })
}

/** Sets the price of a day; one the day had already is replaced. @returns the offer with its price on that day */
export async function setPrice(farm: FarmRepositories, offerId: string, price: PriceSet): Promise<Offer> {
  await farm.offers.get(offerId, { forUpdate: true })
  await putPrice(farm, offerId, price)
  const offer = await getOffer(farm, offerId, price.date)
  requirePlausible(offer)
  return offer
}

/** Quantities are stored with six places. */
export const quantityText = (quantity: number): string => new Decimal(quantity).toFixed(6)

async function requireNewPackage(
  farm: FarmRepositories,
  {
    supplierId,
    feedId,
    packageQuantity,
    packageUnit,
  }: Pick<OfferRow, 'supplierId' | 'feedId' | 'packageQuantity' | 'packageUnit'>,
  exceptId?: string,
): Promise<void> {
  const other = await farm.offers.findBy({ supplierId, feedId, packageQuantity, packageUnit })
  if (!other || other.id === exceptId) return
  const message = 'This supplier has an offer of this feed in this package already.'
  throw new AppError('conflict', {
    detail: message,
    errors: [{ path: 'packageQuantity', code: 'taken', message }],
  })
}
