import { existsSync, readFileSync } from 'node:fs'
import { inProject } from './paths.mjs'
import { run } from './processes.mjs'
import { say, secondsSince, SetupError } from './say.mjs'

const oldestNode = [20, 11]

/** @throws {SetupError} when Node is older than Maslin can run on */
export function checkNode() {
  const [major = 0, minor = 0] = process.versions.node.split('.').map(Number)
  const [needsMajor = 0, needsMinor = 0] = oldestNode
  if (major > needsMajor || (major === needsMajor && minor >= needsMinor)) return
  throw new SetupError(
    `Maslin needs Node.js ${oldestNode.join('.')} or newer; this is ${process.versions.node}.`,
    'Install a newer one from https://nodejs.org and start again.',
  )
}

/**
 * Installs the npm packages where they are missing or not the ones the lock file names.
 * @throws {SetupError} when npm fails
 */
export async function ensurePackages() {
  if (packagesAreCurrent()) return
  const start = performance.now()
  say('Installing the npm packages …')
  // Also on a production machine: the frontend and the server are built here.
  const flags = ['--include=dev', '--no-audit', '--no-fund', '--loglevel=error']
  const locked = existsSync(inProject('package-lock.json'))
  let result = await npm([locked ? 'ci' : 'install', ...flags])
  // The lock file lags behind an edited package.json: npm says so before it has touched anything.
  if (locked && /EUSAGE/.test(result.output)) result = await npm(['install', ...flags])
  if (result.code !== 0) {
    throw new SetupError(
      `npm could not install the packages:\n${result.output.trim().split('\n').slice(-15).join('\n')}`,
      `Put that right, or run "npm ci" in ${inProject()} yourself, and start again.`,
    )
  }
  say(`Installed the npm packages in ${secondsSince(start)}.`)
}

/**
 * Compares what is installed, by the list npm leaves in node_modules when it is done, with the lock file.
 * @returns {boolean}
 */
function packagesAreCurrent() {
  const wanted = packagesIn(inProject('package-lock.json'))
  const installed = packagesIn(inProject('node_modules', '.package-lock.json'))
  if (!wanted || !installed) return false
  return Object.entries(wanted).every(([path, entry]) => {
    const found = installed[path]
    if (found) return found.version === entry.version
    // The project itself is not in npm's list, nor are builds for other kinds of machine.
    return path === '' || entry.optional === true
  })
}

/**
 * @param {string} file
 * @returns {Record<string, { version?: string, optional?: boolean }> | undefined}
 */
function packagesIn(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8')).packages
  } catch {
    return undefined
  }
}

/** @param {string[]} args */
function npm(args) {
  const script = process.env.npm_execpath
  return script
    ? run(process.execPath, [script, ...args], { quiet: true })
    : run('npm', args, { quiet: true })
}
