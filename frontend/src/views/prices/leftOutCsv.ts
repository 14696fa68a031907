import type { ImportRow } from '@maslin/shared'

/** What a spreadsheet takes for a formula; a plain negative number stays one. */
const FORMULA = /^(?:[=+@\t\r]|-(?![\d.,\s]+$))/

/**
 * The rows that stayed out as a CSV that can be mended and dropped again, the reasons in the last columns. Cells that a
 * spreadsheet would take for formulas are made harmless.
 * @param words turns state and problems into words
 */
export async function leftOutCsv(
  rows: readonly ImportRow[],
  words: {
    line: string
    state: string
    reason: string
    stateOf: (row: ImportRow) => string
    reasonOf: (row: ImportRow) => string
  },
  header: readonly string[] = [],
): Promise<string> {
  const { default: papa } = await import('papaparse')
  const width = Math.max(header.length, ...rows.map((row) => row.cells.length))
  const heading = Array.from({ length: width }, (_, at) => header[at] ?? '')
  const cellsOf = (row: ImportRow) => Array.from({ length: width }, (_, at) => row.cells[at] ?? '')
  return papa.unparse(
    [
      [...heading, words.line, words.state, words.reason],
      ...rows.map((row) => [...cellsOf(row), row.line, words.stateOf(row), words.reasonOf(row)]),
    ],
    { escapeFormulae: FORMULA, newline: '\r\n' },
  )
}

/** Hands a text to the browser as a file. */
export function download(fileName: string, text: string): void {
  const url = URL.createObjectURL(new Blob(['\ufeff', text], { type: 'text/csv;charset=utf-8' }))
  const link = document.createElement('a')
  link.href = url
  link.download = fileName
  link.click()
  setTimeout(() => URL.revokeObjectURL(url), 10_000)
}
