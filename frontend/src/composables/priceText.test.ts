import { describe, expect, it } from 'vitest'
import { readPrice } from './priceText'

const options = { acceptPackage: true, fallbackUnit: 'lb' } as const

describe('a price with its package', () => {
  it.each([
    ['$19/25 lb', '19', { quantity: 25, unit: 'lb' }],
    ['19/25', '19', { quantity: 25, unit: 'lb' }],
    ['452 per ton', '452', { quantity: 1, unit: 'shortTon' }],
    ['8,10/bu', '8.1', { quantity: 1, unit: 'bushel' }],
    ['226 / 1/2 ton', '226', { quantity: 0.5, unit: 'shortTon' }],
    ['12,50 €', '12.5', undefined],
  ])('%s', (text, amount, size) => {
    const reading = readPrice(text, options)
    expect(reading).toEqual(size ? { ok: true, amount, size } : { ok: true, amount })
  })

  it.each([
    ['', 'empty'],
    ['ask', 'notMoney'],
    ['-3', 'negative'],
    ['19/sack', 'package'],
  ])('%j is refused: %s', (text, reason) => {
    expect(readPrice(text, options)).toEqual({ ok: false, reason })
  })

  it('is no price where only money is asked for', () => {
    expect(readPrice('19/25 lb', { ...options, acceptPackage: false }).ok).toBe(false)
  })
})
