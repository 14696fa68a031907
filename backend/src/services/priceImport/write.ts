import { v7 as uuidv7 } from 'uuid'
import type { FarmRepositories } from '../../repositories/inFarm'
import { quantityText } from '../offers'
import { nameKey } from './names'
import type { Existing, PlannedPrice } from './plan'

/**
 * Writes the prices of a list with the suppliers and offers they need.
 * @returns the prices that were replaced, for the record
 */
export async function writePrices(
  farm: FarmRepositories,
  importId: string,
  writes: readonly PlannedPrice[],
  existing: Existing,
): Promise<{ id: string; date: string; price: string }[]> {
  const supplierIds = await addSuppliers(farm, writes, existing)
  const offerIds = await addOffers(farm, writes, existing, supplierIds)
  await farm.prices.insertMany(
    writes
      .filter(({ replaces }) => !replaces)
      .map(({ reading, offerKey }) => ({
        offerId: idOf(offerIds, offerKey),
        date: reading.date,
        price: reading.price,
        source: 'import' as const,
        importId,
      })),
  )
  const replaced = writes.flatMap(({ reading, replaces }) => (replaces ? [{ row: replaces, reading }] : []))
  await farm.prices.overwriteMany(
    replaced.map(({ row, reading }) => ({ ...row, price: reading.price, source: 'import', importId })),
    ['price', 'source', 'importId'],
  )
  return replaced.map(({ row: { id, date, price } }) => ({ id, date, price }))
}

type Ids = ReadonlyMap<string, string>

/** Ids of all suppliers by name key, those that are new to the farm made. */
async function addSuppliers(
  farm: FarmRepositories,
  writes: readonly PlannedPrice[],
  { suppliers }: Existing,
): Promise<Ids> {
  const added = new Map(
    writes
      .filter(({ supplierKey }) => !suppliers.has(supplierKey))
      .map(({ supplierKey, reading }) => [supplierKey, reading.supplierName]),
  )
  const rows = await farm.suppliers.insertMany([...added.values()].map((name) => ({ name, note: null })))
  return new Map(
    [...suppliers, ...rows.map((row) => [nameKey(row.name), row] as const)].map(([key, { id }]) => [key, id]),
  )
}

/** Ids of all offers by offer key, those that are new to the farm made. */
async function addOffers(
  farm: FarmRepositories,
  writes: readonly PlannedPrice[],
  { offers }: Existing,
  supplierIds: Ids,
): Promise<Ids> {
  const added = new Map(writes.filter(({ offerKey }) => !offers.has(offerKey)).map((it) => [it.offerKey, it]))
  const ids = new Map([...offers].map(([key, { id }]) => [key, id]))
  for (const [key] of added) ids.set(key, uuidv7())
  await farm.offers.insertMany(
    [...added].map(([key, { reading, supplierKey }]) => ({
      id: idOf(ids, key),
      supplierId: idOf(supplierIds, supplierKey),
      feedId: reading.feed.id,
      packageQuantity: quantityText(reading.packageQuantity),
      packageUnit: reading.packageUnit,
      freight: '0',
    })),
  )
  return ids
}

function idOf(ids: Ids, key: string): string {
  const id = ids.get(key)
  if (!id) throw new Error(`the list needs ${key}, which was not made`)
  return id
}
