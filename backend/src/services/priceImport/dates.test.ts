import { describe, expect, it } from 'vitest'
import { guessDateOrder, parseDay } from './dates'

describe('reading days', () => {
  it.each([
    ['2026-11-05', 'mdy', '2026-11-05'],
    ['2026/1/5', 'dmy', '2026-01-05'],
    ['11/05/2026', 'mdy', '2026-11-05'],
    ['11/05/2026', 'dmy', '2026-05-11'],
    ['5.11.26', 'dmy', '2026-11-05'],
    ['26-11-05', 'ymd', '2026-11-05'],
    ['5 Nov 2026', 'mdy', '2026-11-05'],
    ['5. november 2026', 'mdy', '2026-11-05'],
    ['5-Nov-26', 'mdy', '2026-11-05'],
    ['November 5, 2026', 'dmy', '2026-11-05'],
    ['2026-11-05T00:00:00Z', 'mdy', '2026-11-05'],
    ['11/5/2026 12:30', 'mdy', '2026-11-05'],
    ['2024-02-29', 'ymd', '2024-02-29'],
  ] as const)('%s read %s is %s', (text, order, day) => expect(parseDay(text, order)).toBe(day))

  it.each([
    '2026-02-29',
    '31/04/2026',
    '13/13/2026',
    '0/0/0',
    '1850-01-01',
    '2026-13-01',
    'soon',
    '',
    '45',
    '5 Foo 2026',
  ])('%j is no day', (text) => expect(parseDay(text, 'dmy')).toBeUndefined())
})

describe('the order of day and month', () => {
  it.each([
    { why: 'a year in front', cells: ['2026-05-06'], order: 'ymd' },
    { why: 'a first number that is no month', cells: ['5/6/2026', '13/6/2026'], order: 'dmy' },
    { why: 'a second number that is no month', cells: ['5/6/2026', '6/13/2026'], order: 'mdy' },
    { why: 'points', cells: ['5.6.2026'], order: 'dmy' },
    { why: 'nothing but the habit', cells: ['5/6/2026'], order: 'mdy' },
  ] as const)('is told by $why', ({ cells, order }) => expect(guessDateOrder(cells, 'mdy')).toBe(order))
})
