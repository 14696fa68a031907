import type { Price, PriceSet } from '@maslin/shared'
import { Decimal } from 'decimal.js'
import type { FarmRepositories } from '../repositories/inFarm'
import type { PriceRow } from '../repositories/prices'

export const toPrice = (row: PriceRow): Price => ({
  id: row.id,
  offerId: row.offerId,
  date: row.date,
  price: new Decimal(row.price).toFixed(),
  source: row.source,
  createdAt: row.createdAt.toISOString(),
})

/** Prices of an offer, newest day first. */
export async function listPrices(farm: FarmRepositories, offerId: string): Promise<Price[]> {
  await farm.offers.get(offerId)
  return (await farm.prices.list({ offerId }, { orderBy: [['date', 'DESC']] })).map(toPrice)
}

/** Writes the price and its trace. */
export async function putPrice(
  farm: FarmRepositories,
  offerId: string,
  { date, price }: PriceSet,
): Promise<void> {
  const existing = await farm.prices.findBy({ offerId, date }, { forUpdate: true })
  const after = existing
    ? await farm.prices.update(existing.id, existing.version, { price, source: 'typed', importId: null })
    : await farm.prices.insert({ offerId, date, price, source: 'typed', importId: null })
  await farm.audit.record({
    action: existing ? 'update' : 'create',
    entity: 'price',
    entityId: after.id,
    ...(existing ? { before: toPrice(existing) } : {}),
    after: toPrice(after),
  })
}
