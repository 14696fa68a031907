// @ts-check
/**
 * `npm test`: prepares a machine that has nothing but Node, then runs every check, and ends with the line
 * "N passed, N failed" over all of them. `npm test -- api faults` runs only those: names of Vitest's projects,
 * of the other checks (typecheck, lint), or parts of the paths of test files.
 * Plain JavaScript, since it runs before any package is installed.
 */
import { buildBackend } from '../backend/scripts/build.mjs'
import { ensurePrograms } from '../backend/scripts/debian.mjs'
import { buildFrontend } from '../backend/scripts/frontend.mjs'
import { checkNode, ensurePackages } from '../backend/scripts/packages.mjs'
import { run } from '../backend/scripts/processes.mjs'
import { say, sayFailure, secondsSince } from '../backend/scripts/say.mjs'
import { startTestServer } from './support/testServer.mjs'
import { runVitest } from './support/vitestRun.mjs'

/** @typedef {{ passed: number, failed: number }} Count */

const checks = ['typecheck', 'lint']
/** Vitest's projects that need neither MariaDB nor the built application. */
const withoutServer = ['unit', 'frontend', 'reference']
const wanted = process.argv.slice(2)
const tests = wanted.filter((it) => !checks.includes(it))

/** @type {(() => Promise<void>) | undefined} */
let stopServer
for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) {
  process.on(signal, () => {
    // The server ends with this process.
    say(`\nInterrupted by ${signal}.`)
    process.exit(1)
  })
}

try {
  checkNode()
  await ensurePrograms('mariadb', 'mariadbClient', 'chromium', 'glpsol')
  await ensurePackages()
  const counts = []
  if (wanted.length === 0 || tests.length < wanted.length) counts.push(...(await runChecks()))
  if (wanted.length === 0 || tests.length > 0) counts.push(...(await runTests()))
  await stopServer?.()
  finish(counts)
} catch (error) {
  sayFailure(error)
  await stopServer?.()
  finish([{ passed: 0, failed: 1 }])
}

/** Those of the checks that are asked for, side by side: each keeps one core busy. */
function runChecks() {
  const chosen = checks.filter((name) => wanted.length === 0 || wanted.includes(name))
  return Promise.all(
    chosen.map(async (name) => {
      const start = performance.now()
      const { code, output } = await run('npm', ['run', '--silent', name], { quiet: true })
      say(`${code === 0 ? 'passed' : 'FAILED'}  ${name} (${secondsSince(start)})`)
      if (code !== 0) say(output.trim())
      return { passed: code === 0 ? 1 : 0, failed: code === 0 ? 0 : 1 }
    }),
  )
}

/** @returns {Promise<Count[]>} */
async function runTests() {
  if (tests.length > 0 && tests.every((it) => withoutServer.includes(it)))
    return [await runVitest(tests, process.env)]
  const built = await build()
  const server = await startTestServer()
  stopServer = server.stop
  return [built, await runVitest(tests, { ...process.env, TEST_DATABASE_URL: server.url })]
}

/**
 * Browser and fault tests run the application as it is shipped. Where it cannot be built the other tests still
 * have something to say.
 * @returns {Promise<Count>}
 */
async function build() {
  try {
    await Promise.all([buildFrontend(), buildBackend()])
    return { passed: 1, failed: 0 }
  } catch (error) {
    sayFailure(error)
    return { passed: 0, failed: 1 }
  }
}

/** @param {Count[]} counts */
function finish(counts) {
  const passed = counts.reduce((sum, it) => sum + it.passed, 0)
  const failed = counts.reduce((sum, it) => sum + it.failed, 0)
  if (passed + failed === 0) say('No test ran.')
  // Written out before the exit, also into a pipe.
  process.stdout.write(`\n${passed} passed, ${failed} failed\n`, () => {
    process.exit(failed > 0 || passed === 0 ? 1 : 0)
  })
}
