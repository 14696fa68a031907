import type { ImportMapping, ImportPreview } from '@maslin/shared'
import { describe, expect, it } from 'vitest'
import { applyRequest, columnNames, moveField, newDraft, previewRequest, problemColumn } from './importDraft'

const mapping: ImportMapping = {
  header: true,
  delimiter: ';',
  decimal: ',',
  dateOrder: 'ymd',
  columns: { feed: 0, package: 1, price: 2 },
}
const preview: ImportPreview = {
  mapping,
  header: ['Item', 'Pack', 'Price'],
  rows: [{ line: 2, state: 'new', cells: ['Corn', '1 bu', '8,40', 'extra'], problems: [] }],
  counts: { new: 1, changed: 0, same: 0, error: 0, leftOut: 0 },
  unusedColumns: [],
  unknownFeeds: [],
  missingFields: [],
}
const draft = newDraft('Item;Pack;Price\nCorn;1 bu;8,40', 'list.csv', 'UTF-8', '2026-11-24')

describe('a new draft', () => {
  const suppliers = ['Tarn Mill', 'Tarn Hollow Mill', 'Ridge']
  it.each([
    ['tarn-hollow-mill-new-prices.csv', 'Tarn Hollow Mill'],
    ['Prices TARN MILL 2026.csv', 'Tarn Mill'],
    ['prices.csv', ''],
    ['', ''],
  ])('of the file %j takes %j for the supplier', (file, expected) => {
    expect(newDraft('a;b', file, 'UTF-8', '2026-11-24', suppliers).supplierName).toBe(expected)
  })
})

describe('what is sent', () => {
  it('leaves the first reading to the API', () => {
    expect(previewRequest(draft)).toEqual({
      fileName: 'list.csv',
      text: draft.text,
      date: '2026-11-24',
      feedMatches: {},
    })
  })

  it('names supplier and date only where no column does', () => {
    const typed = { ...draft, supplierName: ' Ridge Mill ' }
    expect(previewRequest(typed, mapping)).toMatchObject({ supplierName: 'Ridge Mill', date: '2026-11-24' })
    const columns = { ...mapping.columns, supplier: 3, date: 4 }
    const own = previewRequest({ ...typed, mapping: { ...mapping, columns } })
    expect([own.supplierName, own.date]).toEqual([undefined, undefined])
  })

  it('applies exactly what was looked at', () => {
    expect(applyRequest({ ...draft, feedMatches: { Corn: null } }, preview)).toMatchObject({
      mapping,
      feedMatches: { Corn: null },
    })
  })
})

describe('moving a field to a column', () => {
  it('takes the column from the field that had it', () => {
    expect(moveField(mapping, 'supplier', 2).columns).toEqual({ feed: 0, package: 1, supplier: 2 })
  })
  it('can take it off', () => {
    expect(moveField(mapping, 'package', undefined).columns).toEqual({ feed: 0, price: 2 })
  })
  it('has either a package or quantity and unit', () => {
    const apart = moveField(moveField(mapping, 'quantity', 3), 'unit', 4)
    expect(apart.columns).toEqual({ feed: 0, price: 2, quantity: 3, unit: 4 })
    expect(moveField(apart, 'package', 1).columns).toEqual({ feed: 0, price: 2, package: 1 })
  })
})

it('names columns beyond the heading too, so that no cell is hidden', () => {
  expect(columnNames(preview)).toEqual(['Item', 'Pack', 'Price', ''])
})

describe('a reason stands at its cell', () => {
  const at = (field: 'package' | 'unit' | 'supplier', columns: ImportMapping['columns']) =>
    problemColumn({ ...mapping, columns }, { field, code: 'unknownUnit', value: '' })
  it.each([
    ['package', { package: 1 }, 1],
    ['unit', { package: 1 }, 1],
    ['package', { quantity: 3, unit: 4 }, 3],
    ['supplier', { feed: 0 }, undefined],
  ] as const)('%s in %o', (field, columns, column) => expect(at(field, columns)).toBe(column))
})
