import type { FeedClass } from '@maslin/shared'

/** Shapes that are drawn over a feed's colour, in SVG and on canvas alike, so that nothing depends on colour alone. */
export const shapes = [
  'dots',
  'lines',
  'diagonal',
  'antidiagonal',
  'vertical',
  'cross',
  'plus',
  'rings',
  'zigzag',
  'plain',
] as const
export type Shape = (typeof shapes)[number]

/** How one feed is drawn everywhere on a page. */
export interface Paint {
  /** Ground colour, #rrggbb. */
  ground: string
  /** Colour of the shape over it, #rrggbb. */
  mark: string
  /** Colour of words on it: at least 4.5 : 1. */
  ink: string
  shape: Shape
}

/**
 * One ground a class. Neighbours in lightness are far apart in hue, and the steps of lightness stay apart for the common
 * kinds of colour blindness; the shape tells the rest.
 */
const grounds: Record<FeedClass, { ground: string; shape: Shape }> = {
  grain: { ground: '#D9A441', shape: 'dots' },
  proteinMeal: { ground: '#8A2846', shape: 'lines' },
  byProduct: { ground: '#BC8F63', shape: 'diagonal' },
  dryForage: { ground: '#8FA968', shape: 'vertical' },
  wetForage: { ground: '#3F7670', shape: 'antidiagonal' },
  fat: { ground: '#F0DDA4', shape: 'rings' },
  molasses: { ground: '#5A3F33', shape: 'zigzag' },
  mineral: { ground: '#4C6272', shape: 'plain' },
  premix: { ground: '#9FB4C2', shape: 'plus' },
  other: { ground: '#8D83A8', shape: 'cross' },
}

const channels = (hex: string) => [1, 3, 5].map((at) => Number.parseInt(hex.slice(at, at + 2), 16))
const toHex = (values: readonly number[]) =>
  `#${values.map((value) => Math.round(value).toString(16).padStart(2, '0')).join('')}`

/** Mixes two colours; `part` 0 gives the first, 1 the second. */
export function blendColours(first: string, second: string, part: number): string {
  const [a, b] = [channels(first), channels(second)]
  return toHex(a.map((value, index) => value + ((b[index] ?? value) - value) * part))
}

/** Relative luminance by WCAG 2.2. */
function luminance(hex: string): number {
  const [r = 0, g = 0, b = 0] = channels(hex).map((value) => {
    const part = value / 255
    return part <= 0.04045 ? part / 12.92 : ((part + 0.055) / 1.055) ** 2.4
  })
  return 0.2126 * r + 0.7152 * g + 0.0722 * b
}

/** Contrast of two colours by WCAG 2.2, 1 to 21. */
export function contrast(a: string, b: string): number {
  const [light = 0, dark = 0] = [luminance(a), luminance(b)].sort((x, y) => y - x)
  return (light + 0.05) / (dark + 0.05)
}

const darkInk = '#000000'
const lightInk = '#FFFFFF'

function paint(feedClass: FeedClass, nth: number): Paint {
  const base = grounds[feedClass]
  // Further feeds of a class get another lightness and another shape.
  const towards = nth % 2 === 1 ? '#FFFFFF' : '#000000'
  const ground =
    nth === 0 ? base.ground : blendColours(base.ground, towards, Math.min(0.24 * Math.ceil(nth / 2), 0.5))
  const shape = shapes[(shapes.indexOf(base.shape) + nth * 3) % shapes.length] ?? base.shape
  const ink = contrast(ground, darkInk) >= contrast(ground, lightInk) ? darkInk : lightInk
  return { ground, mark: blendColours(ground, '#FFFFFF', 0.38), ink, shape }
}

/** Paints for the feeds of a page: by class, in the order given within a class, so that a feed keeps its paint. */
export function paintFeeds(feeds: readonly { id: string; class: FeedClass }[]): Map<string, Paint> {
  const counts = new Map<FeedClass, number>()
  const paints = new Map<string, Paint>()
  for (const feed of feeds) {
    if (paints.has(feed.id)) continue
    const nth = counts.get(feed.class) ?? 0
    counts.set(feed.class, nth + 1)
    paints.set(feed.id, paint(feed.class, nth))
  }
  return paints
}
