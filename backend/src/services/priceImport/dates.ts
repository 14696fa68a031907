import type { ImportMapping } from '@maslin/shared'

export type DateOrder = ImportMapping['dateOrder']

const months = ['jan', 'feb', 'mar', 'apr', 'may', 'jun', 'jul', 'aug', 'sep', 'oct', 'nov', 'dec']
const firstYear = 1990
const lastYear = 2100

/**
 * Reads a day as lists write it: `2026-11-05`, `11/5/2026`, `5.11.26`, `5 Nov 2026`, `November 5, 2026`.
 * A year in front is always read year, month, day; else `order` says what comes first.
 * @returns `YYYY-MM-DD`, or undefined for what is no day of the calendar
 */
export function parseDay(text: string, order: DateOrder): string | undefined {
  const cleaned = text.trim().replace(/[T ]\d{1,2}:\d{2}(:\d{2})?(\.\d+)?Z?$/, '')
  const numbers = /^(\d{1,4})\s*[-/.]\s*(\d{1,2})\s*[-/.]\s*(\d{1,4})\.?$/.exec(cleaned)
  if (numbers) {
    const [first, second, third] = [Number(numbers[1]), Number(numbers[2]), Number(numbers[3])]
    if (String(numbers[1]).length >= 3) return day(first, second, third)
    if (order === 'ymd') return day(year(first), second, third)
    return order === 'mdy' ? day(year(third), first, second) : day(year(third), second, first)
  }
  const dayFirst = /^(\d{1,2})\.?[\s-]+([a-z]{3,9})\.?,?[\s-]+(\d{2,4})$/i.exec(cleaned)
  if (dayFirst) return day(year(Number(dayFirst[3])), month(dayFirst[2]), Number(dayFirst[1]))
  const monthFirst = /^([a-z]{3,9})\.?\s+(\d{1,2}),?\s+(\d{2,4})$/i.exec(cleaned)
  if (monthFirst) return day(year(Number(monthFirst[3])), month(monthFirst[1]), Number(monthFirst[2]))
  return undefined
}

const year = (number: number): number => (number < 100 ? 2000 + number : number)

const month = (word = ''): number => months.indexOf(word.slice(0, 3).toLowerCase()) + 1

function day(y: number, m: number, d: number): string | undefined {
  if (y < firstYear || y > lastYear) return undefined
  const date = new Date(Date.UTC(y, m - 1, d))
  const exists = date.getUTCFullYear() === y && date.getUTCMonth() === m - 1 && date.getUTCDate() === d
  return exists ? date.toISOString().slice(0, 10) : undefined
}

/**
 * In which order the numbers of the dates stand. Where no date tells, the farm's habit does.
 * @param usual for dates such as `5/6/2026`, which fit both orders
 */
export function guessDateOrder(cells: readonly string[], usual: DateOrder): DateOrder {
  let guess: DateOrder | undefined
  for (const cell of cells) {
    const parts = /^\s*(\d{1,4})\s*([-/.])\s*(\d{1,2})\s*[-/.]\s*\d{1,4}/.exec(cell)
    if (!parts) continue
    const [first, second] = [Number(parts[1]), Number(parts[3])]
    if (String(parts[1]).length >= 3) guess ??= 'ymd'
    else if (first > 12) return 'dmy'
    else if (second > 12) return 'mdy'
    else if (parts[2] === '.') guess ??= 'dmy'
  }
  return guess ?? usual
}
