import { QueryTypes } from 'sequelize'
import type { Database } from './database'

/** What the server must be set to, for what we store to be kept as it was given. */
const wanted = [
  {
    variable: 'sql_mode',
    ok: (value: string) => /STRICT_(ALL|TRANS)_TABLES/.test(value),
    need: 'STRICT_TRANS_TABLES, or values that do not fit are cut off in silence',
  },
  {
    variable: 'character_set_database',
    ok: (value: string) => value === 'utf8mb4',
    need: 'utf8mb4, or names lose letters',
  },
  { variable: 'foreign_key_checks', ok: (value: string) => value === 'ON', need: 'ON' },
  { variable: 'check_constraint_checks', ok: (value: string) => value === 'ON', need: 'ON' },
  {
    variable: 'innodb_flush_log_at_trx_commit',
    ok: (value: string, strict: boolean) => !strict || value === '1',
    need: '1, or a crash loses what was said to be saved',
  },
] as const

/**
 * Refuses a database server whose settings would lose data.
 * @param durable also demand that commits reach the disk; off for throw-away test servers
 * @throws Error naming every setting that is wrong
 */
export async function checkServerSettings(
  database: Database,
  { durable }: { durable: boolean },
): Promise<void> {
  const rows = await database.sequelize.query<{ Variable_name: string; Value: string }>(
    `SHOW SESSION VARIABLES WHERE Variable_name IN (${wanted.map(() => '?').join(', ')})`,
    { replacements: wanted.map((setting) => setting.variable), type: QueryTypes.SELECT },
  )
  const values = new Map(rows.map((row) => [row.Variable_name, row.Value]))
  const wrong = wanted.filter((setting) => !setting.ok(values.get(setting.variable) ?? '', durable))
  if (wrong.length > 0) {
    const lines = wrong.map(
      ({ variable, need }) => `  ${variable} is ${values.get(variable) ?? 'unknown'}; needed: ${need}`,
    )
    throw new Error(`The database server's settings are not safe to use:\n${lines.join('\n')}`)
  }
}
