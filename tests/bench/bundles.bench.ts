import { existsSync, readFileSync } from 'node:fs'
import path from 'node:path'
import { fileURLToPath, pathToFileURL } from 'node:url'
import { gzipSync } from 'node:zlib'

/** Gzip script a person waits for before the sign-in page stands. */
const SIGN_IN_LIMIT_KB = 260
const HEAVY_LIBRARIES = ['chart.js', 'highs', 'javascript-lp-solver']

interface Chunk {
  file: string
  isEntry?: boolean
  imports?: string[]
  css?: string[]
}
type Manifest = Record<string, Chunk>

const root = path.resolve(path.dirname(fileURLToPath(import.meta.url)), '../../..')
const dist = path.join(root, 'frontend/dist')

/** Everything a page loads before it stands: its chunk, the entry, and what both import, directly or not. */
function loadedBy(manifest: Manifest, view: string): Set<string> {
  const names = new Set<string>()
  const add = (name: string): void => {
    if (names.has(name)) return
    names.add(name)
    for (const imported of manifest[name]?.imports ?? []) add(imported)
  }
  for (const [name, chunk] of Object.entries(manifest)) if (chunk.isEntry || name === view) add(name)
  return names
}

const gzipKb = (files: Iterable<string>): number =>
  [...files].reduce((sum, file) => sum + gzipSync(readFileSync(path.join(dist, file))).length, 0) / 1000

/** Sizes of what the browser loads, gzip, by the page; what is heavy must come in chunks of its own. */
export default async function benchBundles(): Promise<number> {
  const { buildFrontend } = (await import(
    pathToFileURL(path.join(root, 'backend/scripts/frontend.mjs')).href
  )) as { buildFrontend(): Promise<void> }
  await buildFrontend()
  const file = path.join(dist, '.vite/manifest.json')
  if (!existsSync(file)) throw new Error(`The build left no list of its chunks at ${file}.`)
  const manifest = JSON.parse(readFileSync(file, 'utf8')) as Manifest

  let missed = 0
  const pages = {
    'sign-in': 'src/views/account/SignInView.vue',
    feeds: 'src/views/feeds/FeedsView.vue',
    bench: 'src/views/mixes/MixBenchView.vue',
  }
  for (const [page, view] of Object.entries(pages)) {
    if (!manifest[view]) throw new Error(`The build has no chunk for ${view}.`)
    const chunks = [...loadedBy(manifest, view)].map((name) => manifest[name]!)
    const scripts = gzipKb(new Set(chunks.map((chunk) => chunk.file).filter((name) => name.endsWith('.js'))))
    const styles = gzipKb(new Set(chunks.flatMap((chunk) => chunk.css ?? [])))
    const limited = page === 'sign-in'
    const tooLarge = limited && scripts > SIGN_IN_LIMIT_KB
    if (tooLarge) missed++
    const goal = limited ? `   target ≤ ${SIGN_IN_LIMIT_KB} kB: ${tooLarge ? 'MISSED' : 'met'}` : ''
    console.log(`${page}: ${scripts.toFixed(1)} kB gzip script, ${styles.toFixed(1)} kB gzip style${goal}`)
  }

  const first = loadedBy(manifest, pages['sign-in'])
  const sources = [...first].map((name) => readFileSync(path.join(dist, manifest[name]!.file), 'utf8'))
  const marks: Record<string, RegExp> = {
    'chart.js': /beforeDatasetsDraw/,
    highs: /Highs_run|highs\.wasm/,
    'javascript-lp-solver': /lastSolvedModel/,
  }
  for (const library of HEAVY_LIBRARIES) {
    const mark = marks[library]!
    const shipped = Object.values(manifest).filter(
      ({ file: name }) => name.endsWith('.js') && mark.test(readFileSync(path.join(dist, name), 'utf8')),
    )
    const early = sources.some((source) => mark.test(source))
    if (early) missed++
    const where = shipped.map(({ file: name }) => `${name} (${gzipKb([name]).toFixed(1)} kB gzip)`).join(', ')
    console.log(
      `${library}: ${early ? 'MISSED, loaded with the sign-in page' : where ? `in ${where}, not with the sign-in page` : 'not sent to the browser'}`,
    )
  }
  return missed
}
