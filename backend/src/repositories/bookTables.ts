import type { Transaction } from 'sequelize'
import type { Database } from '../database/database'
import type { BookTableRow } from '../models/groups'
import { plain } from './farmTable'

export type { BookTableRow } from '../models/groups'

/** Tables of the reference library: the same for every farm. */
export function bookTables({ models }: Database, transaction: Transaction) {
  return {
    async list(): Promise<BookTableRow[]> {
      return (await models.bookTables.findAll({ transaction })).map(plain<BookTableRow>)
    },

    async put(row: BookTableRow): Promise<void> {
      await models.bookTables.upsert(row, { transaction })
    },
  }
}
