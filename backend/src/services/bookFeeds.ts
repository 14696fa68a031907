import { bookFeedSchema, type BookFeed, type Feed } from '@maslin/shared'
import { createHash } from 'node:crypto'
import { readFile } from 'node:fs/promises'
import { join } from 'node:path'
import type { Database } from '../database/database'
import { invalidField } from '../errors'
import { bookFeeds } from '../repositories/bookFeeds'
import type { FarmRepositories } from '../repositories/inFarm'
import { parseBookFeeds } from './bookFeedTables'
import { createFeed } from './feeds'

const files = ['feeds.csv', 'feed-values.csv', 'sources.csv'] as const

/**
 * Brings the library of book feeds in the database up to date with the tables in a directory; unchanged tables cost
 * nothing.
 * @returns how many feeds the library holds where it was loaded anew
 * @throws Error naming the file and line of a figure that cannot be used
 */
export async function loadBookFeeds(database: Database, directory: string): Promise<number | undefined> {
  const [feeds, values, sources] = await Promise.all(
    files.map((file) => readFile(join(directory, file), 'utf8')),
  )
  if (feeds === undefined || values === undefined || sources === undefined) throw new Error('no library')
  const hash = createHash('sha256').update([feeds, values, sources].join('\0')).digest('hex')
  if (await bookFeeds(database).isLoaded(hash)) return undefined
  const parsed = parseBookFeeds({ feeds, values, sources }).map((feed) => bookFeedSchema.parse(feed))
  await database.transaction((transaction) => bookFeeds(database, transaction).replaceAll(parsed, hash))
  return parsed.length
}

export const listBookFeeds = (database: Database): Promise<BookFeed[]> => bookFeeds(database).list()

export interface CopyResult {
  items: Feed[]
  /** Keys of feeds the farm has already; those are left as they are. */
  skipped: string[]
}

/**
 * Copies book feeds into the farm, where they can be edited.
 * @throws AppError `invalid_input` for keys the book does not have, `name_taken` where a feed of the farm's own has the name
 */
export async function copyBookFeeds(
  farm: FarmRepositories,
  bookKeys: readonly string[],
): Promise<CopyResult> {
  const wanted = [...new Set(bookKeys)]
  const found = new Map((await farm.book.list(wanted)).map((feed) => [feed.key, feed]))
  const missing = wanted.find((key) => !found.has(key))
  if (missing !== undefined) {
    throw invalidField(
      `bookKeys.${bookKeys.indexOf(missing)}`,
      'unknown',
      `The book has no feed "${missing}".`,
    )
  }
  const kept = new Set((await farm.feeds.list({ bookKey: wanted })).map((row) => row.bookKey))
  const items: Feed[] = []
  for (const key of wanted) {
    const feed = found.get(key)
    if (feed && !kept.has(key)) items.push(await createFeed(farm, fieldsOf(feed), key))
  }
  return { items, skipped: wanted.filter((key) => kept.has(key)) }
}

function fieldsOf({ key: _key, internationalFeedNumber: _number, ...fields }: BookFeed) {
  return fields
}
