import {
  MAX_IMPORT_ROWS,
  type ImportMapping,
  type ImportPreview,
  type importPreviewRequestSchema,
  type PriceImport,
} from '@maslin/shared'
import canonicalize from 'canonicalize'
import { createHash } from 'node:crypto'
import type { z } from 'zod'
import { AppError, invalidField } from '../errors'
import type { FarmRepositories } from '../repositories/inFarm'
import type { PriceImportRow, PriceRow } from '../repositories/prices'
import { today } from './changes'
import { guessMapping, missingFields } from './priceImport/mapping'
import { NameIndex, nameKey } from './priceImport/names'
import { offerKey, planImport, type Existing, type Plan } from './priceImport/plan'
import { readRow, type ImportFeed, type RowOutcome } from './priceImport/rows'
import { readTable } from './priceImport/table'
import { writePrices } from './priceImport/write'
import { quantityText } from './offers'

type PreviewRequest = z.output<typeof importPreviewRequestSchema>
export type ApplyRequest = PreviewRequest & { mapping: ImportMapping }

/** Names that match nothing get the nearest feeds for the first so many; a list of thousands is no list of feeds. */
const mostSuggested = 200
const listed = 50
const DAY_MS = 24 * 3600 * 1000

/**
 * Reads a price list and sets every row against what the farm has. Nothing is saved.
 * @throws AppError `unreadable_file`, `too_large`
 */
export async function previewImport(farm: FarmRepositories, request: PreviewRequest): Promise<ImportPreview> {
  const read = await readList(farm, request)
  const { rows, counts } = read.plan
  return {
    mapping: read.mapping,
    header: read.header,
    rows,
    counts,
    unusedColumns: unusedColumns(read),
    unknownFeeds: unknownFeeds(read),
    missingFields: missingFields(read.mapping, request),
  }
}

/**
 * Applies a price list: all its good rows, together, or none. The same key with the same list again answers the same.
 * @throws AppError `unreadable_file`, `too_large`, `nothing_to_apply`, `idempotency_mismatch`
 */
export async function applyImport(
  farm: FarmRepositories,
  idempotencyKey: string,
  request: ApplyRequest,
): Promise<PriceImport> {
  // Lists of one farm are applied one after another: each is set against what the one before left.
  await farm.account.get({ forUpdate: true })
  const requestHash = createHash('sha256')
    .update(canonicalize(request) ?? '')
    .digest('hex')
  const earlier = await farm.priceImports.findBy({ idempotencyKey })
  if (earlier) {
    if (earlier.requestHash === requestHash) return withName(farm, earlier)
    throw new AppError('idempotency_mismatch', { detail: 'This key was used for another list.' })
  }
  const [missing] = missingFields(request.mapping, request)
  if (missing)
    throw invalidField(`mapping.columns.${missing}`, 'missing_column', `No column holds the ${missing}.`)
  const { plan, existing } = await readList(farm, request, { forUpdate: true })
  if (plan.writes.length === 0) {
    throw new AppError('nothing_to_apply', {
      detail: 'No row of the list has a price that is not known already.',
    })
  }
  const row = await farm.priceImports.insert({
    idempotencyKey,
    requestHash,
    fileName: request.fileName,
    counts: plan.counts,
    leftOut: plan.rows.filter(({ state }) => state === 'error' || state === 'leftOut'),
    userId: requireUser(farm),
  })
  const replaced = await writePrices(farm, row.id, plan.writes, existing)
  await farm.audit.record({
    action: 'import',
    entity: 'priceImport',
    entityId: row.id,
    before: { replaced },
    after: { fileName: row.fileName, counts: row.counts },
  })
  return withName(farm, row)
}

/** The latest lists applied, newest first: as many as leave out no more rows together than one list may have. */
export async function listImports(farm: FarmRepositories): Promise<PriceImport[]> {
  const latest = await farm.priceImports.list(
    {},
    { columns: ['id', 'counts'], orderBy: [['id', 'DESC']], limit: listed },
  )
  let leftOut = 0
  const shown = latest.filter(({ counts }) => (leftOut += counts.error + counts.leftOut) <= MAX_IMPORT_ROWS)
  const ids = shown.map(({ id }) => id)
  const rows = await farm.priceImports.list({ id: ids }, { orderBy: [['id', 'DESC']] })
  const people = await farm.people.byIds(rows.map((row) => row.userId))
  const names = new Map(people.map((person) => [person.id, person.name]))
  return rows.map((row) => toPriceImport(row, names.get(row.userId) ?? ''))
}

async function withName(farm: FarmRepositories, row: PriceImportRow): Promise<PriceImport> {
  const [person] = await farm.people.byIds([row.userId])
  return toPriceImport(row, person?.name ?? '')
}

const toPriceImport = (row: PriceImportRow, createdBy: string): PriceImport => ({
  id: row.id,
  fileName: row.fileName,
  counts: row.counts,
  leftOut: row.leftOut,
  createdAt: row.createdAt.toISOString(),
  createdBy,
})

function requireUser({ userId }: FarmRepositories): string {
  if (!userId) throw new Error('a price list is applied by somebody')
  return userId
}

interface ReadList {
  mapping: ImportMapping
  header: string[]
  width: number
  outcomes: RowOutcome[]
  plan: Plan
  existing: Existing
  feeds: NameIndex<ImportFeed>
}

/** @param forUpdate locks the prices the list is set against, so that they stay as they are until it is applied */
async function readList(
  farm: FarmRepositories,
  request: PreviewRequest,
  { forUpdate = false }: { forUpdate?: boolean } = {},
): Promise<ReadList> {
  const [account, feedRows, suppliers] = [
    await farm.account.get(),
    await farm.feeds.list(
      {},
      {
        orderBy: [
          ['archived', 'ASC'],
          ['name', 'ASC'],
        ],
      },
    ),
    await farm.suppliers.list(),
  ]
  const feeds = new NameIndex<ImportFeed>(feedRows)
  const suppliersByKey = new Map(suppliers.map(({ id, name }) => [nameKey(name), { id, name }]))
  const table = readTable(request.text, request.mapping?.delimiter)
  const mapping =
    request.mapping ??
    guessMapping(table, {
      isFeedName: (name) => feeds.find(name) !== undefined,
      isSupplierName: (name) => suppliersByKey.has(nameKey(name)),
      usualDateOrder: account.units === 'us' ? 'mdy' : 'dmy',
    })
  const header = mapping.header ? (table.rows[0]?.cells ?? []) : []
  const body = mapping.header ? table.rows.slice(1) : table.rows
  const width = mapping.header
    ? header.length
    : Math.max(0, ...body.slice(0, 1).map((row) => row.cells.length))
  const rules = {
    mapping,
    width,
    feeds,
    feedById: new Map(feedRows.map((feed) => [feed.id, feed])),
    feedMatches: request.feedMatches,
    supplierName: request.supplierName,
    date: request.date,
    // A day ahead of UTC: it is tomorrow already for part of the world.
    latest: today(new Date(farm.now.getTime() + DAY_MS)),
  }
  const outcomes = body.map((row) => readRow(row, rules))
  const existing = await readExisting(farm, suppliersByKey, outcomes, forUpdate)
  return { mapping, header, width, outcomes, plan: planImport(outcomes, existing), existing, feeds }
}

async function readExisting(
  farm: FarmRepositories,
  suppliers: Existing['suppliers'],
  outcomes: readonly RowOutcome[],
  forUpdate: boolean,
): Promise<Existing> {
  const feedIds = new Set(
    outcomes.flatMap((outcome) => (outcome.kind === 'read' ? [outcome.reading.feed.id] : [])),
  )
  const offerRows = feedIds.size > 0 ? await farm.offers.list({ feedId: [...feedIds] }) : []
  const keyOfSupplier = new Map([...suppliers].map(([key, { id }]) => [id, key]))
  const prices = new Map<string, PriceRow[]>()
  const priceRows =
    offerRows.length > 0
      ? await farm.prices.list({ offerId: offerRows.map(({ id }) => id) }, { forUpdate })
      : []
  for (const price of priceRows) {
    const ofOffer = prices.get(price.offerId) ?? []
    ofOffer.push(price)
    prices.set(price.offerId, ofOffer)
  }
  const offers = offerRows.map(
    ({ id, supplierId, feedId, packageQuantity, packageUnit, freight }) =>
      [
        offerKey(
          keyOfSupplier.get(supplierId) ?? '',
          feedId,
          quantityText(Number(packageQuantity)),
          packageUnit,
        ),
        { id, freight },
      ] as const,
  )
  return { suppliers, offers: new Map(offers), prices }
}

function unusedColumns({ mapping, header, width }: ReadList): string[] {
  const used = new Set(Object.values(mapping.columns))
  return Array.from({ length: width }, (_, column) => column)
    .filter((column) => !used.has(column))
    .map((column) => header[column]?.trim() || String(column + 1))
}

/** Names that match no feed, each once, with the nearest ones. */
function unknownFeeds({ outcomes, feeds }: ReadList): ImportPreview['unknownFeeds'] {
  const names = new Set(
    outcomes.flatMap((outcome) =>
      outcome.kind === 'error'
        ? outcome.problems.filter(({ code }) => code === 'unknownFeed').map(({ value }) => value)
        : [],
    ),
  )
  return [...names].map((name, at) => ({
    name,
    suggestions:
      at < mostSuggested ? feeds.nearest(name).map((feed) => ({ feedId: feed.id, name: feed.name })) : [],
  }))
}
