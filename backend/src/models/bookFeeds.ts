import type { BookFeed } from '@maslin/shared'
import { DataTypes, type Sequelize } from 'sequelize'
import { defineTable } from './farmTable'

export interface BookFeedRow {
  bookKey: string
  /** Order of the list in the book. */
  position: number
  name: string
  content: BookFeed
}

/** Which content of the library is loaded, by its hash. */
export interface BookLoadRow {
  contentHash: string
  feeds: number
  loadedAt: Date
}

export const defineBookFeeds = (sequelize: Sequelize) =>
  defineTable<BookFeedRow>(sequelize, 'book_feeds', {
    bookKey: { type: DataTypes.STRING, primaryKey: true },
    position: DataTypes.INTEGER,
    name: DataTypes.STRING,
    content: DataTypes.JSON,
  })

export const defineBookLoads = (sequelize: Sequelize) =>
  defineTable<BookLoadRow>(sequelize, 'book_loads', {
    contentHash: { type: DataTypes.CHAR(64), primaryKey: true },
    feeds: DataTypes.INTEGER,
    loadedAt: DataTypes.DATE(3),
  })
