import type { BookFeed } from '@maslin/shared'
import type { Transaction } from 'sequelize'
import type { Database } from '../database/database'
import type { BookFeedRow } from '../models/bookFeeds'
import { plain } from './farmTable'

/** Feeds of the reference library, the same for every farm. */
export function bookFeeds({ models }: Database, transaction: Transaction | null = null) {
  return {
    async list(keys?: readonly string[]): Promise<BookFeed[]> {
      const rows = await models.bookFeeds.findAll({
        ...(keys ? { where: { bookKey: [...keys] } } : {}),
        order: [['position', 'ASC']],
        transaction,
      })
      return rows.map((row) => plain<BookFeedRow>(row).content)
    },

    async isLoaded(contentHash: string): Promise<boolean> {
      return (await models.bookLoads.count({ where: { contentHash }, transaction })) > 0
    },

    /** Puts these in place of all that were there. */
    async replaceAll(feeds: readonly BookFeed[], contentHash: string): Promise<void> {
      await models.bookLoads.destroy({ where: {}, transaction })
      await models.bookFeeds.destroy({ where: {}, transaction })
      await models.bookFeeds.bulkCreate(
        feeds.map((content, position) => ({ bookKey: content.key, position, name: content.name, content })),
        { transaction },
      )
      await models.bookLoads.create(
        { contentHash, feeds: feeds.length, loadedAt: new Date() },
        { transaction },
      )
    },
  }
}
