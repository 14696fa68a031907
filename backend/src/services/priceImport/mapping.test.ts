import { describe, expect, it } from 'vitest'
import { guessMapping, missingFields } from './mapping'
import { readTable } from './table'

const guess = (text: string) =>
  guessMapping(readTable(text), {
    isFeedName: (name) => ['barley grain', 'oats grain'].includes(name.toLowerCase()),
    isSupplierName: (name) => name === 'Tarn Mill',
    usualDateOrder: 'mdy',
  })

describe('recognising the columns of a list', () => {
  it.each([
    {
      name: 'plain headings',
      text: 'Feed,Package,Price,Date\nBarley grain,1 bushel,5.28,2026-11-03\n',
      mapping: {
        header: true,
        delimiter: ',',
        decimal: '.',
        dateOrder: 'ymd',
        columns: { feed: 0, package: 1, price: 2, date: 3 },
      },
    },
    {
      name: 'quantity and unit apart, headings of more words, American dates',
      text: 'Item,Supplier,Quantity,Unit,Price USD,Valid from\nOats grain,Tarn Mill,50,lb,13.95,11/25/2026\n',
      mapping: {
        dateOrder: 'mdy',
        columns: { feed: 0, supplier: 1, quantity: 2, unit: 3, price: 4, date: 5 },
      },
    },
    {
      name: 'semicolons and decimal commas',
      text: 'Feed;Package;Price;Date\nBarley grain;1 tonne;243,00;25.11.2026\nOats grain;1 tonne;1.243,50;25.11.2026\n',
      mapping: {
        delimiter: ';',
        decimal: ',',
        dateOrder: 'dmy',
        columns: { feed: 0, package: 1, price: 2, date: 3 },
      },
    },
    {
      name: 'tabs, as pasted from a sheet',
      text: 'Price\tFeed\tBag\n12\tBarley grain\t50 lb\n',
      mapping: { delimiter: '\t', columns: { price: 0, feed: 1, package: 2 } },
    },
    {
      name: 'no headings at all',
      text: 'Tarn Mill,Barley grain,50 lb,$12.80,2026-11-05\nTarn Mill,Oats grain,50 lb,$13.95,2026-11-05\n',
      mapping: { header: false, columns: { supplier: 0, feed: 1, package: 2, price: 3, date: 4 } },
    },
    {
      name: 'a heading "Unit" over whole packages',
      text: 'Product,Unit,Cost\nBarley grain,50 lb,12.80\nOats grain,1/2 ton,200\n',
      mapping: { columns: { feed: 0, package: 1, price: 2 } },
    },
    {
      name: 'a heading "Size" over bare numbers beside a unit',
      text: 'Product,Size,UOM,Cost\nBarley grain,50,lb,12.80\n',
      mapping: { columns: { feed: 0, quantity: 1, unit: 2, price: 3 } },
    },
    {
      name: 'a heading "Per" over bare units',
      text: 'Product,Per,Price\nBarley grain,ton,200\nOats grain,cwt,14\n',
      mapping: { columns: { feed: 0, unit: 1, price: 2 } },
    },
    {
      name: 'headings that say nothing',
      text: 'A,B,C\nBarley grain,50 lb,12.80\nOats grain,50 lb,13.95\n',
      mapping: { header: true, columns: { feed: 0, package: 1, price: 2 } },
    },
  ])('$name', ({ text, mapping }) => expect(guess(text)).toMatchObject(mapping))

  it('never uses a column twice', () => {
    const { columns } = guess('Feed price,Feed,Price\n1,Barley grain,2\n')
    expect(new Set(Object.values(columns)).size).toBe(Object.values(columns).length)
    expect(columns).toMatchObject({ feed: 1, price: 2 })
  })

  it('says which fields no column holds, unless the request gives them', () => {
    const mapping = guess('Thing\nBarley grain\n')
    expect(missingFields(mapping, {})).toEqual(['supplier', 'package', 'price', 'date'])
    expect(missingFields(mapping, { supplierName: 'Tarn Mill', date: '2026-01-01' })).toEqual([
      'package',
      'price',
    ])
  })
})

describe('reading a table', () => {
  it('numbers rows by their lines, across empty lines and line breaks in cells', () => {
    const { rows } = readTable('\uFEFFa,b\r\n\r\n"two\r\nlines",1\r\n , \r\nlast,2')
    expect(rows.map(({ line, cells }) => [line, cells])).toEqual([
      [1, ['a', 'b']],
      [3, ['two\r\nlines', '1']],
      [6, ['last', '2']],
    ])
  })

  it.each([
    { name: 'nothing but blanks', text: ' \n\t\n', code: 'empty_file' },
    { name: 'a mark of order alone', text: '\uFEFF', code: 'empty_file' },
    { name: 'a zero byte', text: 'a,b\n1,\u0000', code: 'binary_file' },
    { name: 'bytes that are no text', text: 'PK\u0003\u0004\u0014\uFFFD\uFFFD', code: 'binary_file' },
    { name: 'a quotation mark left open', text: 'a,b\n"open,1\nx,2\n', code: 'open_quote' },
  ])('refuses $name', ({ text, code }) => {
    expect(() => readTable(text)).toThrowError(
      expect.objectContaining({ code: 'unreadable_file', errors: [expect.objectContaining({ code })] }),
    )
  })

  it('refuses more rows than it can show', () => {
    expect(() => readTable('a,b\n'.repeat(20_001))).toThrowError(
      expect.objectContaining({ code: 'too_large' }),
    )
  })
})
