/**
 * Writes `assumed-highs.csv` from `feeds.csv` and `feed-values.csv`: what an unknown value is taken as where a maximum
 * counts it. It is the 90th percentile (linear between neighbours) of the known values of the feed's class where at
 * least five are known, and of the whole library (class `any`) otherwise. Run it after every change of the two files:
 * `node data/make-assumed-highs.mjs`; with `--check` it only says whether the file is up to date.
 */
import { readFileSync, writeFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'
import Papa from 'papaparse'

const LEAST_KNOWN = 5
const SHARE = 0.9
const folder = dirname(fileURLToPath(import.meta.url))

const readTable = (name) =>
  Papa.parse(readFileSync(join(folder, name), 'utf8'), { header: true, skipEmptyLines: true }).data

/** The value below which the given share of the sorted values lies, linear between neighbours. */
function percentile(values, share) {
  const sorted = [...values].sort((a, b) => a - b)
  const position = (sorted.length - 1) * share
  const low = Math.floor(position)
  const high = Math.min(low + 1, sorted.length - 1)
  return sorted[low] + (sorted[high] - sorted[low]) * (position - low)
}

/** The text of `assumed-highs.csv` for the given feeds and values (rows as read from the two files). */
export function assumedHighsCsv(feeds, values) {
  const classOf = new Map(feeds.map((feed) => [feed.key, feed.class]))
  const known = new Map()
  for (const { feed_key, nutrient, value } of values) {
    for (const feedClass of [classOf.get(feed_key), 'any']) {
      const key = `${feedClass} ${nutrient}`
      known.set(key, [...(known.get(key) ?? []), Number(value)])
    }
  }
  const classes = [...new Set(feeds.map((feed) => feed.class))].sort()
  const nutrients = [...new Set(values.map((row) => row.nutrient))].sort()
  const rows = [...classes, 'any'].flatMap((feedClass) =>
    nutrients.flatMap((nutrient) => {
      const list = known.get(`${feedClass} ${nutrient}`) ?? []
      if (list.length < (feedClass === 'any' ? 1 : LEAST_KNOWN)) return []
      const scope = feedClass === 'any' ? 'the whole library' : `class ${feedClass}`
      const value = Number(percentile(list, SHARE).toPrecision(6))
      return [
        [feedClass, nutrient, value, list.length, `90th percentile of the known values of ${scope}`].join(
          ',',
        ),
      ]
    }),
  )
  return ['class,nutrient,value,n,name', ...rows, ''].join('\n')
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  const target = join(folder, 'assumed-highs.csv')
  const text = assumedHighsCsv(readTable('feeds.csv'), readTable('feed-values.csv'))
  if (!process.argv.includes('--check')) writeFileSync(target, text)
  else if (readFileSync(target, 'utf8') !== text) {
    console.error('data/assumed-highs.csv is out of date: run node data/make-assumed-highs.mjs')
    process.exit(1)
  }
}
