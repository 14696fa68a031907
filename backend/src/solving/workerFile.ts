import { createHash } from 'node:crypto'
import { mkdir, rename, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'

/**
 * Path of the solver's worker script. In a build it lies beside the server; when running from the TypeScript sources it
 * is bundled now into the cache directory, since a worker thread loads plain JavaScript fastest and without a loader.
 */
export async function findWorkerFile(): Promise<string> {
  const here = fileURLToPath(import.meta.url)
  if (!here.endsWith('.ts')) return fileURLToPath(new URL('./solveWorker.js', import.meta.url))
  const sources = fileURLToPath(new URL('.', import.meta.url))
  return bundle(join(sources, 'solveWorker.ts'), join(sources, '../../../node_modules/.cache/maslin'))
}

async function bundle(entry: string, directory: string): Promise<string> {
  const { build } = await import('esbuild')
  const result = await build({
    entryPoints: [entry],
    bundle: true,
    write: false,
    platform: 'node',
    format: 'esm',
    target: 'node20',
    logLevel: 'silent',
    plugins: [
      {
        name: 'packages-stay-outside',
        setup: (context) =>
          context.onResolve({ filter: /^[^./]/ }, ({ path, kind }) =>
            kind === 'entry-point' || path.startsWith('@maslin/') ? undefined : { path, external: true },
          ),
      },
    ],
  })
  const text = result.outputFiles[0]?.contents
  if (!text) throw new Error('the solver worker could not be bundled')
  const file = join(
    directory,
    `solveWorker-${createHash('sha256').update(text).digest('hex').slice(0, 16)}.mjs`,
  )
  await mkdir(directory, { recursive: true })
  // Several processes may do this at once: written apart, then put in place whole.
  await writeFile(`${file}.${process.pid}`, text)
  await rename(`${file}.${process.pid}`, file)
  return file
}
