import { randomBytes } from 'node:crypto'
import { availableParallelism } from 'node:os'
import { dirname, resolve } from 'node:path'
import { fileURLToPath } from 'node:url'
import { z } from 'zod'

/** The checkout's top directory, from the sources and from the bundle alike (both lie two levels below it). */
const projectRoot = resolve(dirname(fileURLToPath(import.meta.url)), '..', '..')

const onOff = (fallback: 'on' | 'off') =>
  z
    .enum(['on', 'off', '1', '0', 'true', 'false'])
    .default(fallback)
    .transform((value) => value === 'on' || value === '1' || value === 'true')

const path = (fallback: string) =>
  z
    .string()
    .min(1)
    .default(fallback)
    .transform((value) => resolve(projectRoot, value))

const environmentSchema = z.object({
  PORT: z.coerce.number().int().min(0).max(65535).default(8080),
  /** Loopback unless told otherwise: another address should be served over TLS. */
  HOST: z.string().min(1).default('127.0.0.1'),
  DATABASE_URL: z.url({ protocol: /^(mariadb|mysql)$/ }),
  DATABASE_POOL: z.coerce.number().int().min(1).max(100).default(10),
  /** Signs access tokens. Left out outside production, one is made up, and sign-ins end with the process. */
  JWT_SECRET: z.string().min(32).optional(),
  NODE_ENV: z.string().default('development'),
  MASLIN_DATA_DIR: path('.maslin'),
  /** Reference tables: feeds, requirements, and their sources. */
  LIBRARY_DIR: path('data'),
  FRONTEND_DIR: path('frontend/dist'),
  MASLIN_DEMO: onOff('on'),
  LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'trace', 'silent']).default('info'),
  /** Where people reach Maslin, when it stands behind a proxy or is served over TLS. */
  PUBLIC_URL: z.url({ protocol: /^https?$/ }).optional(),
  /** How many proxies stand in front and may set X-Forwarded-For. */
  TRUST_PROXY: z.coerce.number().int().min(0).max(10).default(0),
  RATE_LIMITS: onOff('on'),
  /** Threads that solve; one processor is left to everything else. */
  SOLVE_WORKERS: z.coerce
    .number()
    .int()
    .min(1)
    .max(64)
    .default(Math.max(1, availableParallelism() - 1)),
  /** Solves that may wait for a worker before further ones are told to come back. */
  SOLVE_QUEUE: z.coerce.number().int().min(0).max(1000).default(16),
  SHUTDOWN_SECONDS: z.coerce.number().min(1).max(300).default(15),
})

export interface Config {
  port: number
  host: string
  databaseUrl: string
  databasePool: number
  jwtSecret: string
  dataDirectory: string
  libraryDirectory: string
  frontendDirectory: string
  demo: boolean
  logLevel: string
  /** Origin people see (`https://feed.example`); undefined: whatever the Host header says. */
  publicOrigin: string | undefined
  /** Served over TLS: cookies are `Secure` and carry their prefixes, browsers are told to stay with https. */
  secure: boolean
  trustProxy: number
  rateLimits: boolean
  solveWorkers: number
  solveQueue: number
  shutdownMs: number
}

/** Settings that cannot be used; every one of them is named, not just the first. */
export class ConfigError extends Error {
  constructor(readonly problems: string[]) {
    super(`Settings that need attention:\n${problems.map((problem) => `  ${problem}`).join('\n')}`)
    this.name = 'ConfigError'
  }
}

/**
 * Reads all settings once.
 * @throws {ConfigError} naming every setting that is missing or wrong
 */
export function readConfig(environment: Record<string, string | undefined>): Config {
  const given = Object.fromEntries(Object.entries(environment).filter(([, value]) => value !== ''))
  const parsed = environmentSchema.safeParse(given)
  const problems = parsed.success
    ? []
    : parsed.error.issues.map((issue) => `${issue.path.join('.')}: ${issue.message}`)
  if (given.NODE_ENV === 'production' && !given.JWT_SECRET) {
    problems.push('JWT_SECRET: needed in production, at least 32 characters')
  }
  if (!parsed.success || problems.length > 0) throw new ConfigError(problems)
  const env = parsed.data
  const publicUrl = env.PUBLIC_URL ? new URL(env.PUBLIC_URL) : undefined
  return {
    port: env.PORT,
    host: env.HOST,
    databaseUrl: env.DATABASE_URL,
    databasePool: env.DATABASE_POOL,
    jwtSecret: env.JWT_SECRET ?? randomBytes(32).toString('base64url'),
    dataDirectory: env.MASLIN_DATA_DIR,
    libraryDirectory: env.LIBRARY_DIR,
    frontendDirectory: env.FRONTEND_DIR,
    demo: env.MASLIN_DEMO,
    logLevel: env.LOG_LEVEL,
    publicOrigin: publicUrl?.origin,
    secure: publicUrl?.protocol === 'https:',
    trustProxy: env.TRUST_PROXY,
    rateLimits: env.RATE_LIMITS,
    solveWorkers: env.SOLVE_WORKERS,
    solveQueue: env.SOLVE_QUEUE,
    shutdownMs: env.SHUTDOWN_SECONDS * 1000,
  }
}

const loopback = /^(localhost|127(\.\d{1,3}){3}|::1|\[::1\])$/

/** Whether browsers elsewhere reach the server over plain http, where anybody on the way reads along. */
export const sendsPasswordsOpenly = ({ host, secure, publicOrigin }: Config): boolean =>
  !secure && (publicOrigin ? !loopback.test(new URL(publicOrigin).hostname) : !loopback.test(host))
