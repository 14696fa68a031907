import { QueryTypes, type QueryInterface } from 'sequelize'
import { SequelizeStorage, Umzug, type MigrationParams } from 'umzug'
import { migrations } from '../migrations'
import type { Database } from './database'

/** One step of the schema. Steps are listed in `migrations/index.ts`, so that a bundle carries them all. */
export interface Migration {
  /** Sorts after the ones before it: `0001-accounts`. Never changed once released. */
  name: string
  /** Statements, run one by one. Repeatable after a crash midway: `CREATE TABLE IF NOT EXISTS` and the like. */
  up: readonly string[]
}

/** Brings the schema up to date. Two processes that start together take turns. */
export async function migrate(database: Database): Promise<string[]> {
  const umzug = new Umzug({
    migrations: migrations.map(({ name, up }) => ({
      name,
      up: async ({ context }: MigrationParams<QueryInterface>) => {
        for (const statement of up) await context.sequelize.query(statement)
      },
    })),
    context: database.sequelize.getQueryInterface(),
    storage: new SequelizeStorage({ sequelize: database.sequelize, tableName: 'migrations' }),
    logger: undefined,
  })
  return database.transaction(async (transaction) => {
    const [lock] = await database.sequelize.query<{ taken: number | null }>(
      "SELECT GET_LOCK('maslin.migrate', 60) AS taken",
      { transaction, type: QueryTypes.SELECT },
    )
    if (lock?.taken !== 1) throw new Error('another process has been changing the schema for a minute')
    try {
      return (await umzug.up()).map((step) => step.name)
    } finally {
      await database.sequelize.query("SELECT RELEASE_LOCK('maslin.migrate')", {
        transaction,
        type: QueryTypes.SELECT,
      })
    }
  })
}
