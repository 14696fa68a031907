import { fileURLToPath } from 'node:url'
import { inProject } from './paths.mjs'
import { say, secondsSince, sayFailure, SetupError } from './say.mjs'
import { digestOf, isBuiltFrom, noteBuiltFrom } from './sources.mjs'

const outDirectory = inProject('backend', 'dist')
const sources = [
  'backend/src',
  'backend/scripts/build.mjs',
  'shared/src',
  'solver/src',
  'tsconfig.base.json',
  'package-lock.json',
]

/**
 * Leaves npm packages to be loaded from node_modules, where those with files of their own (WebAssembly, native
 * code) find them; our own workspaces are TypeScript and go into the bundle.
 * @type {import('esbuild').Plugin}
 */
const npmPackagesExternal = {
  name: 'npm-packages-external',
  setup(build) {
    build.onResolve({ filter: /^[^./]/ }, ({ path, kind }) =>
      kind === 'entry-point' || path.startsWith('@maslin/') ? undefined : { path, external: true },
    )
  },
}

/**
 * Bundles the server and its solve worker to backend/dist/server.js and backend/dist/solveWorker.js, unless they
 * are there already from the same sources.
 * @throws {SetupError} with the compiler's messages
 */
export async function buildBackend() {
  const digest = digestOf(sources)
  if (isBuiltFrom(outDirectory, digest)) return
  const start = performance.now()
  const { build, stop } = await import('esbuild')
  try {
    await build({
      entryPoints: {
        server: inProject('backend/src/server.ts'),
        solveWorker: inProject('backend/src/solving/solveWorker.ts'),
      },
      outdir: outDirectory,
      bundle: true,
      platform: 'node',
      format: 'esm',
      target: 'node20',
      sourcemap: true,
      sourcesContent: false,
      plugins: [npmPackagesExternal],
      logLevel: 'error',
    })
  } catch (error) {
    throw new SetupError('The server could not be built; the compiler said why above.', String(error))
  } finally {
    await stop()
  }
  noteBuiltFrom(outDirectory, digest)
  say(`Built the server in ${secondsSince(start)}.`)
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  buildBackend().catch((error) => {
    sayFailure(error)
    process.exitCode = 1
  })
}
