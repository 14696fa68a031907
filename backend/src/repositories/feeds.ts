import type { FeedValue, FeedValues, NutrientId } from '@maslin/shared'
import type { Transaction } from 'sequelize'
import type { FeedValueRow } from '../models/feeds'
import type { Table } from '../models/farmTable'
import { plain, scoped } from './farmTable'

export type { FeedRow } from '../models/feeds'

/** Values of a farm's feeds, which belong to their feed: written and removed with it. */
export class FeedValueTable {
  constructor(
    private readonly table: Table<FeedValueRow>,
    private readonly farmId: string,
    private readonly transaction: Transaction,
  ) {}

  /** Known values by feed; a feed without any has no entry. */
  async byFeed(feedIds?: readonly string[]): Promise<Map<string, FeedValues>> {
    const rows = await this.table.findAll({
      where: scoped<FeedValueRow>(this.farmId, feedIds ? { feedId: feedIds } : {}),
      transaction: this.transaction,
    })
    const found = new Map<string, FeedValues>()
    for (const row of rows.map(plain<FeedValueRow>)) {
      const values = found.get(row.feedId) ?? {}
      values[row.nutrient] = toValue(row)
      found.set(row.feedId, values)
    }
    return found
  }

  /** Writes the values of a feed in place of those it had: a nutrient that is not among them is unknown from now on. */
  async replace(feedId: string, values: FeedValues): Promise<void> {
    await this.table.destroy({
      where: scoped<FeedValueRow>(this.farmId, { feedId }),
      transaction: this.transaction,
    })
    await this.insertMany([[feedId, values]])
  }

  async insertMany(feeds: readonly (readonly [feedId: string, values: FeedValues])[]): Promise<void> {
    const rows = feeds.flatMap(([feedId, values]) =>
      Object.entries(values).map(([nutrient, value]) => this.toRow(feedId, nutrient as NutrientId, value)),
    )
    if (rows.length > 0) await this.table.bulkCreate(rows, { transaction: this.transaction })
  }

  private toRow(feedId: string, nutrient: NutrientId, value: FeedValue): FeedValueRow {
    const { low = null, high = null, sd = null, ...known } = value
    return { farmId: this.farmId, feedId, nutrient, low, high, sd, ...known }
  }
}

function toValue(row: FeedValueRow): FeedValue {
  const { value, source, status, low, high, sd } = row
  return {
    value,
    ...(low === null ? {} : { low }),
    ...(high === null ? {} : { high }),
    ...(sd === null ? {} : { sd }),
    source,
    status,
  }
}
