import { QueryTypes } from 'sequelize'
import type { Database } from '../../backend/src/database/database'

/**
 * Watches every statement and fails those that touch a farm's table without naming the farm in a condition (or, when
 * rows are added, in the columns). One exception is deliberate: memberships may be found by the person they are of.
 */
export function farmScopeTap() {
  const violations: string[] = []
  let farmTables: string[] = []

  const touches = (sql: string, table: string) =>
    new RegExp(`(?:FROM|JOIN|UPDATE|INTO)\\s+\`?${table}\`?(?![\\w])`, 'i').test(sql)

  return {
    violations,
    onStatement(sql: string): void {
      if (/^\s*(CREATE|ALTER|DROP)\s/i.test(sql)) return
      const touched = farmTables.filter((table) => touches(sql, table))
      if (touched.length === 0 || namesFarm(sql)) return
      if (touched.every((table) => table === 'memberships') && /WHERE.*`user_id`\s*=/is.test(sql)) return
      violations.push(sql)
      throw new Error(`A statement on ${touched.join(', ')} does not name the farm: ${sql}`)
    },
    /** Every table with a farm_id is a farm's table. */
    async learnTables({ sequelize }: Database): Promise<void> {
      const rows = await sequelize.query<{ name: string }>(
        `SELECT TABLE_NAME AS name FROM information_schema.COLUMNS
          WHERE TABLE_SCHEMA = DATABASE() AND COLUMN_NAME = 'farm_id'`,
        { type: QueryTypes.SELECT },
      )
      farmTables = rows.map((row) => row.name)
    },
  }
}

/** The farm's id stands in the condition: a column in the list of what is read does not count. */
export function namesFarm(sql: string): boolean {
  if (/^\s*INSERT\s/i.test(sql)) return /INSERT[^(]*\([^)]*\bfarm_id\b[^)]*\)/i.test(sql)
  const condition = sql.slice(Math.max(0, sql.search(/\bWHERE\b/i)))
  return /\bWHERE\b/i.test(sql) && /`?farm_id`?\s*(=|IN\s*\()\s*(\?|'|\()/i.test(condition)
}
