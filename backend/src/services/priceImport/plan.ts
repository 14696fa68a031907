import type { ImportRow, PriceImport } from '@maslin/shared'
import { Decimal } from 'decimal.js'
import type { PriceRow } from '../../repositories/prices'
import { perKg, quantityText } from '../offers'
import { nameKey } from './names'
import type { Reading, RowOutcome } from './rows'

/** What the farm has already, as far as a list can touch it. */
export interface Existing {
  /** By name key. */
  suppliers: ReadonlyMap<string, { id: string; name: string }>
  /** By offer key. */
  offers: ReadonlyMap<string, { id: string; freight: string }>
  /** Prices by offer id. */
  prices: ReadonlyMap<string, readonly PriceRow[]>
}

/** A price to be written. */
export interface PlannedPrice {
  reading: Reading
  supplierKey: string
  offerKey: string
  /** The price of the same day that it replaces. */
  replaces?: PriceRow
}

export interface Plan {
  rows: ImportRow[]
  counts: PriceImport['counts']
  writes: PlannedPrice[]
}

/** One offer per supplier, feed and package. */
export const offerKey = (supplier: string, feedId: string, quantity: string, unit: string): string =>
  JSON.stringify([supplier, feedId, quantity, unit])

const keyOf = ({ feed, packageQuantity, packageUnit }: Reading, supplierKey: string): string =>
  offerKey(supplierKey, feed.id, quantityText(packageQuantity), packageUnit)

/**
 * Sets every row against what the farm has: a price that is new for its offer, changed, or the same as before. A price
 * that is the same as an earlier day's is written too, since it is known to hold on the later day.
 */
export function planImport(outcomes: readonly RowOutcome[], existing: Existing): Plan {
  const rows = new Map<RowOutcome, ImportRow>()
  const firstLines = new Map<string, number>()
  const offers = new Map<string, ReadRow[]>()
  for (const outcome of outcomes) {
    if (outcome.kind !== 'read') {
      rows.set(outcome, unread(outcome))
      continue
    }
    const supplierKey = nameKey(outcome.reading.supplierName)
    const key = keyOf(outcome.reading, supplierKey)
    const dayKey = `${key} ${outcome.reading.date}`
    const earlier = firstLines.get(dayKey)
    if (earlier !== undefined) {
      rows.set(outcome, duplicate(outcome, earlier))
      continue
    }
    firstLines.set(dayKey, outcome.line)
    const group = offers.get(key) ?? []
    group.push({ outcome, reading: outcome.reading, supplierKey, offerKey: key })
    offers.set(key, group)
  }
  const writes: PlannedPrice[] = []
  for (const group of offers.values()) {
    for (const { outcome, row, write } of compare(group, existing)) {
      rows.set(outcome, row)
      if (write) writes.push(write)
    }
  }
  const inOrder = outcomes.flatMap((outcome) => rows.get(outcome) ?? [])
  return { rows: inOrder, counts: countStates(inOrder), writes }
}

interface ReadRow extends PlannedPrice {
  outcome: RowOutcome
}

/** Goes through the rows of one offer from the earliest day on, so that each is set against the price before it. */
function compare(group: readonly ReadRow[], existing: Existing) {
  const [first] = group
  const supplier = first && existing.suppliers.get(first.supplierKey)
  const offer = first && existing.offers.get(first.offerKey)
  const known = new Map(
    (offer ? (existing.prices.get(offer.id) ?? []) : []).map((price) => [price.date, price]),
  )
  const timeline = new Map([...known].map(([date, { price }]) => [date, price]))
  return [...group]
    .sort((a, b) => (a.reading.date < b.reading.date ? -1 : 1))
    .map(({ outcome, ...planned }) => {
      const { reading } = planned
      const sameDay = known.get(reading.date)
      const before = latest(timeline, reading.date)
      timeline.set(reading.date, reading.price)
      const same = before !== undefined && new Decimal(before.price).equals(reading.price)
      const state: ImportRow['state'] = before === undefined ? 'new' : same ? 'same' : 'changed'
      const row: ImportRow = {
        line: outcome.line,
        state,
        cells: outcome.cells,
        problems: [],
        read: {
          feedId: reading.feed.id,
          feedName: reading.feed.name,
          supplierName: supplier?.name ?? reading.supplierName,
          newSupplier: supplier === undefined,
          packageQuantity: reading.packageQuantity,
          packageUnit: reading.packageUnit,
          packageKg: reading.packageKg,
          price: reading.price,
          date: reading.date,
          ...perKg(reading.price, offer?.freight ?? '0', reading.packageKg, reading.feed.dryMatter),
          ...(before ? { before: { price: new Decimal(before.price).toFixed(), date: before.date } } : {}),
        },
      }
      const isWritten = !(same && before.date === reading.date)
      const replaces = sameDay ? { replaces: sameDay } : {}
      return { outcome, row, write: isWritten ? { ...planned, ...replaces } : undefined }
    })
}

function latest(
  timeline: ReadonlyMap<string, string>,
  date: string,
): { date: string; price: string } | undefined {
  let found: { date: string; price: string } | undefined
  for (const [day, price] of timeline) {
    if (day <= date && (!found || day > found.date)) found = { date: day, price }
  }
  return found
}

function unread(outcome: Exclude<RowOutcome, { kind: 'read' }>): ImportRow {
  const { line, cells, kind } = outcome
  return { line, cells, state: kind, problems: kind === 'error' ? outcome.problems : [] }
}

/** The same offer and day twice in one list: the first holds, the second is said to be a repetition of its line. */
function duplicate({ line, cells }: RowOutcome, earlier: number): ImportRow {
  return {
    line,
    cells,
    state: 'error',
    problems: [{ field: 'feed', code: 'duplicateRow', value: String(earlier) }],
  }
}

function countStates(rows: readonly ImportRow[]): PriceImport['counts'] {
  const counts = { new: 0, changed: 0, same: 0, error: 0, leftOut: 0 }
  for (const row of rows) counts[row.state] += 1
  return counts
}
