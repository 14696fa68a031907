import type { Migration } from '../database/migrate'
import { farmReference, farmRow, id, money, name, oneOf, options, word } from './columns'

export const prices: Migration = {
  name: '0004-prices',
  up: [
    `CREATE TABLE IF NOT EXISTS suppliers (
      ${farmRow},
      name ${name} NOT NULL,
      note VARCHAR(2000) NULL,
      UNIQUE KEY one_name (farm_id, name)
    ) ${options}`,
    `CREATE TABLE IF NOT EXISTS offers (
      ${farmRow},
      supplier_id ${id} NOT NULL,
      feed_id ${id} NOT NULL,
      package_quantity DECIMAL(13,6) NOT NULL,
      package_unit ${word(10)} NOT NULL,
      freight ${money} NOT NULL DEFAULT 0,
      ${oneOf('package_unit', ['lb', 'kg', 'oz', 'g', 'cwt', 'shortTon', 'tonne', 'bushel'])},
      CHECK (package_quantity > 0),
      CHECK (freight >= 0),
      UNIQUE KEY one_package (farm_id, supplier_id, feed_id, package_quantity, package_unit),
      KEY by_feed (farm_id, feed_id),
      ${farmReference('supplier_id', 'suppliers')},
      ${farmReference('feed_id', 'feeds')}
    ) ${options}`,
    `CREATE TABLE IF NOT EXISTS price_imports (
      ${farmRow},
      idempotency_key VARCHAR(200) COLLATE utf8mb4_bin NOT NULL,
      request_hash ${word(64)} NOT NULL,
      file_name VARCHAR(200) NOT NULL,
      counts JSON NOT NULL,
      left_out JSON NOT NULL,
      user_id ${id} NOT NULL,
      UNIQUE KEY one_per_key (farm_id, idempotency_key),
      KEY by_time (farm_id, created_at),
      FOREIGN KEY (user_id) REFERENCES users (id)
    ) ${options}`,
    `CREATE TABLE IF NOT EXISTS prices (
      ${farmRow},
      offer_id ${id} NOT NULL,
      date DATE NOT NULL,
      price ${money} NOT NULL,
      source ${word(10)} NOT NULL,
      import_id ${id} NULL,
      ${oneOf('source', ['typed', 'import', 'demo'])},
      CHECK (price >= 0),
      UNIQUE KEY one_a_day (farm_id, offer_id, date),
      ${farmReference('offer_id', 'offers', 'CASCADE')},
      ${farmReference('import_id', 'price_imports')}
    ) ${options}`,
  ],
}
