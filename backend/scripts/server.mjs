import { spawn } from 'node:child_process'
import { closeSync, existsSync, openSync, readFileSync, renameSync } from 'node:fs'
import { join } from 'node:path'
import { setTimeout as delay } from 'node:timers/promises'
import { inProject } from './paths.mjs'
import { portIsFree } from './ports.mjs'
import { endProcess, endWithUs, forgetPid, notePid, pidFrom } from './processes.mjs'
import { SetupError } from './say.mjs'

const readyWithinMs = 180_000
/** Longer than the server itself gives the requests in flight when it is told to stop (15 s by default). */
const stopWithinMs = (Number(process.env.SHUTDOWN_SECONDS) || 15) * 1000 + 10_000
const marker = 'backend/'

/**
 * The port to serve on: PORT, else 8080.
 * @returns {number}
 * @throws {SetupError} when PORT is not a port number
 */
export function wantedPort() {
  const text = process.env.PORT || '8080'
  const port = Number(text)
  if (Number.isInteger(port) && port > 0 && port < 65536) return port
  throw new SetupError(`PORT is "${text}", which is not a port number (1 to 65535).`)
}

/**
 * @param {number} port
 * @throws {SetupError} when somebody else listens there
 */
export async function requireFreePort(port) {
  if (await portIsFree(port)) return
  throw new SetupError(
    `Port ${port} is in use by another program, or this user may not use it.`,
    `Stop that program, or start on another port:\n  PORT=${port < 65000 ? port + 1 : 8080} npm start`,
  )
}

/**
 * Ends an application server whose start was killed before it could do so.
 * @param {string} directory Maslin's data directory
 */
export async function endLeftoverServer(directory) {
  const file = join(directory, 'server.pid')
  const pid = pidFrom(file, marker)
  if (pid) await endProcess(pid, stopWithinMs)
  forgetPid(file)
}

/**
 * Starts the application server. What it prints goes to `server.log` in the data directory (the one before is
 * kept as `server.log.1`), or to our own output with MASLIN_LOG=stdout.
 * @param {object} options
 * @param {string} options.directory Maslin's data directory
 * @param {string[]} options.command arguments for Node
 * @param {Record<string, string | undefined>} options.env in addition to ours
 * @param {number} options.port
 * @param {boolean} [options.toStdout] print what it prints; default: as MASLIN_LOG says
 */
export function startServer({
  directory,
  command,
  env,
  port,
  toStdout = process.env.MASLIN_LOG === 'stdout',
}) {
  const log = join(directory, 'server.log')
  const output = toStdout ? 'inherit' : freshLog(log)
  const child = spawn(process.execPath, command, {
    cwd: inProject(),
    env: { ...process.env, ...env, PORT: String(port) },
    stdio: ['ignore', output, output],
    // A session of its own, so that Ctrl-C in the terminal reaches us alone and the order of stopping is ours.
    detached: true,
  })
  endWithUs(child)
  if (typeof output === 'number') closeSync(output)
  notePid(join(directory, 'server.pid'), child.pid)
  const host = ownAddress(env.HOST ?? process.env.HOST)
  let gone = false
  /** @type {Promise<void>} */
  const ended = new Promise((resolve) => {
    const end = () => {
      gone = true
      resolve()
    }
    child.once('error', end)
    child.once('exit', end)
  })
  const why = () => (toStdout ? 'It said why above.' : `The end of its log (${log}):\n${endOf(log)}`)

  return {
    /** Settles when the server is gone, for whatever reason. */
    ended,
    /** The failure to report when it ended by itself. */
    failure: () => new SetupError(`The server ended unexpectedly. ${why()}`),
    /** Waits until the database and the workers answer. */
    ready: async () => {
      for (const end = Date.now() + readyWithinMs; Date.now() < end; await delay(100)) {
        if (gone) throw new SetupError(`The server did not start. ${why()}`)
        if (await isReady(host, port)) return
      }
      throw new SetupError(`The server did not become ready within ${readyWithinMs / 1000} s. ${why()}`)
    },
    stop: async () => {
      child.kill('SIGTERM')
      const late = setTimeout(() => child.kill('SIGKILL'), stopWithinMs)
      await ended
      clearTimeout(late)
      forgetPid(join(directory, 'server.pid'))
    },
  }
}

/**
 * Where the server is reached from this machine.
 * @param {string | undefined} host the address it listens on
 */
function ownAddress(host) {
  if (!host || host === '0.0.0.0' || host === '::') return '127.0.0.1'
  return host.includes(':') ? `[${host}]` : host
}

/**
 * @param {string} host
 * @param {number} port
 */
async function isReady(host, port) {
  try {
    const answer = await fetch(`http://${host}:${port}/api/v1/ready`, { signal: AbortSignal.timeout(5000) })
    await answer.body?.cancel()
    return answer.ok
  } catch {
    return false
  }
}

/** @param {string} log */
function freshLog(log) {
  if (existsSync(log)) renameSync(log, `${log}.1`)
  return openSync(log, 'a', 0o600)
}

/** @param {string} log */
function endOf(log) {
  return readFileSync(log, 'utf8').trim().split('\n').slice(-20).join('\n') || '(nothing)'
}
