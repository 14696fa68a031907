import { expect, it } from 'vitest'
import { useSort } from './useSort'

const rows = [
  { name: 'Oats', price: 3 },
  { name: 'barley', price: undefined },
  { name: 'Corn 10', price: 1 },
  { name: 'Corn 9', price: 2 },
]
const values = {
  name: (row: (typeof rows)[number]) => row.name,
  price: (row: (typeof rows)[number]) => row.price,
}

it('sorts names as people do, and back on a second click', () => {
  const { sorted, sortBy, ariaSort } = useSort(rows, values, 'name')
  expect(sorted.value.map((row) => row.name)).toEqual(['barley', 'Corn 9', 'Corn 10', 'Oats'])
  sortBy('name')
  expect(sorted.value.map((row) => row.name)).toEqual(['Oats', 'Corn 10', 'Corn 9', 'barley'])
  expect([ariaSort('name'), ariaSort('price')]).toEqual(['descending', 'none'])
})

it('keeps what is unknown last either way', () => {
  const { sorted, sortBy } = useSort(rows, values, 'name')
  sortBy('price')
  expect(sorted.value.map((row) => row.price)).toEqual([1, 2, 3, undefined])
  sortBy('price')
  expect(sorted.value.map((row) => row.price)).toEqual([3, 2, 1, undefined])
})
