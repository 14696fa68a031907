import { describe, expect, it } from 'vitest'
import { readQuantity, writeQuantity, type QuantityContext } from './quantityText'

const context = (part: Partial<QuantityContext>): QuantityContext => ({
  kind: 'number',
  units: 'us',
  integer: false,
  min: 0,
  max: 1e9,
  ...part,
})

describe('what people type', () => {
  it.each([
    { text: '154', part: { kind: 'weight' }, value: 69.853 },
    { text: '154', part: { kind: 'weight', units: 'metric' }, value: 154 },
    { text: '70 kg', part: { kind: 'weight' }, value: 70 },
    { text: '1/2 lb', part: { kind: 'weight' }, value: 0.2268 },
    { text: '12,5', part: { kind: 'weight', units: 'metric' }, value: 12.5 },
    { text: '0', part: { kind: 'weight' }, value: 0 },
    { text: '0.5', part: { kind: 'grams' }, value: 226.796 },
    { text: '250', part: { kind: 'grams', units: 'metric' }, value: 250 },
    { text: '-100 g', part: { kind: 'grams', min: -2000 }, value: -100 },
    { text: '12,5 %', part: { kind: 'percent' }, value: 0.125 },
    { text: '88', part: { kind: 'percent', max: 1 }, value: 0.88 },
    { text: '1 1/2', part: {}, value: 1.5 },
  ] as const)('$text is $value ($part)', ({ text, part, value }) => {
    const reading = readQuantity(text, context(part))
    expect(reading.ok && reading.value).toBeCloseTo(value, 3)
  })

  it.each([
    ['', {}, 'empty'],
    ['a few', {}, 'notANumber'],
    ['50 sacks', { kind: 'weight' }, 'unknownUnit'],
    ['2 bu', { kind: 'weight' }, 'bushel'],
    ['101', { kind: 'percent', max: 1 }, 'tooLarge'],
    ['-1', {}, 'tooSmall'],
    ['2.5', { integer: true }, 'notInteger'],
  ] as const)('%j (%o) is refused: %s', (text, part, reason) => {
    expect(readQuantity(text, context(part))).toMatchObject({ ok: false, reason })
  })

  it('names the bound in the unit of the field', () => {
    const reading = readQuantity('5000', context({ kind: 'weight', max: 1500 }))
    expect(reading).toMatchObject({ params: { bound: '3307' } })
  })
})

describe('what stands in a field', () => {
  it.each([
    { value: 70, part: { kind: 'weight' }, text: '154.3' },
    { value: 70, part: { kind: 'weight', units: 'metric' }, text: '70' },
    { value: 0.125, part: { kind: 'percent' }, text: '12.5' },
    { value: 0.1 + 0.2, part: {}, text: '0.3' },
    { value: undefined, part: {}, text: '' },
  ] as const)('$value ($part) stands as $text', ({ value, part, text }) => {
    expect(writeQuantity(value, context(part))).toBe(text)
  })
})
