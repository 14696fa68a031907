import type { Migration } from '../database/migrate'
import { moment, name, options, word } from './columns'

/** The reference library: the same for every farm, so in tables of its own without a farm. */
export const book: Migration = {
  name: '0002-book',
  up: [
    `CREATE TABLE IF NOT EXISTS book_feeds (
      book_key ${word(80)} NOT NULL PRIMARY KEY,
      position INT UNSIGNED NOT NULL,
      name ${name} NOT NULL,
      content JSON NOT NULL
    ) ${options}`,
    `CREATE TABLE IF NOT EXISTS book_loads (
      content_hash ${word(64)} NOT NULL PRIMARY KEY,
      feeds INT UNSIGNED NOT NULL,
      loaded_at ${moment} NOT NULL
    ) ${options}`,
  ],
}
