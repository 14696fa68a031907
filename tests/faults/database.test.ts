import { createConnection, type Connection } from 'mariadb'
import { existsSync, mkdirSync, mkdtempSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { createServer, type Server } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { keepMariaDb, startMariaDb } from '../../backend/scripts/mariadb.mjs'
import { freePort } from '../../backend/scripts/ports.mjs'

type Running = Awaited<ReturnType<typeof startMariaDb>>

let temporary: string
let directory: string
let port: number
const started: { stop(): Promise<void> }[] = []

beforeEach(async () => {
  temporary = mkdtempSync(join(tmpdir(), 'maslin-fault-'))
  directory = temporary
  port = await freePort()
})

afterEach(async () => {
  await Promise.all(started.splice(0).map((it) => it.stop()))
  rmSync(temporary, { recursive: true, force: true })
})

async function start(): Promise<Running> {
  const server = await startMariaDb({ directory, preferredPort: port })
  started.push(server)
  return server
}

async function connected<T>(url: string, work: (connection: Connection) => Promise<T>): Promise<T> {
  const { hostname, port, username, password, pathname } = new URL(url)
  const connection = await createConnection({
    host: hostname,
    port: Number(port),
    user: username,
    password,
    database: pathname.slice(1),
  })
  try {
    return await work(connection)
  } finally {
    await connection.end()
  }
}

const writeRows = (url: string) =>
  connected(url, async (connection) => {
    await connection.query('CREATE TABLE kept (id INT PRIMARY KEY, words VARCHAR(20) NOT NULL)')
    await connection.query("INSERT INTO kept VALUES (1, 'oats'), (2, 'σίτος')")
  })

const readRows = (url: string) =>
  connected(url, async (connection) => {
    const rows: { words: string }[] = await connection.query('SELECT words FROM kept ORDER BY id')
    return rows.map((row) => row.words)
  })

describe('the private MariaDB', () => {
  it('keeps its rows, port and password over a clean stop', async () => {
    const first = await start()
    await writeRows(first.url)
    await first.stop()
    expect(await first.ended).toBe(0)

    const second = await start()
    expect(second.url).toBe(first.url)
    expect(await readRows(second.url)).toEqual(['oats', 'σίτος'])
  })

  it('starts again with its committed rows after being killed', async () => {
    const first = await start()
    await writeRows(first.url)
    process.kill(first.pid, 'SIGKILL')
    expect(await first.ended).toBeNull()

    const second = await start()
    expect(await readRows(second.url)).toEqual(['oats', 'σίτος'])
  })

  it('takes over from a server left running on the same data by a start that was killed', async () => {
    const orphan = await start()
    await writeRows(orphan.url)

    const second = await start()
    expect(await orphan.ended).toBe(0)
    expect(second.pid).not.toBe(orphan.pid)
    expect(await readRows(second.url)).toEqual(['oats', 'σίτος'])
  })

  it('creates the data anew when the first start was cut short', async () => {
    const unfinished = join(directory, 'data.unfinished')
    mkdirSync(unfinished)
    writeFileSync(join(unfinished, 'ibdata1'), 'half a file')

    const server = await start()
    await writeRows(server.url)
    expect(await readRows(server.url)).toHaveLength(2)
    expect(existsSync(unfinished)).toBe(false)
  })

  it('takes another port when the usual one is in use', async () => {
    const other: Server = createServer()
    await new Promise<void>((resolve) => other.listen(port, '127.0.0.1', resolve))
    try {
      const server = await start()
      expect(server.port).not.toBe(port)
      await writeRows(server.url)
    } finally {
      await new Promise((resolve) => other.close(resolve))
    }
  })

  it('runs where the path of the data is too long for a socket', async () => {
    directory = join(temporary, 'a'.repeat(100))
    const server = await start()
    await writeRows(server.url)
    expect(await readRows(server.url)).toHaveLength(2)
  })

  it('lets only its owner read the password, and leaves it nowhere else', async () => {
    const server = await start()
    const { password } = new URL(server.url)
    const file = join(directory, 'mariadb.json')
    expect(statSync(file).mode & 0o777).toBe(0o600)
    expect(readFileSync(file, 'utf8')).toContain(password)
    expect(readFileSync(join(directory, 'mariadb.log'), 'utf8')).not.toContain(password)
    expect(existsSync(join(directory, 'init.sql'))).toBe(false)
    await expect(connected(server.url.replace(password, 'wrong'), readNothing)).rejects.toThrow(
      /Access denied/,
    )
    const asRoot = new URL(server.url)
    asRoot.username = 'root'
    asRoot.password = ''
    await expect(connected(asRoot.href, readNothing)).rejects.toThrow(/Access denied|not allowed to connect/)
  })

  it('runs with the settings that the application counts on', async () => {
    const server = await start()
    const [settings] = await connected(server.url, (connection) =>
      connection.query(`SELECT @@bind_address AS address, @@character_set_server AS characters,
        @@global.time_zone AS zone, @@global.tx_isolation AS isolation,
        @@innodb_flush_log_at_trx_commit AS flushed, @@global.sql_mode AS mode`),
    )
    expect(settings).toMatchObject({
      address: '127.0.0.1',
      characters: 'utf8mb4',
      zone: '+00:00',
      isolation: 'READ-COMMITTED',
    })
    expect(Number(settings.flushed)).toBe(1)
    expect(settings.mode).toContain('STRICT_ALL_TABLES')
  })

  it('says what the server said when it cannot start', async () => {
    const first = await start()
    await first.stop()
    writeFileSync(join(directory, 'data', 'ibdata1'), 'not a tablespace')
    await expect(start()).rejects.toThrow(/MariaDB did not start[^]*(corrupt|ibdata1|InnoDB)/)
  })
})

describe('a MariaDB that is kept running', () => {
  it('comes back on the same port and data when it is killed, and ends when told to', async () => {
    const onRestart = vi.fn()
    const kept = await keepMariaDb({
      directory,
      preferredPort: port,
      onRestart,
      onGivenUp: (error) => {
        throw error
      },
    })
    started.push(kept)
    await writeRows(kept.url)
    const killed = kept.pid()
    process.kill(killed, 'SIGKILL')

    await vi.waitFor(async () => expect(await readRows(kept.url)).toEqual(['oats', 'σίτος']), 30_000)
    await vi.waitFor(() => expect(kept.pid()).not.toBe(killed), 30_000)
    expect(onRestart).toHaveBeenCalledOnce()

    await kept.stop()
    await expect(readRows(kept.url)).rejects.toThrow()
    expect(onRestart).toHaveBeenCalledOnce()
  })
})

async function readNothing(connection: Connection): Promise<void> {
  await connection.query('SELECT 1')
}
