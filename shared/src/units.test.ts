import { describe, expect, it } from 'vitest'
import { convertMass, massUnits, packageWeightKg, parseNumber, parsePackageUnit, parseWeight } from './units'

describe('weights', () => {
  it.each([
    { from: 'lb', to: 'kg', value: 1, expected: 0.45359237, why: 'definition of the pound, 1959' },
    { from: 'shortTon', to: 'kg', value: 1, expected: 907.18474, why: '2,000 lb' },
    { from: 'cwt', to: 'lb', value: 1, expected: 100, why: 'US hundredweight' },
    { from: 'tonne', to: 'lb', value: 1, expected: 2204.6226218, why: '1,000 kg / 0.45359237' },
    { from: 'oz', to: 'g', value: 1, expected: 28.349523125, why: 'a sixteenth of a pound' },
  ] as const)('$value $from is $expected $to ($why)', ({ from, to, value, expected }) => {
    expect(convertMass(value, from, to)).toBeCloseTo(expected, 6)
  })

  it.each(massUnits)('comes back unchanged through %s', (unit) => {
    expect(convertMass(convertMass(12.345, 'kg', unit), unit, 'kg')).toBeCloseTo(12.345, 10)
  })

  it('weighs a bushel by the test weight of the feed, and not at all without one', () => {
    expect(packageWeightKg(2, 'bushel', 21.8)).toBeCloseTo(43.6)
    expect(packageWeightKg(2, 'bushel')).toBeUndefined()
    expect(packageWeightKg(2, 'bushel', null)).toBeUndefined()
  })
})

describe('reading numbers as people type them', () => {
  it.each([
    ['1/2', 0.5],
    ['1 1/2', 1.5],
    ['12,5', 12.5],
    ['12.5', 12.5],
    ['1,250', 1250],
    ['1,250.50', 1250.5],
    ['1.250,50', 1250.5],
    ['1 250', 1250],
    ['\u22123', -3],
    ['.5', 0.5],
  ])('%s is %d', (text, value) => expect(parseNumber(text)).toEqual({ ok: true, value }))

  it('takes the decimal sign it is told', () => {
    expect(parseNumber('1,250', ',')).toEqual({ ok: true, value: 1.25 })
    expect(parseNumber('1.250', ',')).toEqual({ ok: true, value: 1250 })
  })

  it.each(['', 'abc', '1/0', '1e309', '--3', '1.2.3,4,5'])('refuses %j', (text) =>
    expect(parseNumber(text).ok).toBe(false),
  )
})

describe('reading packages', () => {
  it.each([
    ['50 lb', { quantity: 50, unit: 'lb' }],
    ['50lb.', { quantity: 50, unit: 'lb' }],
    ['1 short ton', { quantity: 1, unit: 'shortTon' }],
    ['ton', { quantity: 1, unit: 'shortTon' }],
    ['per cwt', { quantity: 1, unit: 'cwt' }],
    ['1/2 ton', { quantity: 0.5, unit: 'shortTon' }],
    ['25 kg', { quantity: 25, unit: 'kg' }],
    ['1 bu', { quantity: 1, unit: 'bushel' }],
    ['1,000 kg', { quantity: 1000, unit: 'kg' }],
  ])('%s', (text, expected) => expect(parseWeight(text)).toEqual({ ok: true, ...expected }))

  it.each([
    ['', 'empty'],
    ['50', 'noUnit'],
    ['50 sacks', 'unknownUnit'],
    ['0 lb', 'notPositive'],
    ['-5 lb', 'notPositive'],
  ])('says why %j cannot be read', (text, reason) => expect(parseWeight(text)).toEqual({ ok: false, reason }))

  it('takes the unit of the column where the cell has none', () => {
    expect(parseWeight('50', 'lb')).toEqual({ ok: true, quantity: 50, unit: 'lb' })
  })

  it('takes the decimal sign of the list', () => {
    expect(parseWeight('1,250 kg', undefined, ',')).toEqual({ ok: true, quantity: 1.25, unit: 'kg' })
  })

  it('tells the tonne from the short ton', () => {
    expect(parsePackageUnit('t')).toBe('tonne')
    expect(parsePackageUnit('tons')).toBe('shortTon')
  })
})

describe('hostile texts', () => {
  it.each(['constructor', '__proto__', 'toString', 'valueof'])('%s is no unit', (word) => {
    expect(parsePackageUnit(word)).toBeUndefined()
    expect(parseWeight(`50 ${word}`)).toMatchObject({ ok: false })
  })

  // Tried piece by piece in every way, the first of these would take hours.
  it.each([
    `per${' '.repeat(20_000)}!`,
    `1${' '.repeat(200_000)}!`,
    `${'1 '.repeat(100_000)}!`,
    `${'1'.repeat(100_000)}/`,
    `a${' .'.repeat(100_000)}!`,
  ])('are refused, not tried for ever (%#)', (text) => {
    expect(parseWeight(text).ok).toBe(false)
    expect(parseNumber(text).ok).toBe(false)
    expect(parsePackageUnit(text)).toBeUndefined()
  })

  it('with runs of spaces of any kind are read where they make sense', () => {
    expect(parseWeight(`50${' '.repeat(300)}lb`)).toEqual({ ok: true, quantity: 50, unit: 'lb' })
    expect(parseNumber('1\u202f250')).toEqual({ ok: true, value: 1250 })
  })
})
