import type { Migration } from '../database/migrate'
import { farmReference, farmRow, id, moment, name, oneOf, options, word } from './columns'

const cost = 'DECIMAL(18,6)'

export const scenarios: Migration = {
  name: '0007-scenarios',
  up: [
    `CREATE TABLE IF NOT EXISTS scenarios (
      ${farmRow},
      mix_id ${id} NULL,
      name ${name} NOT NULL,
      latest_revision INT UNSIGNED NOT NULL,
      KEY by_time (farm_id, updated_at),
      ${farmReference('mix_id', 'mixes')}
    ) ${options}`,
    // `content` is canonical JSON (RFC 8785) under its SHA-256; the columns before it are what lists show.
    `CREATE TABLE IF NOT EXISTS scenario_revisions (
      ${farmRow},
      scenario_id ${id} NOT NULL,
      revision INT UNSIGNED NOT NULL,
      state ${word(12)} NOT NULL,
      note VARCHAR(2000) NOT NULL,
      group_name ${name} NOT NULL,
      answer_status ${word(12)} NOT NULL,
      prices_as_of DATE NOT NULL,
      cost_per_head_day ${cost} NULL,
      cost_per_kg_as_fed ${cost} NULL,
      cost_per_group_30_days ${cost} NULL,
      schema_version INT UNSIGNED NOT NULL,
      content_hash ${word(64)} NOT NULL,
      content LONGTEXT CHARACTER SET utf8mb4 COLLATE utf8mb4_bin NOT NULL,
      created_by_id ${id} NOT NULL,
      created_by ${name} NOT NULL,
      submitted_at ${moment} NULL,
      decided_at ${moment} NULL,
      decided_by ${name} NULL,
      ${oneOf('state', ['draft', 'submitted', 'approved', 'returned'])},
      UNIQUE KEY one_per_number (farm_id, scenario_id, revision),
      KEY by_state (farm_id, state),
      ${farmReference('scenario_id', 'scenarios')},
      FOREIGN KEY (created_by_id) REFERENCES users (id)
    ) ${options}`,
    `CREATE TABLE IF NOT EXISTS comments (
      ${farmRow},
      scenario_id ${id} NOT NULL,
      revision INT UNSIGNED NOT NULL,
      kind ${word(12)} NOT NULL,
      text VARCHAR(4000) NOT NULL,
      author_id ${id} NOT NULL,
      author ${name} NOT NULL,
      ${oneOf('kind', ['comment', 'submitted'])},
      KEY by_scenario (farm_id, scenario_id),
      ${farmReference('scenario_id', 'scenarios', 'CASCADE')},
      FOREIGN KEY (author_id) REFERENCES users (id)
    ) ${options}`,
    `CREATE TABLE IF NOT EXISTS reviews (
      ${farmRow},
      scenario_id ${id} NOT NULL,
      revision INT UNSIGNED NOT NULL,
      decision ${word(12)} NOT NULL,
      text VARCHAR(4000) NOT NULL,
      acknowledged JSON NOT NULL,
      author_id ${id} NOT NULL,
      author ${name} NOT NULL,
      ${oneOf('decision', ['approved', 'returned'])},
      UNIQUE KEY one_per_revision (farm_id, scenario_id, revision),
      ${farmReference('scenario_id', 'scenarios', 'CASCADE')},
      FOREIGN KEY (author_id) REFERENCES users (id)
    ) ${options}`,
    // What was stored stays as it was, whoever asks: a change is a new revision.
    `CREATE OR REPLACE TRIGGER scenario_revisions_keep_content BEFORE UPDATE ON scenario_revisions FOR EACH ROW
      IF NOT (NEW.content <=> OLD.content AND NEW.content_hash <=> OLD.content_hash
          AND NEW.schema_version <=> OLD.schema_version AND NEW.revision <=> OLD.revision
          AND NEW.scenario_id <=> OLD.scenario_id AND NEW.farm_id <=> OLD.farm_id) THEN
        SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a saved revision never changes';
      END IF`,
    `CREATE OR REPLACE TRIGGER scenario_revisions_keep_submitted BEFORE DELETE ON scenario_revisions FOR EACH ROW
      IF OLD.state <> 'draft' THEN
        SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'a submitted revision is never deleted';
      END IF`,
  ],
}
