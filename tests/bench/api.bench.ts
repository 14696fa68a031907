import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { fileURLToPath, pathToFileURL } from 'node:url'
import type { Mix, MixDraft, Session, SolveResponse } from '@maslin/shared'
import { solveMix } from '@maslin/solver'
import { report, timed } from './measure'

const ROUNDS = 60
const WARM_UP = 10

/** The bundle lies three levels below the checkout; what starts servers finds its own place and is not bundled. */
const root = path.resolve(path.dirname(fileURLToPath(import.meta.url)), '../../..')
const load = async <T>(file: string): Promise<T> =>
  (await import(pathToFileURL(path.join(root, file)).href)) as T

interface Stoppable {
  stop(): Promise<void>
}
interface TestServer extends Stoppable {
  url: string
}
interface Server extends Stoppable {
  ready(): Promise<void>
}
type StartServer = (options: {
  directory: string
  port: number
  command: string[]
  env: Record<string, string>
  toStdout: boolean
}) => Server

/** A solve over the API (request, sign-in, rows, worker, answer) against the solver alone on the same input. */
export default async function benchApi(): Promise<number> {
  const { startTestServer } = await load<{ startTestServer(): Promise<TestServer> }>(
    'tests/support/testServer.mjs',
  )
  const { buildBackend } = await load<{ buildBackend(): Promise<void> }>('backend/scripts/build.mjs')
  const { startServer } = await load<{ startServer: StartServer }>('backend/scripts/server.mjs')
  const { freePort } = await load<{ freePort(): Promise<number> }>('backend/scripts/ports.mjs')
  await buildBackend()
  const mariaDb = await startTestServer()
  const directory = mkdtempSync(path.join(tmpdir(), 'maslin-bench-'))
  const port = await freePort()
  const server = startServer({
    directory,
    port,
    command: [path.join(root, 'backend/dist/server.js')],
    env: {
      DATABASE_URL: await emptyDatabase(mariaDb.url),
      MASLIN_DATA_DIR: directory,
      MASLIN_DEMO: 'on',
      RATE_LIMITS: 'off',
      LOG_LEVEL: 'warn',
    },
    toStdout: false,
  })
  try {
    await server.ready()
    return await compare(await signIn(`http://127.0.0.1:${port}/api/v1`, directory))
  } finally {
    await server.stop()
    await mariaDb.stop()
    rmSync(directory, { recursive: true, force: true })
  }
}

async function emptyDatabase(url: string): Promise<string> {
  const { createConnection } = await import('mariadb')
  const { hostname, port, username, password } = new URL(url)
  const connection = await createConnection({
    host: hostname,
    port: Number(port),
    user: decodeURIComponent(username),
    password: decodeURIComponent(password),
  })
  await connection.query('CREATE DATABASE maslin_bench')
  await connection.end()
  return Object.assign(new URL(url), { pathname: '/maslin_bench' }).href
}

interface Client {
  call<T>(method: string, path: string, body?: object): Promise<T>
  farm: string
}

async function signIn(base: string, directory: string): Promise<Client> {
  const signIns = JSON.parse(readFileSync(path.join(directory, 'demo-sign-ins.json'), 'utf8')) as {
    role: string
    email: string
    password: string
  }[]
  const owner = signIns.find(({ role }) => role === 'owner')
  if (!owner) throw new Error('the demo has no owner')
  const { email, password } = owner
  const answer = await fetch(`${base}/auth/sign-in`, {
    method: 'POST',
    headers: { 'Content-Type': 'application/json' },
    body: JSON.stringify({ email, password }),
  })
  const session = (await answer.json()) as Session
  const cookie = answer.headers
    .getSetCookie()
    .map((one) => one.split(';')[0])
    .join('; ')
  return {
    farm: `/farms/${session.memberships[0]?.farm.id ?? ''}`,
    call: async <T>(method: string, to: string, body?: object) => {
      const reply = await fetch(`${base}${to}`, {
        method,
        headers: { cookie, 'Content-Type': 'application/json' },
        ...(body ? { body: JSON.stringify(body) } : {}),
      })
      const text = await reply.text()
      if (!reply.ok) throw new Error(`${method} ${to}: ${reply.status} ${text}`)
      return JSON.parse(text) as T
    },
  }
}

async function compare({ call, farm }: Client): Promise<number> {
  const { items } = await call<{ items: { id: string }[] }>('GET', `${farm}/mixes`)
  const mix = await call<Mix>('GET', `${farm}/mixes/${items.at(-1)?.id ?? ''}`)
  const draft = draftOf(mix)
  const solveByApi = () => call<SolveResponse>('POST', `${farm}/solve`, { draft })
  const { input, answer } = await solveByApi()
  if (answer.status !== 'optimal') throw new Error(`the demo mix ${mix.name} is ${answer.status}`)
  const overApi: number[] = []
  const alone: number[] = []
  const plain: number[] = []
  for (let round = -WARM_UP; round < ROUNDS; round++) {
    const times = [
      await timed(solveByApi),
      await timed(() => solveMix(input)),
      await timed(() => call('GET', farm)),
    ] as const
    if (round < 0) continue
    overApi.push(times[0])
    alone.push(times[1])
    plain.push(times[2])
  }
  console.log(`${mix.name}: ${input.feeds.length} feeds, ${input.limits.length} limits`)
  report('solve over the API / solver alone', overApi, alone)
  report('solve over the API / reading the farm over the API', overApi, plain)
  return 0
}

const draftOf = ({ id: _id, version: _version, updatedAt: _updatedAt, ...draft }: Mix): MixDraft => draft
