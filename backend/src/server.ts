import type { Server } from 'node:http'
import type { Logger } from 'pino'
import { createApp } from './app'
import { ConfigError, readConfig, sendsPasswordsOpenly, type Config } from './config'
import { openDatabase, type Database } from './database/database'
import { migrate } from './database/migrate'
import { checkServerSettings } from './database/settings'
import { loadDemo } from './demo/loadDemo'
import { createLogger } from './logger'
import { loadBookFeeds } from './services/bookFeeds'
import { loadRequirementLibrary, type RequirementLibrary } from './services/requirementLibrary'
import { SolvingPool } from './solving/pool'

/** Brings everything up, in the order in which one part needs the other. */
async function start(): Promise<void> {
  const config = readConfig(process.env)
  const logger = createLogger(config.logLevel)
  if (sendsPasswordsOpenly(config)) {
    logger.warn(
      { host: config.host },
      'not on loopback and not over TLS: passwords and sign-ins can be read on the way',
    )
  }
  const database = openDatabase(config.databaseUrl, { poolSize: config.databasePool })
  const requirements = await prepare(database, config, logger)
  const solving = await SolvingPool.create({
    workers: config.solveWorkers,
    queueLimit: config.solveQueue,
    onCrash: (error) => logger.error({ err: error }, 'a solve worker ended'),
  })
  if (!(await solving.warmUp())) logger.error('a solve worker does not answer')
  const signIns = await loadDemo({ config, database, solving, requirements })
  if (signIns) logger.info({ people: signIns.length }, 'demo farms loaded')
  let open = true
  const app = createApp({ config, database, solving, requirements, logger, isOpen: () => open })
  const server = app.listen(config.port, config.host, (error) => {
    if (error) fail(error)
    logger.info({ address: server.address() }, 'listening')
  })
  const stop = async (signal: string) => {
    if (!open) return
    open = false
    logger.info({ signal }, 'stopping')
    // However long a request takes, the process is gone by then.
    setTimeout(() => {
      logger.error('requests in flight did not end in time')
      process.exit(1)
    }, config.shutdownMs).unref()
    await closeServer(server)
    await solving.close()
    await database.close()
    logger.info('stopped')
    process.exit(0)
  }
  for (const signal of ['SIGTERM', 'SIGINT'] as const) {
    process.on(signal, () => void stop(signal).catch(fail))
  }
}

/** Schema, server settings and the reference library. */
async function prepare(database: Database, config: Config, logger: Logger): Promise<RequirementLibrary> {
  const { durable } = await checkServerSettings(database)
  if (!durable)
    logger.warn('innodb_flush_log_at_trx_commit is not 1: a crash of the machine may lose what was saved')
  const steps = await migrate(database)
  if (steps.length > 0) logger.info({ steps }, 'schema brought up to date')
  const feeds = await loadBookFeeds(database, config.libraryDirectory)
  if (feeds !== undefined) logger.info({ feeds }, 'book feeds loaded')
  return loadRequirementLibrary(database, config.libraryDirectory)
}

/** No new connections; idle ones end now, the others after their answer. */
function closeServer(server: Server): Promise<void> {
  return new Promise((resolve, reject) => {
    server.close((error) => (error ? reject(error) : resolve()))
    server.closeIdleConnections()
  })
}

function fail(error: unknown): never {
  const text =
    error instanceof ConfigError ? error.message : error instanceof Error ? error.stack : String(error)
  process.stderr.write(`${text}\n`)
  process.exit(1)
}

// What nobody caught leaves the process in an unknown state: say so, end, and be started again.
process.on('unhandledRejection', fail)
process.on('uncaughtException', fail)
start().catch(fail)
