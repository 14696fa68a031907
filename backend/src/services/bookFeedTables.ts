import {
  feedClassSchema,
  nutrientIdSchema,
  ruminantOriginSchema,
  valueStatusSchema,
  type BookFeed,
  type FeedValues,
} from '@maslin/shared'
import Papa from 'papaparse'

export interface BookFeedTexts {
  /** One line a feed: dry matter in per cent of the feed as fed. */
  feeds: string
  /** One line a known value, per kg of dry matter in the nutrient's unit. */
  values: string
  /** Citation and address by key. */
  sources: string
}

/**
 * Reads the library's tables of feeds.
 * @throws Error naming table and line of the first cell that cannot be used
 */
export function parseBookFeeds({ feeds, values, sources }: BookFeedTexts): BookFeed[] {
  const citations = new Map(
    records('sources', sources).map((row) => [
      row.text('key'),
      cite(row.text('citation'), row.optional('address')),
    ]),
  )
  const cited = (row: Row, column: string): string => {
    const found = citations.get(row.text(column))
    return found ?? row.fail(column, 'is no key of the sources')
  }
  const valuesByFeed = new Map<string, FeedValues>()
  for (const row of records('feed-values', values)) {
    const nutrient = row.choice('nutrient', nutrientIdSchema)
    const known = valuesByFeed.get(row.text('feed_key')) ?? {}
    if (known[nutrient]) row.fail('nutrient', 'is there twice for this feed')
    known[nutrient] = {
      value: row.number('value'),
      ...present('sd', row.optionalNumber('sd')),
      source: cite(cited(row, 'source_key'), row.optional('note')),
      status: row.choice('status', valueStatusSchema),
    }
    valuesByFeed.set(row.text('feed_key'), known)
  }
  const list = records('feeds', feeds).map((row) => toBookFeed(row, cited, valuesByFeed))
  const keys = new Set(list.map((feed) => feed.key))
  const stray = [...valuesByFeed.keys()].find((key) => !keys.has(key))
  if (stray !== undefined) throw new Error(`feed-values has values of "${stray}", which feeds does not have`)
  return list
}

function toBookFeed(
  row: Row,
  cited: (row: Row, column: string) => string,
  values: ReadonlyMap<string, FeedValues>,
): BookFeed {
  const key = row.text('key')
  return {
    key,
    name: row.text('name'),
    class: row.choice('class', feedClassSchema),
    dryMatter: row.number('dm_pct') / 100,
    dryMatterSource: cited(row, 'dm_source_key'),
    dryMatterStatus: row.choice('dm_status', valueStatusSchema),
    forage: row.yes('forage'),
    ...present('testWeightKg', row.optionalNumber('test_weight_kg_per_bushel')),
    ...present('bulkDensityKgPerL', row.optionalNumber('bulk_density_kg_per_l')),
    ruminantOrigin: row.choice('ruminant_origin', ruminantOriginSchema),
    nonProteinNitrogen: row.number('npn_fraction'),
    addedCopper: row.yes('added_copper'),
    ionophore: row.yes('ionophore'),
    ...present('note', row.optional('note')),
    ...present('internationalFeedNumber', row.optional('ifn')),
    values: values.get(key) ?? {},
  }
}

const cite = (text: string, more: string | undefined): string => (more ? `${text}; ${more}` : text)

const present = <Key extends string, T>(key: Key, value: T | undefined): { [K in Key]?: T } =>
  (value === undefined ? {} : { [key]: value }) as { [K in Key]?: T }

function records(table: string, text: string): Row[] {
  const { data, errors } = Papa.parse<Record<string, string>>(text, {
    header: true,
    skipEmptyLines: 'greedy',
  })
  if (errors[0]) throw new Error(`${table}, line ${(errors[0].row ?? 0) + 2}: ${errors[0].message}`)
  return data.map((cells, index) => new Row(table, index + 2, cells))
}

/** One line of a table; what is asked of it and is not there is said with table, line and column. */
class Row {
  constructor(
    private readonly table: string,
    private readonly line: number,
    private readonly cells: Record<string, string>,
  ) {}

  fail(column: string, why: string): never {
    throw new Error(`${this.table}, line ${this.line}: ${column} "${this.cells[column] ?? ''}" ${why}`)
  }

  optional(column: string): string | undefined {
    return this.cells[column]?.trim() || undefined
  }

  text(column: string): string {
    return this.optional(column) ?? this.fail(column, 'is missing')
  }

  optionalNumber(column: string): number | undefined {
    const text = this.optional(column)
    if (text === undefined) return undefined
    const value = Number(text)
    return Number.isFinite(value) ? value : this.fail(column, 'is no number')
  }

  number(column: string): number {
    return this.optionalNumber(column) ?? this.fail(column, 'is missing')
  }

  yes(column: string): boolean {
    const text = this.text(column)
    return text === 'yes' || (text === 'no' ? false : this.fail(column, 'is neither yes nor no'))
  }

  choice<T>(column: string, schema: { safeParse: (value: unknown) => { success: boolean; data?: T } }): T {
    const { data } = schema.safeParse(this.text(column))
    return data ?? this.fail(column, 'is not one of the words allowed here')
  }
}
