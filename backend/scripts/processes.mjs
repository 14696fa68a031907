import { spawn } from 'node:child_process'
import { readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { setTimeout as delay } from 'node:timers/promises'
import { projectRoot } from './paths.mjs'

/** @type {Set<import('node:child_process').ChildProcess>} */
const children = new Set()
process.once('exit', () => children.forEach((child) => child.kill('SIGTERM')))

/**
 * Sees to it that a child is told to end when this process does, in whatever way that comes about short of a
 * SIGKILL.
 * @param {import('node:child_process').ChildProcess} child
 */
export function endWithUs(child) {
  children.add(child)
  child.once('exit', () => children.delete(child))
}

/**
 * Runs a command to its end.
 * @param {string} command
 * @param {string[]} args
 * @param {{ quiet?: boolean, env?: NodeJS.ProcessEnv, cwd?: string }} [options] quiet: keep the output for the caller
 * @returns {Promise<{ code: number, output: string }>} exit code (127 where the command does not exist) and,
 *   with `quiet`, everything it wrote
 */
export function run(command, args, { quiet = false, env = process.env, cwd = projectRoot } = {}) {
  return new Promise((resolve) => {
    const child = spawn(command, args, { cwd, env, stdio: quiet ? ['ignore', 'pipe', 'pipe'] : 'inherit' })
    endWithUs(child)
    let output = ''
    child.stdout?.on('data', (chunk) => (output += chunk))
    child.stderr?.on('data', (chunk) => (output += chunk))
    child.on('error', (error) => resolve({ code: 127, output: error.message }))
    child.on('close', (code) => resolve({ code: code ?? 1, output }))
  })
}

/**
 * The command line of a running process, its words separated by spaces; undefined when it is gone or a zombie.
 * Where there is no /proc, an empty text stands for "alive, command unknown".
 * @param {number} pid
 * @returns {string | undefined}
 */
export function commandOf(pid) {
  try {
    return readFileSync(`/proc/${pid}/cmdline`, 'utf8').replaceAll('\0', ' ').trim() || undefined
  } catch {
    if (process.platform === 'linux') return undefined
  }
  try {
    process.kill(pid, 0)
    return ''
  } catch {
    return undefined
  }
}

/**
 * Running processes whose command line holds every one of the given texts. Needs /proc; elsewhere the list is
 * empty and callers rely on their pid files.
 * @param {...string} texts
 * @returns {number[]}
 */
export function processesWith(...texts) {
  if (process.platform !== 'linux') return []
  return readdirSync('/proc')
    .filter((name) => /^\d+$/.test(name))
    .map(Number)
    .filter((pid) => {
      const command = commandOf(pid)
      return command !== undefined && texts.every((text) => command.includes(text))
    })
}

/**
 * Ends a process that need not be our child: SIGTERM, then SIGKILL after the grace.
 * @param {number} pid
 * @param {number} graceMs
 * @returns {Promise<boolean>} true when it ended by itself within the grace
 */
export async function endProcess(pid, graceMs) {
  const signal = (/** @type {NodeJS.Signals} */ name) => {
    try {
      process.kill(pid, name)
    } catch {
      // Already gone: that is what we want.
    }
  }
  signal('SIGTERM')
  for (const end = Date.now() + graceMs; Date.now() < end; await delay(50)) {
    if (commandOf(pid) === undefined) return true
  }
  signal('SIGKILL')
  while (commandOf(pid) !== undefined) await delay(50)
  return false
}

/**
 * The process noted in a pid file, if it still runs the command we noted it for. A stale file, also one whose
 * number another program has since been given, counts as none.
 * @param {string} file
 * @param {string} marker part of the command line
 * @returns {number | undefined}
 */
export function pidFrom(file, marker) {
  let pid
  try {
    pid = Number(readFileSync(file, 'utf8'))
  } catch {
    return undefined
  }
  if (!Number.isInteger(pid) || pid <= 1 || pid === process.pid) return undefined
  const command = commandOf(pid)
  return command === '' || command?.includes(marker) ? pid : undefined
}

/**
 * Notes a process in a pid file.
 * @param {string} file
 * @param {number | undefined} pid
 */
export function notePid(file, pid) {
  writeFileSync(file, `${pid}\n`)
}

/**
 * Removes a pid file, if there is one.
 * @param {string} file
 */
export function forgetPid(file) {
  rmSync(file, { force: true })
}
