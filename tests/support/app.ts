import request from 'supertest'
import { createApp, type AppOptions } from '../../backend/src/app'
import { readConfig, type Config } from '../../backend/src/config'
import { openDatabase, type Database } from '../../backend/src/database/database'
import { createLogger } from '../../backend/src/logger'
import { migrate } from '../../backend/src/database/migrate'
import { loadBookFeeds } from '../../backend/src/services/bookFeeds'
import { loadRequirementLibrary } from '../../backend/src/services/requirementLibrary'
import { createTestDatabase } from './database'
import { farmScopeTap } from './farmScopeTap'

/** Stands in for the solver's workers where a test is not about solving: it answers that it is there, and solves nothing. */
const noSolving: AppOptions['solving'] = {
  ready: () => Promise.resolve(true),
  solveMix: () => Promise.reject(new Error('this test has no solver')),
  traceCurve: () => Promise.reject(new Error('this test has no solver')),
}

export interface TestApp {
  app: ReturnType<typeof createApp>
  config: Config
  database: Database
  /** Statements seen so far that touched a farm's table without naming the farm. */
  scopeViolations: string[]
  close: () => Promise<void>
}

export interface TestAppOptions {
  /** Settings that differ from those of every test. */
  config?: Partial<Config>
  solving?: AppOptions['solving']
  /** Receives log lines as JSON text; default: nothing is logged. */
  log?: (line: string) => void
}

/** The whole API on an empty, migrated database of its own. Every statement is watched for the farm's id. */
export async function startTestApp({
  config: changes,
  solving = noSolving,
  log,
}: TestAppOptions = {}): Promise<TestApp> {
  const testDatabase = await createTestDatabase()
  const config = {
    ...readConfig({
      DATABASE_URL: testDatabase.url,
      RATE_LIMITS: 'off',
      MASLIN_DEMO: 'off',
      LOG_LEVEL: 'silent',
    }),
    ...changes,
  }
  const tap = farmScopeTap()
  const database = openDatabase(config.databaseUrl, { onStatement: tap.onStatement })
  await migrate(database)
  await tap.learnTables(database)
  await loadBookFeeds(database, config.libraryDirectory)
  const requirements = await loadRequirementLibrary(database, config.libraryDirectory)
  const logger = log ? createLogger('trace', { write: log }) : createLogger('silent')
  return {
    app: createApp({ config, database, solving, requirements, logger }),
    config,
    database,
    scopeViolations: tap.violations,
    close: async () => {
      await database.close()
      await testDatabase.drop()
    },
  }
}

/** A browser's worth of cookies against the app. */
export type Visitor = ReturnType<typeof request.agent>
export const visit = ({ app }: Pick<TestApp, 'app'>): Visitor => request.agent(app)
