import { describe, expect, it } from 'vitest'
import { placeIn, priceRail, sackLayers, windowBar } from './geometry'

const box = { top: 20, bottom: 220 }

describe('the layer sack', () => {
  it('draws heights in proportion to shares, from the bottom up', () => {
    const layers = sackLayers(
      [
        { id: 'meal', share: 0.25 },
        { id: 'corn', share: 0.75 },
      ],
      box,
    )
    expect(layers).toEqual([
      { id: 'meal', top: 170, height: 50, labelled: true },
      { id: 'corn', top: 20, height: 150, labelled: true },
    ])
  })

  it('keeps a thin layer visible and still fills the sack exactly', () => {
    const layers = sackLayers(
      [
        { id: 'salt', share: 0.001 },
        { id: 'limestone', share: 0.004 },
        { id: 'corn', share: 0.995 },
      ],
      box,
    )
    expect(layers.map((layer) => layer.height)).toEqual([3, 3, 194])
    expect(layers.at(-1)?.top).toBeCloseTo(box.top)
    expect(layers.map((layer) => layer.labelled)).toEqual([false, false, true])
  })

  it('has layers that touch without gap or overlap', () => {
    const layers = sackLayers(
      [0.1, 0.02, 0.3, 0.58].map((share, index) => ({ id: String(index), share })),
      box,
    )
    layers.slice(1).forEach((layer, index) => {
      const below = layers[index]
      expect(layer.top + layer.height).toBeCloseTo(below?.top ?? Number.NaN)
    })
  })

  it('is empty without shares', () => {
    expect(sackLayers([], box)).toEqual([])
    expect(sackLayers([{ id: 'corn', share: 0 }], box)).toEqual([])
  })
})

describe('a window bar', () => {
  it('leaves an open side open', () => {
    expect(windowBar(214, 214, undefined).allowed.to).toBe(1)
    expect(windowBar(0.2, undefined, 0.2).allowed.from).toBe(0)
  })

  it('puts a binding mix on the bound and a mix with room inside', () => {
    const binding = windowBar(214, 214, undefined)
    expect(binding.at).toBeCloseTo(binding.allowed.from)
    const room = windowBar(1.9, 1.5, 3)
    expect(room.at).toBeGreaterThan(room.allowed.from)
    expect(room.at).toBeLessThan(room.allowed.to)
  })

  it('survives limits at nothing', () => {
    const { at, allowed } = windowBar(0, undefined, 0)
    expect([at, allowed.from].every(Number.isFinite)).toBe(true)
  })
})

describe('a price rail', () => {
  it('shows the price inside its window with room on the closed sides', () => {
    const rail = priceRail(452, 403, 558)
    expect(rail.at).toBeGreaterThan(rail.window.from)
    expect(rail.at).toBeLessThan(rail.window.to)
    expect(rail.window.from).toBeGreaterThan(0)
    expect(rail.window.to).toBeLessThan(1)
  })

  it('runs to the end where the window is open', () => {
    expect(priceRail(7.5, undefined, undefined)).toMatchObject({
      window: { from: 0, to: 1 },
      lowEnd: false,
      highEnd: false,
    })
  })
})

describe('placing', () => {
  it('stays on the bar', () => {
    expect(placeIn(12, { from: 0, to: 10 })).toBe(1)
    expect(placeIn(-1, { from: 0, to: 10 })).toBe(0)
    expect(placeIn(3, { from: 3, to: 3 })).toBe(0.5)
  })
})
