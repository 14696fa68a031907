import type { Migration } from '../database/migrate'
import { farmReference, farmRow, id, name, oneOf, options, word } from './columns'

// Written out here: a step stays as it was released, whatever the lists in shared grow to.
const classes = [
  'dryForage',
  'wetForage',
  'grain',
  'byProduct',
  'proteinMeal',
  'fat',
  'molasses',
  'mineral',
  'premix',
  'other',
]
const statuses = ['read', 'memory', 'practice', 'derived', 'laboratory', 'typed', 'invented']

export const feeds: Migration = {
  name: '0003-feeds',
  up: [
    `CREATE TABLE IF NOT EXISTS feeds (
      ${farmRow},
      name ${name} NOT NULL,
      class ${word(20)} NOT NULL,
      dry_matter DOUBLE NOT NULL,
      dry_matter_source VARCHAR(600) NOT NULL,
      dry_matter_status ${word(20)} NOT NULL,
      forage BOOLEAN NOT NULL,
      test_weight_kg DOUBLE NULL,
      bulk_density_kg_per_l DOUBLE NULL,
      ruminant_origin ${word(10)} NOT NULL,
      non_protein_nitrogen DOUBLE NOT NULL,
      added_copper BOOLEAN NOT NULL,
      ionophore BOOLEAN NOT NULL,
      note VARCHAR(2000) NULL,
      book_key ${word(80)} NULL,
      archived BOOLEAN NOT NULL DEFAULT FALSE,
      ${oneOf('class', classes)},
      ${oneOf('dry_matter_status', statuses)},
      ${oneOf('ruminant_origin', ['no', 'yes', 'exempt'])},
      CHECK (dry_matter > 0 AND dry_matter <= 1),
      CHECK (non_protein_nitrogen BETWEEN 0 AND 1),
      UNIQUE KEY one_name (farm_id, name),
      UNIQUE KEY one_copy (farm_id, book_key)
    ) ${options}`,
    `CREATE TABLE IF NOT EXISTS feed_values (
      farm_id ${id} NOT NULL,
      feed_id ${id} NOT NULL,
      nutrient ${word(60)} NOT NULL,
      value DOUBLE NOT NULL,
      low DOUBLE NULL,
      high DOUBLE NULL,
      sd DOUBLE NULL,
      source VARCHAR(600) NOT NULL,
      status ${word(20)} NOT NULL,
      ${oneOf('status', statuses)},
      CHECK (value >= 0),
      PRIMARY KEY (farm_id, feed_id, nutrient),
      ${farmReference('feed_id', 'feeds', 'CASCADE')}
    ) ${options}`,
  ],
}
