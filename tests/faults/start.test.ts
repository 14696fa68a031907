import { spawn, type ChildProcess } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, statSync } from 'node:fs'
import { createServer } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { inProject } from '../../backend/scripts/paths.mjs'
import { freePort } from '../../backend/scripts/ports.mjs'
import { commandOf, endProcess, processesWith } from '../../backend/scripts/processes.mjs'
import { asAdministrator, createTestDatabase } from '../support/database'

interface Start {
  pid: number
  /** What it has printed so far. */
  output: () => string
  /** Waits for a line. */
  says: (text: string) => Promise<void>
  exit: Promise<number | null>
}

let directory: string
let port: number
const children: ChildProcess[] = []

beforeEach(async () => {
  directory = mkdtempSync(join(tmpdir(), 'maslin-start-'))
  port = await freePort()
})

afterEach(async () => {
  children.splice(0).forEach((child) => child.kill('SIGKILL'))
  const server = pidIn('server.pid')
  if (server) await endProcess(server, 10_000)
  for (const pid of databaseProcesses()) await endProcess(pid, 30_000)
  rmSync(directory, { recursive: true, force: true })
})

/** Runs what `npm start` runs, on data and a port of the test's own, without the demo unless asked for. */
function start(env: Record<string, string> = {}): Start {
  const child = spawn(process.execPath, [inProject('backend/scripts/start.mjs')], {
    cwd: inProject(),
    env: {
      ...process.env,
      DATABASE_URL: '',
      JWT_SECRET: '',
      npm_lifecycle_event: '',
      MASLIN_DATA_DIR: directory,
      PORT: String(port),
      MASLIN_DEMO: 'off',
      ...env,
    },
    stdio: ['ignore', 'pipe', 'pipe'],
  })
  children.push(child)
  let output = ''
  child.stdout.on('data', (chunk) => (output += chunk))
  child.stderr.on('data', (chunk) => (output += chunk))
  const exit = new Promise<number | null>((resolve) => child.once('close', resolve))
  return {
    pid: child.pid ?? 0,
    output: () => output,
    exit,
    says: (text) =>
      new Promise((resolve, reject) => {
        const look = () => output.includes(text) && resolve()
        look()
        child.stdout.on('data', look)
        child.stderr.on('data', look)
        void exit.then((code) =>
          reject(new Error(`It ended with ${code} before it said "${text}":\n${output}`)),
        )
      }),
  }
}

const running = 'Stop with Ctrl-C.'
const databaseProcesses = () => processesWith('mariadbd', `--datadir=${directory}/`)

function pidIn(file: string): number | undefined {
  try {
    return Number(readFileSync(join(directory, file), 'utf8'))
  } catch {
    return undefined
  }
}

const isReady = async () => (await fetch(`http://127.0.0.1:${port}/api/v1/ready`)).status

describe('npm start', () => {
  it('serves, says where, and on SIGTERM ends everything it started', async () => {
    const maslin = start({ MASLIN_DEMO: 'on' })
    await maslin.says(running)
    expect(maslin.output()).toContain(`http://localhost:${port}`)
    expect(maslin.output()).toMatch(/ owner +\S+@\S+ +password +\S{12,}/)
    expect(await isReady()).toBe(200)
    const server = pidIn('server.pid') ?? 0
    expect(commandOf(server)).toContain('server.js')
    expect(databaseProcesses()).toHaveLength(1)
    expect(statSync(join(directory, 'secrets.json')).mode & 0o077).toBe(0)

    process.kill(maslin.pid, 'SIGTERM')
    expect(await maslin.exit).toBe(0)
    expect(commandOf(server)).toBeUndefined()
    expect(databaseProcesses()).toEqual([])
    expect(readFileSync(join(directory, 'mariadb/mariadb.log'), 'utf8').trimEnd()).toMatch(
      /Shutdown complete$/,
    )
  })

  it('starts again after it and the database were killed, with the same secrets', async () => {
    const first = start()
    await first.says(running)
    const secrets = readFileSync(join(directory, 'secrets.json'), 'utf8')
    process.kill(first.pid, 'SIGKILL')
    databaseProcesses().forEach((pid) => process.kill(pid, 'SIGKILL'))
    await first.exit

    const second = start()
    await second.says(running)
    expect(await isReady()).toBe(200)
    expect(readFileSync(join(directory, 'secrets.json'), 'utf8')).toBe(secrets)
  })

  it('starts again beside the server and database that a killed start has left running', async () => {
    const first = start()
    await first.says(running)
    const left = [pidIn('server.pid') ?? 0, ...databaseProcesses()]
    process.kill(first.pid, 'SIGKILL')
    await first.exit
    expect(left.map(commandOf).every(Boolean)).toBe(true)

    const second = start()
    await second.says(running)
    expect(await isReady()).toBe(200)
    expect(left.map(commandOf)).toEqual(left.map(() => undefined))
    expect(databaseProcesses()).toHaveLength(1)
  })

  it('brings the database back when it dies, and the server goes on with it', async () => {
    const maslin = start()
    await maslin.says(running)
    databaseProcesses().forEach((pid) => process.kill(pid, 'SIGKILL'))
    await maslin.says('MariaDB is back.')
    await expect.poll(isReady, { timeout: 30_000, interval: 200 }).toBe(200)
  })

  it('leaves nothing running when it is stopped while it still starts', async () => {
    const maslin = start()
    await expect.poll(databaseProcesses, { timeout: 30_000, interval: 5 }).not.toEqual([])
    process.kill(maslin.pid, 'SIGINT')
    expect(await maslin.exit).toBe(0)
    expect(databaseProcesses()).toEqual([])
    expect(pidIn('server.pid')).toBeUndefined()
  })

  it('uses the server of DATABASE_URL and starts none of its own', async () => {
    const database = await createTestDatabase()
    try {
      const maslin = start({ DATABASE_URL: database.url })
      await maslin.says(running)
      expect(await isReady()).toBe(200)
      expect(databaseProcesses()).toEqual([])
      const tables = await asAdministrator((connection) =>
        connection.query(`SHOW TABLES FROM ${database.name}`),
      )
      expect(tables.length).toBeGreaterThan(10)
      process.kill(maslin.pid, 'SIGTERM')
      expect(await maslin.exit).toBe(0)
    } finally {
      await database.drop()
    }
  })

  it('does not start twice on the same data', async () => {
    const first = start()
    await first.says(running)
    const second = start({ PORT: String(await freePort()) })
    expect(await second.exit).toBe(1)
    expect(second.output()).toContain(`process ${first.pid}`)
    expect(await isReady()).toBe(200)
  })

  it('says so when the port is taken, and starts nothing', async () => {
    const other = createServer()
    await new Promise<void>((resolve) => other.listen(port, '127.0.0.1', resolve))
    try {
      const maslin = start()
      expect(await maslin.exit).toBe(1)
      expect(maslin.output()).toMatch(new RegExp(`Port ${port} is in use[^]*PORT=\\d+ npm start`))
      expect(databaseProcesses()).toEqual([])
    } finally {
      await new Promise((resolve) => other.close(resolve))
    }
  })

  it('says so when PORT is not a port', async () => {
    const maslin = start({ PORT: '80 80' })
    expect(await maslin.exit).toBe(1)
    expect(maslin.output()).toContain('PORT is "80 80"')
  })
})
