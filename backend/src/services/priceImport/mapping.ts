import {
  importFields,
  parseMoney,
  parseNumber,
  parsePackageUnit,
  parseWeight,
  type ImportField,
  type ImportMapping,
} from '@maslin/shared'
import { guessDateOrder, parseDay, type DateOrder } from './dates'
import { nameKey } from './names'
import type { Table } from './table'

/** Words that head a column, as suppliers write them; common practice, no source. */
const headingWords: Record<ImportField, readonly string[]> = {
  feed: ['feed', 'item', 'product', 'commodity', 'ingredient', 'description', 'article', 'material', 'name'],
  supplier: ['supplier', 'vendor', 'seller', 'dealer', 'mill', 'store', 'company'],
  package: ['package', 'packaging', 'pack', 'size', 'bag', 'per'],
  quantity: ['quantity', 'qty', 'amount', 'weight', 'content'],
  unit: ['unit', 'units', 'uom', 'measure'],
  price: ['price', 'cost', 'rate', 'charge'],
  date: ['date', 'day', 'valid', 'effective', 'as of'],
}

export interface MappingHints {
  /** Whether a name is one of the farm's; tells the columns of names where no heading does. */
  isFeedName: (name: string) => boolean
  isSupplierName: (name: string) => boolean
  /** The order of day and month that the farm writes. */
  usualDateOrder: DateOrder
}

const sampleSize = 200
/** As many columns as a mapping can name; a row of more is looked at so far. */
const mostColumns = 100

/** Recognises the columns of a list: by their headings, then by what stands in them. */
export function guessMapping({ rows, delimiter }: Table, hints: MappingHints): ImportMapping {
  const sample = rows.slice(0, sampleSize).map((row) => row.cells.slice(0, mostColumns))
  const header = hasHeader(sample)
  const body = sample.slice(header ? 1 : 0)
  const width = Math.max(0, ...sample.map((cells) => cells.length))
  const columns = Array.from({ length: width }, (_, at) =>
    body.map((cells) => cells[at]?.trim() ?? '').filter((cell) => cell !== ''),
  )
  const found = header ? byHeading(sample[0] ?? []) : {}
  addByContent(found, columns, hints)
  correctPackage(found, columns)
  return {
    header,
    delimiter,
    decimal: guessDecimal(found.price === undefined ? columns.flat() : (columns[found.price] ?? [])),
    dateOrder: guessDateOrder(columns[found.date ?? -1] ?? [], hints.usualDateOrder),
    columns: found,
  }
}

type Columns = ImportMapping['columns']

/** A heading holds words only: no price, no date, no weight. */
function hasHeader([first]: readonly string[][]): boolean {
  return first !== undefined && !first.some((cell) => looksLikeData(cell))
}

const looksLikeData = (cell: string): boolean =>
  parseMoney(cell).ok || parseNumber(cell).ok || isDay(cell) || (/\d/.test(cell) && parseWeight(cell).ok)

const isDay = (cell: string): boolean =>
  parseDay(cell, 'mdy') !== undefined || parseDay(cell, 'dmy') !== undefined

function byHeading(headings: readonly string[]): Columns {
  const candidates = headings.flatMap((heading, column) =>
    importFields.map((field) => ({ field, column, score: headingScore(heading, field) })),
  )
  const found: Columns = {}
  const taken = new Set<number>()
  for (const { field, column, score } of candidates.sort(
    (a, b) => b.score - a.score || a.column - b.column,
  )) {
    if (score === 0 || found[field] !== undefined || taken.has(column)) continue
    found[field] = column
    taken.add(column)
  }
  return found
}

/** 3: the heading is the word; 2: it begins with it; 1: it holds it. Words further down a list count a little less. */
function headingScore(heading: string, field: ImportField): number {
  const key = ` ${nameKey(heading)} `
  return headingWords[field].reduce((best, word, rank) => {
    const at = key.indexOf(` ${word} `)
    const score = at < 0 ? 0 : key.trim() === word ? 3 : at === 0 ? 2 : 1
    return Math.max(best, score === 0 ? 0 : score - rank / 100)
  }, 0)
}

function addByContent(found: Columns, columns: readonly string[][], hints: MappingHints): void {
  const tests: [ImportField, (cell: string) => boolean, number][] = [
    ['date', isDay, 0.6],
    ['package', (cell) => parseWeight(cell).ok, 0.6],
    ['feed', hints.isFeedName, 0.3],
    ['supplier', hints.isSupplierName, 0.3],
    ['unit', (cell) => parsePackageUnit(cell) !== undefined, 0.6],
    ['price', (cell) => parseMoney(cell).ok, 0.6],
    ['feed', (cell) => /\p{L}{3}/u.test(cell) && !looksLikeData(cell), 0.6],
  ]
  for (const [field, test, least] of tests) {
    if (found[field] !== undefined) continue
    if (field === 'package' && found.unit !== undefined) continue
    if (field === 'unit' && found.package !== undefined) continue
    const column = bestColumn(found, columns, test, least)
    if (column !== undefined) found[field] = column
  }
}

function bestColumn(
  found: Columns,
  columns: readonly string[][],
  test: (cell: string) => boolean,
  least: number,
): number | undefined {
  const taken = new Set(Object.values(found))
  let best: { column: number; share: number } | undefined
  columns.forEach((cells, column) => {
    if (taken.has(column) || cells.length === 0) return
    const share = cells.filter(test).length / cells.length
    if (share >= least && share > (best?.share ?? 0)) best = { column, share }
  })
  return best?.column
}

/** Headings such as "Unit", "Weight" or "Size" stand over all of them: `50 lb` is a package, `lb` a unit, `50` a quantity. */
function correctPackage(found: Columns, columns: readonly string[][]): void {
  const most = (column: number | undefined, test: (cell: string) => boolean) => {
    const cells = columns[column ?? -1] ?? []
    return cells.length > 0 && cells.filter(test).length / cells.length > 0.5
  }
  const isWhole = (cell: string) => /\d/.test(cell) && parseWeight(cell).ok
  for (const field of ['unit', 'quantity'] as const) {
    if (found.package === undefined && most(found[field], isWhole)) {
      found.package = found[field]
      delete found[field]
    }
  }
  if (found.package === undefined) return
  if (most(found.package, (cell) => parseNumber(cell).ok) && found.quantity === undefined) {
    found.quantity = found.package
    delete found.package
  } else if (
    most(found.package, (cell) => parsePackageUnit(cell) !== undefined) &&
    found.unit === undefined
  ) {
    found.unit = found.package
    delete found.package
  }
}

/** The end of a cell tells its decimal sign; nobody writes a longer price. */
const longestPrice = 40

function guessDecimal(cells: readonly string[]): ImportMapping['decimal'] {
  const count = (pattern: RegExp) =>
    cells.filter((cell) => pattern.test(cell.slice(-longestPrice).replace(/[^\d.,]+$/, ''))).length
  return count(/\d,\d{1,2}$/) > count(/\d\.\d{1,4}$/) ? ',' : '.'
}

/** Fields that a list needs and neither a column nor the request gives. */
export function missingFields(
  { columns }: ImportMapping,
  given: { supplierName?: string | undefined; date?: string | undefined },
): ImportField[] {
  const has = (field: ImportField) => columns[field] !== undefined
  return [
    ...(has('feed') ? [] : (['feed'] as const)),
    ...(has('supplier') || given.supplierName ? [] : (['supplier'] as const)),
    ...(has('package') || has('unit') ? [] : (['package'] as const)),
    ...(has('price') ? [] : (['price'] as const)),
    ...(has('date') || given.date ? [] : (['date'] as const)),
  ]
}
