import { describe, expect, it } from 'vitest'
import { moneySchema, parseMoney, pricePerKg } from './money'

describe('reading money', () => {
  it.each([
    ['$19.20', '19.2'],
    ['12,50 €', '12.5'],
    ['1,250.00', '1250'],
    ['1.250,00', '1250'],
    ['USD 19', '19'],
    ['452', '452'],
    ['US$ 8.10', '8.1'],
    ['0.00005', '0.0001'],
  ])('%s is %s', (text, amount) => expect(parseMoney(text)).toEqual({ ok: true, amount }))

  it.each([
    ['', 'empty'],
    ['$', 'empty'],
    ['call us', 'notMoney'],
    ['-5', 'negative'],
    ['(5.00)', 'negative'],
    ['1e309', 'notMoney'],
    ['9999999999', 'tooLarge'],
  ])('says why %j is no price', (text, reason) => expect(parseMoney(text)).toEqual({ ok: false, reason }))

  it('never passes through a float', () => {
    expect(pricePerKg('0.3', 3)).toBe('0.1')
    expect(pricePerKg('11.40', 50 * 0.45359237)).toBe('0.502654')
  })

  it('accepts at most four places on the wire', () => {
    expect(moneySchema.safeParse('1.2345').success).toBe(true)
    for (const bad of ['1.23456', '-1', '1e3', 'NaN', ''])
      expect(moneySchema.safeParse(bad).success, bad).toBe(false)
  })
})

it('refuses hostile prices instead of trying them for ever', () => {
  for (const text of [`1${' '.repeat(200_000)}!`, `${'1 '.repeat(100_000)}x`, '9'.repeat(100_000)])
    expect(parseMoney(text)).toEqual({ ok: false, reason: 'notMoney' })
})
