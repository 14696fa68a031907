import { describe, expect, it } from 'vitest'
import { likeness, nameKey, NameIndex } from './names'

describe('names', () => {
  it.each([
    ['Beet pulp, dried, plain', 'beet pulp  dried plain'],
    ['BARLEY-GRAIN', 'Barley grain'],
    ['Maïs (entier)', 'mais entier'],
  ])('%s is %s', (a, b) => expect(nameKey(a)).toBe(nameKey(b)))

  it('keeps names of signs alone apart', () => expect(nameKey('???')).not.toBe(nameKey('!!!')))

  it('finds a feed however it is written, and the nearest ones for another name', () => {
    const feeds = ['Barley grain', 'Oats grain', 'Soybean meal, 44 % protein', 'Timothy hay'].map(
      (name, at) => ({
        id: String(at),
        name,
      }),
    )
    const index = new NameIndex(feeds)
    expect(index.find('soybean meal 44% protein')?.id).toBe('2')
    expect(index.find('Soybean')).toBeUndefined()
    expect(index.nearest('Soya bean meal 44')[0]?.id).toBe('2')
    expect(index.nearest('Moon dust')).toEqual([])
  })

  it('calls words in another order alike', () => {
    expect(likeness('rolled barley', 'Barley, rolled')).toBe(1)
    expect(likeness('barley', 'salt')).toBeLessThan(0.3)
    expect(likeness('', '')).toBeLessThanOrEqual(1)
  })
})
