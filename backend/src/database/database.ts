import { QueryTypes, Sequelize, Transaction } from 'sequelize'
import { defineModels, type Models } from '../models'

export interface Database {
  readonly sequelize: Sequelize
  readonly models: Models
  /**
   * Runs one use case in one transaction (READ COMMITTED): all of it is kept, or nothing. A use case that the server
   * chose as the victim of a deadlock runs again from its start, so `work` must do nothing but reach the database.
   */
  transaction<T>(work: (transaction: Transaction) => Promise<T>): Promise<T>
  /** Resolves when the server answers. */
  ping(): Promise<void>
  close(): Promise<void>
}

export interface DatabaseOptions {
  poolSize?: number
  /** Sees every statement before it runs; one that throws stops the statement. For tests. */
  onStatement?: (sql: string) => void
}

const DEADLOCK = 1213
const attempts = 3

/** Opens a pool of connections; the first statement connects. */
export function openDatabase(url: string, { poolSize = 10, onStatement }: DatabaseOptions = {}): Database {
  const sequelize = new Sequelize(url, {
    dialect: 'mariadb',
    timezone: '+00:00',
    isolationLevel: Transaction.ISOLATION_LEVELS.READ_COMMITTED,
    logging: onStatement ? (text) => onStatement(text.replace(/^Execut\w+ \([^)]*\): /, '')) : false,
    pool: { max: poolSize, min: 0, acquire: 10_000, idle: 30_000 },
    dialectOptions: {
      // Decimals stay text all the way: money never passes through a float.
      supportBigNumbers: false,
      decimalAsNumber: false,
      bigIntAsNumber: true,
      insertIdAsNumber: true,
      checkNumberRange: true,
      connectTimeout: 5000,
      charset: 'utf8mb4',
      collation: 'UTF8MB4_UNICODE_520_CI',
      sessionVariables: { innodb_lock_wait_timeout: 10 },
    },
  })
  return {
    sequelize,
    models: defineModels(sequelize),
    transaction: (work) => retryDeadlocks(() => sequelize.transaction(work)),
    ping: async () => {
      await sequelize.query('SELECT 1', { type: QueryTypes.SELECT })
    },
    close: () => sequelize.close(),
  }
}

async function retryDeadlocks<T>(run: () => Promise<T>): Promise<T> {
  for (let attempt = 1; ; attempt++) {
    try {
      return await run()
    } catch (error) {
      if (attempt >= attempts || databaseErrorNumber(error) !== DEADLOCK) throw error
    }
  }
}

/** The server's error number behind an error of the mapper; undefined for any other error. */
export function databaseErrorNumber(error: unknown): number | undefined {
  const original = error instanceof Error && 'original' in error ? error.original : error
  return original instanceof Error && 'errno' in original && typeof original.errno === 'number'
    ? original.errno
    : undefined
}
