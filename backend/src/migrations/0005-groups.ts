import type { Migration } from '../database/migrate'
import { farmReference, farmRow, id, moment, name, oneOf, options, word } from './columns'

export const groups: Migration = {
  name: '0005-groups',
  up: [
    // Tables of the reference library, each as one document in the shape the solver takes: no farm.
    `CREATE TABLE IF NOT EXISTS book_tables (
      name ${word(40)} NOT NULL PRIMARY KEY,
      content_hash ${word(64)} NOT NULL,
      content LONGTEXT NOT NULL,
      loaded_at ${moment} NOT NULL
    ) ${options}`,
    `CREATE TABLE IF NOT EXISTS \`groups\` (
      ${farmRow},
      name ${name} NOT NULL,
      heads INT UNSIGNED NOT NULL,
      species ${word(20)} NOT NULL,
      class ${word(60)} NOT NULL,
      stage ${word(80)} NOT NULL,
      body_weight_kg DOUBLE NOT NULL,
      daily_gain_g DOUBLE NULL,
      milk_kg DOUBLE NULL,
      litter INT UNSIGNED NULL,
      requirement_system VARCHAR(60) NULL,
      equids_can_reach BOOLEAN NOT NULL,
      intake_dry_matter_kg DOUBLE NULL,
      intake_reason VARCHAR(500) NULL,
      note VARCHAR(2000) NULL,
      CHECK (heads > 0),
      CHECK (body_weight_kg > 0)
    ) ${options}`,
    `CREATE TABLE IF NOT EXISTS base_diet_items (
      ${farmRow},
      group_id ${id} NOT NULL,
      feed_id ${id} NOT NULL,
      position INT UNSIGNED NOT NULL,
      mode ${word(12)} NOT NULL,
      dry_matter_kg DOUBLE NULL,
      waste_share DOUBLE NOT NULL,
      substitution_rate DOUBLE NULL,
      ${oneOf('mode', ['fixed', 'freeChoice'])},
      CHECK (waste_share >= 0 AND waste_share < 1),
      KEY by_group (farm_id, group_id),
      ${farmReference('group_id', '`groups`', 'CASCADE')},
      ${farmReference('feed_id', 'feeds')}
    ) ${options}`,
    `CREATE TABLE IF NOT EXISTS need_overrides (
      ${farmRow},
      group_id ${id} NOT NULL,
      nutrient ${word(60)} NOT NULL,
      per_head_day DOUBLE NOT NULL,
      reason VARCHAR(500) NOT NULL,
      CHECK (per_head_day >= 0),
      UNIQUE KEY one_per_nutrient (farm_id, group_id, nutrient),
      ${farmReference('group_id', '`groups`', 'CASCADE')}
    ) ${options}`,
  ],
}
