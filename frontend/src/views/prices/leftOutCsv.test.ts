import type { ImportRow } from '@maslin/shared'
import { expect, it } from 'vitest'
import { leftOutCsv } from './leftOutCsv'

const row = (line: number, ...cells: string[]): ImportRow => ({ line, state: 'error', cells, problems: [] })
const words = {
  line: 'Line',
  state: 'State',
  reason: 'Why',
  stateOf: () => 'error',
  reasonOf: () => 'not a price, =so',
}

it('keeps every cell, adds the reason, and lets no cell become a formula', async () => {
  const csv = await leftOutCsv([row(3, 'Corn, cracked', '=1+1'), row(9, '@here', '-5', 'more')], words, [
    'Item',
    'Price',
  ])
  expect(csv.split('\r\n')).toEqual([
    'Item,Price,,Line,State,Why',
    '"Corn, cracked","\'=1+1",,3,error,"not a price, =so"',
    '"\'@here",-5,more,9,error,"not a price, =so"',
  ])
})
