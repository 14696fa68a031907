import { accessSync, constants } from 'node:fs'
import { delimiter, join } from 'node:path'
import { setTimeout as delay } from 'node:timers/promises'
import { run } from './processes.mjs'
import { say, secondsSince, SetupError } from './say.mjs'

/**
 * The programs Maslin uses that npm cannot bring, and the Debian packages they come in. The server is taken
 * from `mariadb-server-core`: the same program as in `mariadb-server`, without the system's service around it.
 */
const programs = {
  mariadb: {
    name: 'MariaDB',
    commands: ['mariadbd', 'mariadb-install-db'],
    packages: ['mariadb-server-core'],
  },
  mariadbClient: { name: 'the MariaDB client', commands: ['mariadb-dump'], packages: ['mariadb-client'] },
  chromium: { name: 'Chromium', commands: ['chromium'], packages: ['chromium'] },
  glpsol: { name: 'GLPK', commands: ['glpsol'], packages: ['glpk-utils'] },
}

const systemDirectories = ['/usr/local/sbin', '/usr/local/bin', '/usr/sbin', '/usr/bin', '/sbin', '/bin']

/**
 * Finds a program on PATH or in the system directories, which a user's PATH often lacks.
 * @param {string} command
 * @returns {string | undefined} absolute path
 */
export function findProgram(command) {
  const directories = [...(process.env.PATH ?? '').split(delimiter).filter(Boolean), ...systemDirectories]
  return directories
    .map((directory) => join(directory, command))
    .find((path) => {
      try {
        accessSync(path, constants.X_OK)
        return true
      } catch {
        return false
      }
    })
}

/**
 * Makes sure that programs are installed, by Debian's package manager where we may use it.
 * @param {...(keyof typeof programs)} keys
 * @throws {SetupError} saying what to run, where they are missing and we may not install
 */
export async function ensurePrograms(...keys) {
  const missing = keys
    .map((key) => programs[key])
    .filter((it) => it.commands.some((command) => !findProgram(command)))
  if (missing.length === 0) return

  const names = missing.map((it) => it.name).join(', ')
  const packages = missing.flatMap((it) => it.packages)
  const byHand = `apt-get update && apt-get install -y --no-install-recommends ${packages.join(' ')}`
  if (!findProgram('apt-get')) {
    throw new SetupError(
      `Not installed: ${names}. This is not a Debian system, so it cannot be installed from here.`,
      `Install it with your system's package manager and start again. On Debian:\n  sudo sh -c '${byHand}'`,
    )
  }
  const prefix = await privilege()
  if (!prefix) {
    throw new SetupError(
      `Not installed: ${names}. Installing needs administrator rights, which this user has not got.`,
      `Run this, then start again:\n  sudo sh -c '${byHand}'`,
    )
  }
  say(`Installing ${names} (Debian packages ${packages.join(', ')}) …`)
  const start = performance.now()
  await install(prefix, packages, byHand)
  const still = missing.flatMap((it) => it.commands).filter((command) => !findProgram(command))
  if (still.length > 0) {
    throw new SetupError(`The packages are installed, but ${still.join(', ')} cannot be found on PATH.`)
  }
  say(`Installed ${names} in ${secondsSince(start)}.`)
}

/** Words to put before a command that needs administrator rights; undefined where we have none without a password. */
async function privilege() {
  if (process.getuid?.() === 0) return ['env']
  if (!findProgram('sudo')) return undefined
  const { code } = await run('sudo', ['-n', 'true'], { quiet: true })
  return code === 0 ? ['sudo', '-n', 'env'] : undefined
}

/**
 * @param {string[]} prefix
 * @param {string[]} packages
 * @param {string} byHand the same as a command line, for the message
 */
async function install(prefix, packages, byHand) {
  const [command = 'env', ...before] = [...prefix, 'DEBIAN_FRONTEND=noninteractive', 'apt-get', '-q']
  const wait = ['-o', 'DPkg::Lock::Timeout=300']
  for (const args of [['update'], [...wait, 'install', '-y', '--no-install-recommends', ...packages]]) {
    const { code, output } = await patiently(() => run(command, [...before, ...args], { quiet: true }))
    // A mirror that cannot be refreshed need not stop the install: the packages may be known already.
    if (code !== 0 && args[0] !== 'update') {
      throw new SetupError(
        `apt-get could not install ${packages.join(', ')}:\n${output.trim().split('\n').slice(-12).join('\n')}`,
        `Put that right, or run this yourself and start again:\n  sudo sh -c '${byHand}'`,
      )
    }
  }
}

/**
 * Repeats a package-manager call while another one holds the lock; apt's own waiting covers only part of them.
 * @param {() => Promise<{ code: number, output: string }>} call
 */
async function patiently(call) {
  for (const end = Date.now() + 300_000; ; await delay(2000)) {
    const result = await call()
    if (result.code === 0 || !/Could not get lock|Unable to lock/.test(result.output) || Date.now() > end)
      return result
  }
}
