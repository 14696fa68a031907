import { MAX_IMPORT_ROWS, type ImportMapping } from '@maslin/shared'
import Papa from 'papaparse'
import { AppError } from '../../errors'

export interface TableRow {
  /** Line in the file, from 1. */
  line: number
  cells: string[]
}

export interface Table {
  delimiter: ImportMapping['delimiter']
  /** Rows with something in them, the heading included. */
  rows: TableRow[]
}

const delimiters: ImportMapping['delimiter'][] = [',', ';', '\t', '|']

/** More of these among the letters, and the text was not a text. */
const mostStrayShare = 0.01

/**
 * Reads a list into rows of cells.
 * @param delimiter absent: found out from the text
 * @throws AppError `unreadable_file` for an empty or a binary file, `too_large` for too many rows
 */
export function readTable(text: string, delimiter?: ImportMapping['delimiter']): Table {
  const clean = text.replace(/^\uFEFF/, '')
  refuseBinary(clean)
  if (!clean.trim()) throw unreadable('empty_file', 'The file is empty.')
  const parsed = Papa.parse<string[]>(clean, {
    delimiter: delimiter ?? '',
    delimitersToGuess: delimiters,
    skipEmptyLines: false,
    preview: MAX_IMPORT_ROWS * 2,
  })
  if (parsed.errors.some((error) => error.type === 'Quotes')) {
    const row = parsed.errors.find((error) => error.type === 'Quotes')?.row ?? 0
    throw unreadable(
      'open_quote',
      `A quotation mark around line ${row + 1} is not closed, so the rows cannot be told apart.`,
    )
  }
  const rows = withLines(parsed.data)
  // Reading stops early in a file of many empty lines: what stands after them would be left out in silence.
  if (rows.length > MAX_IMPORT_ROWS || parsed.meta.truncated) {
    throw new AppError('too_large', {
      detail: `At most ${MAX_IMPORT_ROWS.toLocaleString('en')} rows, and not many more empty lines.`,
    })
  }
  const used = delimiters.find((it) => it === parsed.meta.delimiter) ?? ','
  return { delimiter: used, rows }
}

/** Numbers the rows by the lines they begin on: a cell may hold line breaks, and empty lines count. */
function withLines(data: readonly string[][]): TableRow[] {
  const rows: TableRow[] = []
  let line = 1
  for (const cells of data) {
    if (cells.some((cell) => cell.trim())) rows.push({ line, cells: withoutEmptyEnd(cells) })
    line += 1 + cells.reduce((breaks, cell) => breaks + (cell.match(/\r\n|\r|\n/g)?.length ?? 0), 0)
  }
  return rows
}

/** Spreadsheets pad rows with empty cells. */
function withoutEmptyEnd(cells: readonly string[]): string[] {
  const end = cells.findLastIndex((cell) => cell.trim()) + 1
  return cells.slice(0, end)
}

function refuseBinary(text: string): void {
  // NUL, other control characters but tab, line feed, form feed and carriage return, and the sign for undecodable bytes.
  const stray = text.match(/(?![\t\n\f\r])[\p{Cc}\uFFFD]/gu)?.length ?? 0
  if (text.includes('\u0000') || stray > text.length * mostStrayShare) {
    throw unreadable('binary_file', 'This is not a text file. Save the list as CSV (UTF-8) and send that.')
  }
}

export function unreadable(code: string, message: string): AppError {
  return new AppError('unreadable_file', { detail: message, errors: [{ path: 'text', code, message }] })
}
