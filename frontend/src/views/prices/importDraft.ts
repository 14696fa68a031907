import type {
  ImportApplyRequest,
  ImportField,
  ImportMapping,
  ImportPreview,
  ImportPreviewRequest,
  ImportRow,
} from '@maslin/shared'

/** A price list on the way in: the text and everything the person has said about it. */
export interface ImportDraft {
  readonly fileName: string
  readonly text: string
  readonly encoding: string
  /** Undefined until something guessed is corrected. */
  readonly mapping: ImportMapping | undefined
  readonly supplierName: string
  /** `YYYY-MM-DD`, empty where the list has a column. */
  readonly date: string
  readonly feedMatches: Readonly<Record<string, string | null>>
}

/** @param suppliers names of the farm's suppliers: the list may be named after one */
export function newDraft(
  text: string,
  fileName: string,
  encoding: string,
  day: string,
  suppliers: readonly string[] = [],
): ImportDraft {
  const supplierName = supplierInFileName(fileName, suppliers)
  return { fileName, text, encoding, mapping: undefined, supplierName, date: day, feedMatches: {} }
}

const plain = (text: string): string => text.toLowerCase().replace(/[^\p{L}\p{N}]/gu, '')

/** The supplier whose name stands in the file's name, the longest where several do; empty where none does. */
export function supplierInFileName(fileName: string, suppliers: readonly string[]): string {
  const file = plain(fileName)
  const named = suppliers.filter((name) => plain(name) && file.includes(plain(name)))
  return named.sort((a, b) => b.length - a.length)[0] ?? ''
}

function common(draft: ImportDraft, mapping: ImportMapping | undefined) {
  const supplierName = draft.supplierName.trim()
  return {
    fileName: draft.fileName,
    text: draft.text,
    feedMatches: { ...draft.feedMatches },
    // A column of the list is more telling than one word for all rows.
    ...(supplierName && mapping?.columns.supplier === undefined ? { supplierName } : {}),
    ...(draft.date && mapping?.columns.date === undefined ? { date: draft.date } : {}),
  }
}

/** @param guessed the mapping of the last preview, which tells whether the list has columns of supplier and date */
export function previewRequest(draft: ImportDraft, guessed?: ImportMapping): ImportPreviewRequest {
  const mapping = draft.mapping
  return { ...common(draft, mapping ?? guessed), ...(mapping ? { mapping } : {}) }
}

/** What was looked at is what gets applied: the mapping is the preview's, guessed or corrected. */
export function applyRequest(draft: ImportDraft, preview: ImportPreview): ImportApplyRequest {
  return { ...common(draft, preview.mapping), mapping: preview.mapping }
}

/** Puts a field on a column, or on none. A column holds one field; package stands for quantity and unit together. */
export function moveField(
  mapping: ImportMapping,
  field: ImportField,
  column: number | undefined,
): ImportMapping {
  const columns: ImportMapping['columns'] = {}
  for (const [name, at] of Object.entries(mapping.columns) as [ImportField, number][]) {
    if (name !== field && at !== column) columns[name] = at
  }
  if (column !== undefined) columns[field] = column
  if (column !== undefined && field === 'package') {
    delete columns.quantity
    delete columns.unit
  }
  if (column !== undefined && (field === 'quantity' || field === 'unit')) delete columns.package
  return { ...mapping, columns }
}

export const applicable = (preview: ImportPreview): number =>
  (preview.counts.new ?? 0) + (preview.counts.changed ?? 0)

/** Names of the list's columns: the heading where there is one, else nothing. */
export function columnNames(preview: ImportPreview): string[] {
  const count = Math.max(preview.header.length, ...preview.rows.slice(0, 200).map((row) => row.cells.length))
  return Array.from({ length: count }, (_, at) => (preview.mapping.header ? (preview.header[at] ?? '') : ''))
}

/** The column a problem is about, so that it stands at its cell; undefined where the row as a whole is meant. */
export function problemColumn(
  mapping: ImportMapping,
  problem: ImportRow['problems'][number],
): number | undefined {
  const direct = mapping.columns[problem.field]
  if (direct !== undefined) return direct
  if (problem.field === 'package') return mapping.columns.quantity ?? mapping.columns.unit
  if (problem.field === 'quantity' || problem.field === 'unit') return mapping.columns.package
  return undefined
}
