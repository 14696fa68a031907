import { createRequire } from 'node:module'
import { dirname, join } from 'node:path'
import { stripVTControlCharacters } from 'node:util'
import { inProject } from './paths.mjs'
import { run } from './processes.mjs'
import { say, secondsSince, SetupError } from './say.mjs'
import { digestOf, isBuiltFrom, noteBuiltFrom } from './sources.mjs'

const outDirectory = inProject('frontend', 'dist')
const sources = [
  'frontend/index.html',
  'frontend/vite.config.ts',
  'frontend/src',
  'frontend/public',
  'shared/src',
  'solver/src',
  'package-lock.json',
]

/**
 * The path of a file of the Vite that the frontend's workspace uses.
 * @param {...string} parts
 */
export function inVite(...parts) {
  return join(
    dirname(createRequire(inProject('frontend', 'package.json')).resolve('vite/package.json')),
    ...parts,
  )
}

/**
 * Builds the pages to frontend/dist, unless they are there already from the same sources.
 * @throws {SetupError} with the end of what Vite said
 */
export async function buildFrontend() {
  const digest = digestOf(sources)
  if (isBuiltFrom(outDirectory, digest)) return
  const start = performance.now()
  say('Building the pages …')
  const { code, output } = await run(
    process.execPath,
    [inVite('bin', 'vite.js'), 'build', '--logLevel', 'warn'],
    {
      quiet: true,
      cwd: inProject('frontend'),
      env: { ...process.env, NODE_ENV: 'production' },
    },
  )
  if (code !== 0) {
    const lines = stripVTControlCharacters(output).trim().split('\n')
    // The bundler's own stack says nothing about our sources.
    const message = lines.filter((line) => !/^ {4}at /.test(line)).slice(-30)
    throw new SetupError(`The pages could not be built:\n${message.join('\n')}`)
  }
  noteBuiltFrom(outDirectory, digest)
  say(`Built the pages in ${secondsSince(start)}.`)
}
