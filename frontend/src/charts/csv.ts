/** A table behind a chart: what the chart shows, with units in the heads. */
export interface ChartTable {
  head: string[]
  rows: (string | number)[][]
}

function cell(value: string | number): string {
  if (typeof value === 'number') return String(value)
  // A text that a spreadsheet would take for a formula is led by an apostrophe (OWASP ASVS 5.0, 1.2.10).
  const safe = /^[=+\-@\t\r\0]/.test(value) ? `'${value}` : value
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe
}

/** The table as CSV by RFC 4180; numbers stay numbers with a decimal point. */
export function toCsv({ head, rows }: ChartTable): string {
  return [head, ...rows].map((row) => row.map(cell).join(',')).join('\r\n') + '\r\n'
}

/** A file name of letters, digits and hyphens. */
export function fileName(title: string, extension: string): string {
  const stem = title
    .normalize('NFKD')
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .replace(/^-+|-+$/g, '')
  return `${stem || 'chart'}.${extension}`
}

/** Hands a file to the person at the page. */
export function download(name: string, content: Blob): void {
  const url = URL.createObjectURL(content)
  const link = document.createElement('a')
  link.href = url
  link.download = name
  link.click()
  URL.revokeObjectURL(url)
}
