import { QueryTypes } from 'sequelize'
import type { Database } from './database'

/** What the server must be set to, for what we store to be kept as it was given. */
const wanted = [
  {
    variable: 'sql_mode',
    ok: (value: string) => !value.includes('NO_BACKSLASH_ESCAPES'),
    need: 'a mode without NO_BACKSLASH_ESCAPES, or a quotation mark in a text ends the text',
  },
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
] as const

/**
 * Refuses a database server whose settings would lose data.
 * @returns whether commits reach the disk before they are answered; without that a crash of the machine may lose some
 * @throws Error naming every setting that is wrong
 */
export async function checkServerSettings(database: Database): Promise<{ durable: boolean }> {
  const names = [...wanted.map((setting) => setting.variable), 'innodb_flush_log_at_trx_commit']
  const rows = await database.sequelize.query<{ Variable_name: string; Value: string }>(
    'SHOW SESSION VARIABLES WHERE Variable_name IN (:names)',
    { replacements: { names }, type: QueryTypes.SELECT },
  )
  const values = new Map(rows.map((row) => [row.Variable_name, row.Value]))
  const wrong = wanted.filter((setting) => !setting.ok(values.get(setting.variable) ?? ''))
  if (wrong.length > 0) {
    const lines = wrong.map(
      ({ variable, need }) => `  ${variable} is ${values.get(variable) ?? 'unknown'}; needed: ${need}`,
    )
    throw new Error(`The database server's settings are not safe to use:\n${lines.join('\n')}`)
  }
  return { durable: values.get('innodb_flush_log_at_trx_commit') === '1' }
}
