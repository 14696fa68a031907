/** Where things lie on bars, rails and in the sack, as fractions 0 to 1 or in drawing units. Pure, so that tests can measure. */

export interface Span {
  from: number
  to: number
}

const clamp = (value: number) => Math.min(1, Math.max(0, value))

/** Places a value within a span as a fraction 0 to 1. */
export const placeIn = (value: number, { from, to }: Span): number =>
  to > from ? clamp((value - from) / (to - from)) : 0.5

export interface WindowBar {
  /** The part of the bar that is allowed. */
  allowed: Span
  /** Where the mix lies. */
  at: number
  /** Values at the ends of the bar. */
  axis: Span
}

/** A bar for one limit: its minimum, its maximum, where the mix lies. Open sides run to the end of the bar. */
export function windowBar(value: number, min: number | undefined, max: number | undefined): WindowBar {
  const low = Math.min(value, min ?? value)
  const high = Math.max(value, max ?? value)
  const width = high - low
  const pad = Math.max(width * 0.35, Math.max(Math.abs(low), Math.abs(high)) * 0.25, 1e-9)
  const axis = { from: Math.max(0, low - pad), to: high + pad }
  return {
    axis,
    at: placeIn(value, axis),
    allowed: {
      from: min === undefined ? 0 : placeIn(min, axis),
      to: max === undefined ? 1 : placeIn(max, axis),
    },
  }
}

export interface PriceRail {
  /** Where the price of the day stands. */
  at: number
  /** The window in which the blend stays; its open sides run to the end of the rail. */
  window: Span
  lowEnd: boolean
  highEnd: boolean
  axis: Span
}

/** A rail for one price: the window around it with some room on either closed side. */
export function priceRail(price: number, low: number | undefined, high: number | undefined): PriceRail {
  const from = Math.min(price, low ?? price)
  const to = Math.max(price, high ?? price)
  const pad = Math.max((to - from) * 0.3, price * 0.12, 1e-9)
  const axis = { from: Math.max(0, from - pad), to: to + pad }
  return {
    axis,
    at: placeIn(price, axis),
    window: {
      from: low === undefined ? 0 : placeIn(low, axis),
      to: high === undefined ? 1 : placeIn(high, axis),
    },
    lowEnd: low !== undefined,
    highEnd: high !== undefined,
  }
}

export interface Layer {
  id: string
  /** Top edge and height in drawing units, y downwards. */
  top: number
  height: number
  /** Whether its name fits inside. */
  labelled: boolean
}

/**
 * Layers of the sack from the bottom up, heights in proportion to the shares as fed. Thin layers keep a height that can be
 * seen; the others give way in proportion, so that the layers fill the sack exactly.
 * @param shares in the order they go in, largest last; any positive numbers
 */
export function sackLayers(
  shares: readonly { id: string; share: number }[],
  box: { top: number; bottom: number },
  { least = 3, label = 17 }: { least?: number; label?: number } = {},
): Layer[] {
  const filled = shares.filter(({ share }) => share > 0)
  const total = filled.reduce((sum, { share }) => sum + share, 0)
  if (total <= 0) return []
  const height = box.bottom - box.top
  const raw = filled.map(({ id, share }) => ({ id, height: (share / total) * height }))
  const thin = raw.filter((layer) => layer.height < least).length
  const thick = raw.filter((layer) => layer.height >= least).reduce((sum, layer) => sum + layer.height, 0)
  const scale = thick > 0 ? (height - thin * least) / thick : 1
  let bottom = box.bottom
  return raw.map((layer) => {
    const own = layer.height < least && thick > 0 ? least : layer.height * scale
    bottom -= own
    return { id: layer.id, top: bottom, height: own, labelled: own >= label }
  })
}
