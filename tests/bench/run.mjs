// Benchmarks: each module prints medians as ratios of two things timed in this same run, never a time on its own, so
// that the figures mean the same on any machine. `npm run bench` runs all, `npm run bench -- solver` those named.
import { mkdir, readdir, rm } from 'node:fs/promises'
import { fileURLToPath, pathToFileURL } from 'node:url'
import path from 'node:path'
import { build } from 'esbuild'

const here = path.dirname(fileURLToPath(import.meta.url))
const output = path.join(here, '../../node_modules/.cache/maslin-bench')
const asked = process.argv.slice(2)

/** Every `*.bench.ts` beside this file; its default export is `async () => number`, the count of missed targets. */
const modules = (await readdir(here))
  .filter((file) => file.endsWith('.bench.ts'))
  .filter((file) => asked.length === 0 || asked.includes(file.replace('.bench.ts', '')))
  .sort()

// Bundled as the server is, so that what is timed is what runs.
await mkdir(output, { recursive: true })
await build({
  entryPoints: modules.map((file) => path.join(here, file)),
  outdir: output,
  outExtension: { '.js': '.mjs' },
  bundle: true,
  platform: 'node',
  format: 'esm',
  target: 'node20',
  logLevel: 'error',
  plugins: [
    {
      name: 'packages stay outside, workspaces come in',
      setup(builder) {
        builder.onResolve({ filter: /^[^./]/ }, (args) =>
          args.kind === 'entry-point' || args.path.startsWith('@maslin/') || path.isAbsolute(args.path)
            ? undefined
            : { path: args.path, external: true },
        )
      },
    },
  ],
})

let missed = 0
try {
  for (const file of modules) {
    console.log(`\n== ${file.replace('.bench.ts', '')}`)
    const module = await import(pathToFileURL(path.join(output, file.replace('.ts', '.mjs'))).href)
    missed += await module.default()
  }
} finally {
  await rm(output, { recursive: true, force: true })
}
console.log(`\n${modules.length} benchmark modules, ${missed} targets missed`)
process.exitCode = missed > 0 ? 1 : 0
