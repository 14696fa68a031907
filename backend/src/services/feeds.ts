import type { Feed, FeedClass, FeedValues, FeedUpdate, feedCreateSchema } from '@maslin/shared'
import type { z } from 'zod'
import { AppError } from '../errors'
import type { FeedRow } from '../repositories/feeds'
import type { FarmRepositories } from '../repositories/inFarm'
import { withoutAbsent } from './changes'
import { cheapestByFeed } from './offers'

type FeedFields = z.output<typeof feedCreateSchema>

/** A feed as the API answers it: dry matter per kg as fed, values per kg of dry matter, unknown values absent. */
export function toFeed(row: FeedRow, values: FeedValues = {}): Feed {
  return {
    id: row.id,
    name: row.name,
    class: row.class satisfies FeedClass,
    dryMatter: row.dryMatter,
    dryMatterSource: row.dryMatterSource,
    dryMatterStatus: row.dryMatterStatus,
    forage: row.forage,
    testWeightKg: row.testWeightKg ?? undefined,
    bulkDensityKgPerL: row.bulkDensityKgPerL ?? undefined,
    ruminantOrigin: row.ruminantOrigin,
    nonProteinNitrogen: row.nonProteinNitrogen,
    addedCopper: row.addedCopper,
    ionophore: row.ionophore,
    note: row.note ?? undefined,
    bookKey: row.bookKey ?? undefined,
    archived: row.archived,
    values,
    version: row.version,
    updatedAt: row.updatedAt.toISOString(),
  }
}

/** Feeds of the farm with their values, by name; archived ones too. */
export async function listFeeds(farm: FarmRepositories): Promise<Feed[]> {
  const [rows, values] = await Promise.all([
    farm.feeds.list({}, { orderBy: [['name', 'ASC']] }),
    farm.feedValues.byFeed(),
  ])
  return rows.map((row) => toFeed(row, values.get(row.id)))
}

/** The same with the cheapest price per kg as fed on a day (`YYYY-MM-DD`), freight included. */
export async function listFeedSummaries(farm: FarmRepositories, asOf: string) {
  const [feeds, cheapest] = await Promise.all([listFeeds(farm), cheapestByFeed(farm, asOf)])
  return feeds.map((feed) => {
    const offer = cheapest.get(feed.id)
    if (!offer) return feed
    const { offerId, supplierName, perKgAsFed, date } = offer
    return { ...feed, price: { offerId, supplierName, perKgAsFed, date } }
  })
}

export async function getFeed(farm: FarmRepositories, id: string): Promise<Feed> {
  const row = await farm.feeds.get(id)
  return toFeed(row, (await farm.feedValues.byFeed([id])).get(id))
}

/** @throws AppError `name_taken` */
export async function createFeed(
  farm: FarmRepositories,
  fields: FeedFields,
  bookKey?: string,
): Promise<Feed> {
  await requireFreeName(farm, fields.name)
  const { values, testWeightKg, bulkDensityKgPerL, note, ...rest } = fields
  const row = await farm.feeds.insert({
    ...rest,
    testWeightKg: testWeightKg ?? null,
    bulkDensityKgPerL: bulkDensityKgPerL ?? null,
    note: note ?? null,
    bookKey: bookKey ?? null,
    archived: false,
  })
  await farm.feedValues.insertMany([[row.id, values]])
  const feed = toFeed(row, values)
  await farm.audit.record({ action: 'create', entity: 'feed', entityId: row.id, after: feed })
  return feed
}

/** Changes the fields given; `values` is the whole set: a value left out is unknown from now on. */
export async function updateFeed(
  farm: FarmRepositories,
  id: string,
  version: number,
  changes: FeedUpdate,
): Promise<Feed> {
  const before = await getFeed(farm, id)
  if (changes.name !== undefined) await requireFreeName(farm, changes.name, id)
  const { values, ...fields } = changes
  const row = await farm.feeds.update(id, version, withoutAbsent(fields))
  if (values) await farm.feedValues.replace(id, values)
  const after = toFeed(row, values ?? before.values)
  await farm.audit.record({ action: 'update', entity: 'feed', entityId: id, before, after })
  return after
}

/** @throws AppError `in_use` while an offer, a group, a mix or a limit of a mix refers to it */
export async function removeFeed(farm: FarmRepositories, id: string, version: number): Promise<void> {
  // Whoever saves a mix locks its feeds too, so that none can be named in a limit meanwhile.
  await farm.feeds.get(id, { forUpdate: true })
  const before = await getFeed(farm, id)
  await requireNoLimitNames(farm, id)
  await farm.feeds.remove(id, version)
  await farm.audit.record({ action: 'delete', entity: 'feed', entityId: id, before })
}

/** Limits are stored as a document, which no foreign key guards. Ids stand in it letter by letter. */
async function requireNoLimitNames(farm: FarmRepositories, feedId: string): Promise<void> {
  const mixes = await farm.mixes.list({}, { columns: ['id', 'name', 'limits'] })
  const naming = mixes.filter(({ limits }) => limits.includes(`"${feedId}"`)).map(({ name }) => name)
  if (naming.length === 0) return
  throw new AppError('in_use', {
    detail: `A limit names this feed in: ${naming.slice(0, 5).join(', ')}.`,
  })
}

async function requireFreeName(farm: FarmRepositories, name: string, exceptId?: string): Promise<void> {
  const other = await farm.feeds.findBy({ name })
  if (other && other.id !== exceptId) {
    const message = `There is a feed called ${other.name} already.`
    throw new AppError('name_taken', { detail: message, errors: [{ path: 'name', code: 'taken', message }] })
  }
}
