import {
  packageWeightKg,
  parseMoney,
  parseNumber,
  parsePackageUnit,
  parseWeight,
  type ImportField,
  type ImportMapping,
  type PackageUnit,
  type importProblemCodes,
} from '@maslin/shared'
import { MOST_PER_KG } from '../offers'
import { parseDay } from './dates'
import type { NameIndex, Named } from './names'
import type { TableRow } from './table'

type ProblemCode = (typeof importProblemCodes)[number]

export interface RowProblem {
  field: ImportField
  code: ProblemCode
  value: string
}

export interface ImportFeed extends Named {
  /** kg per kg as fed. */
  dryMatter: number
  testWeightKg: number | null
}

/** A row that could be read whole. */
export interface Reading {
  feed: ImportFeed
  supplierName: string
  packageQuantity: number
  packageUnit: PackageUnit
  packageKg: number
  /** Decimal text per package. */
  price: string
  /** `YYYY-MM-DD` */
  date: string
}

export type RowOutcome = { line: number; cells: string[] } & (
  { kind: 'read'; reading: Reading } | { kind: 'leftOut' } | { kind: 'error'; problems: RowProblem[] }
)

export interface ReadingRules {
  mapping: ImportMapping
  /** How many cells a row may have: those of the heading. */
  width: number
  feeds: NameIndex<ImportFeed>
  feedById: ReadonlyMap<string, ImportFeed>
  /** Names matched by hand; null leaves the rows out. */
  feedMatches: Readonly<Record<string, string | null>>
  supplierName?: string | undefined
  date?: string | undefined
  /** The last day a price may be of. */
  latest: string
}

const longestFeedName = 200
const longestSupplierName = 120
const shownOfCell = 200
const mostQuantity = 1e6
const leastQuantity = 1e-6

/** Reads one row; everything that is wrong with it is said, not just the first thing. */
export function readRow({ line, cells }: TableRow, rules: ReadingRules): RowOutcome {
  const problems: RowProblem[] = []
  const cell = (field: ImportField): string => {
    const column = rules.mapping.columns[field]
    return column === undefined ? '' : (cells[column]?.trim() ?? '')
  }
  const fail = (field: ImportField, code: ProblemCode, value = cell(field)): undefined => {
    problems.push({ field, code, value: value.slice(0, shownOfCell) })
    return undefined
  }
  if (rules.feedMatches[cell('feed')] === null && Object.hasOwn(rules.feedMatches, cell('feed'))) {
    return { line, cells, kind: 'leftOut' }
  }
  if (cells.length > rules.width) fail('feed', 'tooManyCells', cells.slice(rules.width).join(' '))
  const feed = readFeed(cell('feed'), rules, fail)
  const supplierName = readSupplier(cell('supplier') || rules.supplierName || '', fail)
  const pack = readPackage(cell, rules.mapping, fail)
  const packageKg = pack && feed ? packageWeightKg(pack.quantity, pack.unit, feed.testWeightKg) : undefined
  if (pack && feed && packageKg === undefined) fail(pack.field, 'noTestWeight')
  const price = readPrice(cell('price'), rules.mapping, fail)
  if (price && packageKg && Number(price) / packageKg >= MOST_PER_KG) fail('price', 'priceTooLarge')
  const date = readDate(cell('date'), rules, fail)
  if (problems.length > 0 || !feed || !supplierName || !pack || !packageKg || !price || !date) {
    return { line, cells, kind: 'error', problems }
  }
  const { quantity: packageQuantity, unit: packageUnit } = pack
  const reading = { feed, supplierName, packageQuantity, packageUnit, packageKg, price, date }
  return { line, cells, kind: 'read', reading }
}

type Fail = (field: ImportField, code: ProblemCode, value?: string) => undefined

function readFeed(
  name: string,
  { feeds, feedById, feedMatches }: ReadingRules,
  fail: Fail,
): ImportFeed | undefined {
  if (!name) return fail('feed', 'missingFeed')
  if (name.length > longestFeedName) return fail('feed', 'textTooLong')
  const match = Object.hasOwn(feedMatches, name) ? feedMatches[name] : undefined
  return (match ? feedById.get(match) : feeds.find(name)) ?? fail('feed', 'unknownFeed')
}

function readSupplier(name: string, fail: Fail): string | undefined {
  if (!name) return fail('supplier', 'missingSupplier')
  return name.length > longestSupplierName ? fail('supplier', 'textTooLong') : name
}

interface Package {
  quantity: number
  unit: PackageUnit
  /** The column to name when the package turns out to have no weight. */
  field: ImportField
}

/** The package stands in one cell (`50 lb`), or as quantity and unit apart; a bare unit means one of it. */
function readPackage(
  cell: (field: ImportField) => string,
  { columns, decimal }: ImportMapping,
  fail: Fail,
): Package | undefined {
  const unitText = cell('unit')
  const unit = parsePackageUnit(unitText)
  if (columns.package !== undefined) {
    const reading = parseWeight(cell('package'), unit, decimal)
    if (reading.ok) return sized(reading.quantity, reading.unit, 'package', fail)
    const code =
      reading.reason === 'empty'
        ? 'missingPackage'
        : reading.reason === 'unknownUnit'
          ? 'unknownUnit'
          : 'unreadablePackage'
    return fail('package', code)
  }
  if (!unitText) return fail('unit', 'missingPackage')
  if (!unit) return fail('unit', 'unknownUnit')
  if (columns.quantity === undefined) return { quantity: 1, unit, field: 'unit' }
  const reading = parseNumber(cell('quantity'), decimal)
  if (!reading.ok) {
    return fail('quantity', reading.reason === 'empty' ? 'missingPackage' : 'unreadablePackage')
  }
  return sized(reading.value, unit, 'quantity', fail)
}

function sized(quantity: number, unit: PackageUnit, field: ImportField, fail: Fail): Package | undefined {
  // As stored, with six places.
  const rounded = Math.round(quantity * 1e6) / 1e6
  if (rounded < leastQuantity || rounded > mostQuantity) return fail(field, 'unreadablePackage')
  return { quantity: rounded, unit, field }
}

function readPrice(text: string, { decimal }: ImportMapping, fail: Fail): string | undefined {
  const reading = parseMoney(text, decimal)
  if (reading.ok) return reading.amount === '0' ? fail('price', 'zeroPrice') : reading.amount
  const codes = {
    empty: 'missingPrice',
    notMoney: 'unreadablePrice',
    negative: 'negativePrice',
    tooLarge: 'priceTooLarge',
  } as const
  return fail('price', codes[reading.reason])
}

function readDate(text: string, { mapping, date, latest }: ReadingRules, fail: Fail): string | undefined {
  const day = text ? parseDay(text, mapping.dateOrder) : date
  if (!day) return fail('date', text ? 'unreadableDate' : 'missingDate')
  return day > latest ? fail('date', 'futureDate', text || day) : day
}
