import type { Migration } from '../database/migrate'
import { farmReference, farmRow, id, name, oneOf, options, word } from './columns'

export const mixes: Migration = {
  name: '0006-mixes',
  up: [
    // Limits are one document, read and written whole by the bench; its shape has a version of its own.
    `CREATE TABLE IF NOT EXISTS mixes (
      ${farmRow},
      group_id ${id} NOT NULL,
      name ${name} NOT NULL,
      basis ${word(20)} NOT NULL,
      batch_dry_matter_kg DOUBLE NOT NULL,
      prices_as_of DATE NULL,
      limits_version INT UNSIGNED NOT NULL,
      limits LONGTEXT NOT NULL,
      feed_count INT UNSIGNED NOT NULL,
      limit_count INT UNSIGNED NOT NULL,
      note VARCHAR(2000) NULL,
      ${oneOf('basis', ['batch', 'perHead', 'besideForage'])},
      ${farmReference('group_id', '`groups`')}
    ) ${options}`,
    `CREATE TABLE IF NOT EXISTS mix_feeds (
      ${farmRow},
      mix_id ${id} NOT NULL,
      feed_id ${id} NOT NULL,
      position INT UNSIGNED NOT NULL,
      offer_id ${id} NULL,
      price_per_kg DECIMAL(13,6) NULL,
      UNIQUE KEY one_per_feed (farm_id, mix_id, feed_id),
      ${farmReference('mix_id', 'mixes', 'CASCADE')},
      ${farmReference('feed_id', 'feeds')},
      ${farmReference('offer_id', 'offers')}
    ) ${options}`,
  ],
}
