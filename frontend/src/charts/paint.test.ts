import { feedClasses } from '@maslin/shared'
import { describe, expect, it } from 'vitest'
import { contrast, paintFeeds } from './paint'

const several = feedClasses.flatMap((feedClass) =>
  [0, 1, 2].map((nth) => ({ id: `${feedClass}${nth}`, class: feedClass })),
)

describe('paints of feeds', () => {
  const paints = paintFeeds(several)

  it('differ in colour and shape within a class, and in colour between classes', () => {
    for (const feedClass of feedClasses) {
      const own = [0, 1, 2].map((nth) => paints.get(`${feedClass}${nth}`))
      expect(new Set(own.map((paint) => paint?.ground)).size, feedClass).toBe(3)
      expect(new Set(own.map((paint) => paint?.shape)).size, feedClass).toBe(3)
    }
    expect(new Set([...paints.values()].map((paint) => paint.ground)).size).toBe(several.length)
  })

  it('carry words with enough contrast', () => {
    for (const [id, paint] of paints)
      expect(contrast(paint.ground, paint.ink), id).toBeGreaterThanOrEqual(4.5)
  })

  it('stay with a feed when others follow', () => {
    const before = paintFeeds(several.slice(0, 4))
    for (const [id, paint] of before) expect(paints.get(id)).toEqual(paint)
  })

  it('reckon contrast as WCAG does', () => {
    expect(contrast('#000000', '#FFFFFF')).toBeCloseTo(21, 6)
    // #767676 on white is the well-known edge of 4.5 : 1.
    expect(contrast('#767676', '#FFFFFF')).toBeCloseTo(4.54, 2)
  })
})
