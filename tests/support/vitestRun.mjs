// @ts-check
import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { inProject } from '../../backend/scripts/paths.mjs'
import { run } from '../../backend/scripts/processes.mjs'
import { say } from '../../backend/scripts/say.mjs'

/**
 * Runs Vitest and counts what came out of it.
 * A file that does not load, an error outside of a test and a skipped test each count as a failure: none of them
 * says that the code is right.
 * @param {string[]} filters names of projects, or parts of the paths of test files; none for all
 * @param {NodeJS.ProcessEnv} env
 * @returns {Promise<{ passed: number, failed: number }>}
 */
export async function runVitest(filters, env) {
  const directory = mkdtempSync(join(tmpdir(), 'maslin-vitest-'))
  const report = join(directory, 'report.json')
  const projects = filters.filter((it) => projectNames().includes(it))
  const { code } = await run(
    process.execPath,
    [
      inProject('node_modules/vitest/vitest.mjs'),
      'run',
      '--reporter=default',
      '--reporter=json',
      `--outputFile.json=${report}`,
      ...projects.map((name) => `--project=${name}`),
      ...filters.filter((it) => !projects.includes(it)),
    ],
    { env },
  )
  try {
    return count(JSON.parse(readFileSync(report, 'utf8')), code)
  } catch (error) {
    say(`Vitest ended without a report (exit code ${code}): ${String(error)}`)
    return { passed: 0, failed: 1 }
  } finally {
    rmSync(directory, { recursive: true, force: true })
  }
}

/**
 * @typedef {object} Report the parts we read of Vitest's JSON report
 * @property {number} numPassedTests
 * @property {number} numFailedTests
 * @property {number} numPendingTests skipped
 * @property {number} numTodoTests
 * @property {{ name: string, status: string, assertionResults: { status: string }[] }[]} testResults by file
 */

/**
 * What a run counts for.
 * @param {Report} report
 * @param {number} exitCode
 */
export function count(report, exitCode) {
  const unrun = report.numPendingTests + report.numTodoTests
  if (unrun > 0) say(`${unrun} tests were skipped; they count as failed.`)
  const broken = report.testResults.filter(
    (file) => file.status === 'failed' && file.assertionResults.every((it) => it.status !== 'failed'),
  )
  for (const file of broken) say(`Not run to its end: ${file.name}`)
  const failed = report.numFailedTests + unrun + broken.length
  if (failed === 0 && exitCode !== 0)
    say(`Vitest reports a failure outside of the tests (exit code ${exitCode}).`)
  return { passed: report.numPassedTests, failed: failed === 0 && exitCode !== 0 ? 1 : failed }
}

/** The projects that vitest.config.ts names. */
function projectNames() {
  const config = readFileSync(inProject('vitest.config.ts'), 'utf8')
  return [...config.matchAll(/name: '([\w-]+)'/g)].map((match) => match[1])
}
