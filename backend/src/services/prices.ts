import type { Price, PriceSet } from '@maslin/shared'
import { Decimal } from 'decimal.js'
import { invalidField } from '../errors'
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

/** The years that lists are read for, too: the year 26 is a slip of the hand. */
const firstDay = '1990-01-01'
const lastDay = '2100-12-31'

/**
 * Writes the price and its trace.
 * @throws AppError `invalid_input` for a day that no price of today's farms is of
 */
export async function putPrice(
  farm: FarmRepositories,
  offerId: string,
  { date, price }: PriceSet,
): Promise<void> {
  if (date < firstDay || date > lastDay)
    throw invalidField('date', 'out_of_range', `The year must be from 1990 to 2100, not ${date.slice(0, 4)}.`)
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
