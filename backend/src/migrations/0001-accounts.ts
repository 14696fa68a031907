import type { Migration } from '../database/migrate'
import { farmRow, id, moment, name, oneOf, options, word } from './columns'

export const accounts: Migration = {
  name: '0001-accounts',
  up: [
    `CREATE TABLE IF NOT EXISTS users (
      id ${id} NOT NULL PRIMARY KEY,
      name ${name} NOT NULL,
      email VARCHAR(254) COLLATE utf8mb4_bin NOT NULL,
      password_hash VARCHAR(255) NOT NULL,
      created_at ${moment} NOT NULL,
      updated_at ${moment} NOT NULL,
      UNIQUE KEY email (email)
    ) ${options}`,
    `CREATE TABLE IF NOT EXISTS sessions (
      id ${id} NOT NULL PRIMARY KEY,
      user_id ${id} NOT NULL,
      created_at ${moment} NOT NULL,
      expires_at ${moment} NOT NULL,
      ended_at ${moment} NULL,
      ended_by ${word(20)} NULL,
      ${oneOf('ended_by', ['signOut', 'reuse'])},
      KEY expiry (expires_at),
      FOREIGN KEY (user_id) REFERENCES users (id) ON DELETE CASCADE
    ) ${options}`,
    `CREATE TABLE IF NOT EXISTS refresh_tokens (
      token_hash ${word(64)} NOT NULL PRIMARY KEY,
      session_id ${id} NOT NULL,
      created_at ${moment} NOT NULL,
      expires_at ${moment} NOT NULL,
      rotated_at ${moment} NULL,
      KEY expiry (expires_at),
      FOREIGN KEY (session_id) REFERENCES sessions (id) ON DELETE CASCADE
    ) ${options}`,
    `CREATE TABLE IF NOT EXISTS farms (
      id ${id} NOT NULL PRIMARY KEY,
      name ${name} NOT NULL,
      units ${word(10)} NOT NULL,
      currency ${word(3)} NOT NULL,
      version INT UNSIGNED NOT NULL DEFAULT 1,
      created_at ${moment} NOT NULL,
      updated_at ${moment} NOT NULL,
      ${oneOf('units', ['us', 'metric'])}
    ) ${options}`,
    `CREATE TABLE IF NOT EXISTS memberships (
      ${farmRow},
      user_id ${id} NOT NULL,
      role ${word(20)} NOT NULL,
      ${oneOf('role', ['owner', 'manager', 'hand', 'advisor'])},
      UNIQUE KEY one_per_person (farm_id, user_id),
      KEY by_user (user_id),
      FOREIGN KEY (user_id) REFERENCES users (id)
    ) ${options}`,
    `CREATE TABLE IF NOT EXISTS audit_events (
      id ${id} NOT NULL PRIMARY KEY,
      farm_id ${id} NOT NULL,
      user_id ${id} NULL,
      action ${word(60)} NOT NULL,
      entity ${word(60)} NOT NULL,
      entity_id ${id} NOT NULL,
      before_state JSON NULL,
      after_state JSON NULL,
      request_id VARCHAR(100) NOT NULL,
      created_at ${moment} NOT NULL,
      UNIQUE KEY farm_and_id (farm_id, id),
      KEY by_entity (farm_id, entity, entity_id),
      FOREIGN KEY (farm_id) REFERENCES farms (id),
      FOREIGN KEY (user_id) REFERENCES users (id)
    ) ${options}`,
  ],
}
