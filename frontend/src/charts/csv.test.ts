import { describe, expect, it } from 'vitest'
import { fileName, toCsv } from './csv'

describe('a chart as a file', () => {
  it('quotes what needs it and keeps numbers as numbers', () => {
    expect(
      toCsv({
        head: ['feed', 'share, %'],
        rows: [
          ['Meal "48"', -5.5],
          ['Hay', 0.25],
        ],
      }),
    ).toBe('feed,"share, %"\r\n"Meal ""48""",-5.5\r\nHay,0.25\r\n')
  })

  it.each(['=1+1', '+1', '-1', '@x', '\tx'])('keeps a spreadsheet from running %j', (text) =>
    expect(toCsv({ head: ['a'], rows: [[text]] }).split('\r\n')[1]).toBe(`'${text}`),
  )

  it('has a plain name', () => {
    expect(fileName('Crude protein, at least', 'png')).toBe('crude-protein-at-least.png')
    expect(fileName('…', 'csv')).toBe('chart.csv')
  })
})
