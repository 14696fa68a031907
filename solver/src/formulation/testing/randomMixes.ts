import {
  nutrientIds,
  type FormulationInput,
  type Limit,
  type LimitInput,
  type NutrientId,
  type SolverFeed,
} from '@maslin/shared'
import { feed, mix, type MixBuilder } from './builders'
import { readingsOf } from './plainReading'

/** A repeatable stream of numbers in [0, 1) (mulberry32). */
export function randomStream(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (state + 0x6d2b79f5) >>> 0
    let t = state
    t = Math.imul(t ^ (t >>> 15), t | 1)
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61)
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296
  }
}

const levels: [NutrientId, number, number][] = [
  ['crudeProtein', 20, 500],
  ['metabolizableEnergy', 1, 3.5],
  ['calcium', 0.2, 20],
  ['phosphorus', 0.5, 12],
  ['neutralDetergentFiber', 50, 700],
]

export interface RandomMixOptions {
  basis: FormulationInput['basis']
  /** Share of the contents that nobody knows. */
  unknown?: number
  /** Prices and contents in round figures and repeated limits, so that corners coincide and mixes tie. */
  round?: boolean
}

/**
 * A mix with limits of every kind set around a mix that exists, so that it can be solved; some limits touch that mix
 * exactly. Invented figures.
 */
export function randomMix(seed: number, options: RandomMixOptions): MixBuilder {
  const random = randomStream(seed)
  const between = (low: number, high: number): number => low + (high - low) * random()
  const pick = <const T>(items: readonly T[]): T => items[Math.floor(random() * items.length)]!
  const figure = (value: number): number => (options.round ? Number(value.toPrecision(1)) : value)
  const makeFeed = (name: string, forage: boolean): SolverFeed =>
    feed(
      name,
      random() < 0.2 ? between(0.12, 0.5) : between(0.82, 0.98),
      Math.max(0.01, figure(between(0.05, 0.8))),
      Object.fromEntries(
        levels.map(([nutrient, low, high]) => {
          if (random() < (options.unknown ?? 0)) return [nutrient, undefined]
          const value = figure(between(low, high))
          return [nutrient, random() < 0.15 ? { value, low: value * 0.9, high: value * 1.1 } : value]
        }),
      ),
      { forage, class: forage ? 'dryForage' : pick(['grain', 'byProduct', 'mineral'] as const) },
    )
  const feeds = Array.from({ length: 4 + Math.floor(random() * 7) }, (_, i) =>
    makeFeed(`f${i}`, random() < 0.25),
  )
  let built: MixBuilder = mix(options.basis)
    .with(...feeds)
    .batchOf(pick([100, 1000, 2500]))
    .group({ intakeDryMatterKg: between(1, 3) })
    .assume({
      any: Object.fromEntries(
        levels.map(([nutrient, , high]) => [nutrient, { value: high, basis: 'invented' }]),
      ),
    })
  if (options.basis === 'besideForage') {
    built = built.beside(makeFeed('hay', true), {
      dryMatterKg: between(0.8, 2),
      substitutionRate: pick([0, 0.42, 0.63, 1]),
      wasteShare: pick([0, 0.15]),
    })
    if (random() < 0.3) built = built.ration(makeFeed('ration', true), { dryMatterKg: between(0.1, 0.5) })
  }
  if (options.basis === 'perHead' && random() < 0.4)
    built = built.ration(makeFeed('ration', true), { dryMatterKg: between(0.1, 0.8) })

  const anchor = anchorOf(built.input, random)
  const kinds: LimitInput[] = []
  const add = (limit: LimitInput): void => void kinds.push(limit)
  if (options.basis === 'perHead') add({ id: 'intake', kind: 'intake', min: 1, max: 1 })
  if (options.basis === 'besideForage') add({ id: 'rate', kind: 'rate', min: 1, max: 1 })
  const wanted = 3 + Math.floor(random() * 6)
  for (let i = 0; i < wanted; i++) add(randomLimit(`l${i}`, built.input, random))
  for (const draft of kinds) built = built.limit(aroundAnchor(draft as Limit, built.input, anchor, random))
  return built
}

/** Kilograms as fed of every feed in a mix that exists. */
function anchorOf(input: FormulationInput, random: () => number): Map<string, number> {
  const weights = input.feeds.map(() => (random() < 0.6 ? random() : 0))
  if (!weights.some((weight) => weight > 0)) weights[0] = 1
  const whole = weights.reduce((sum, weight) => sum + weight, 0)
  const forage = input.baseDiet.find((item) => item.mode === 'freeChoice')
  const room = forage && forage.substitutionRate > 0 ? forage.dryMatterKg / forage.substitutionRate : Infinity
  const dryMatter =
    input.basis === 'batch'
      ? input.batchDryMatterKg
      : Math.min(input.group.intakeDryMatterKg * (0.3 + 0.6 * random()), room * 0.8)
  return new Map(
    input.feeds.map(({ id, dryMatter: share }, i) => [id, ((weights[i]! / whole) * dryMatter) / share]),
  )
}

function randomLimit(id: string, input: FormulationInput, random: () => number): LimitInput {
  const pick = <const T>(items: readonly T[]): T => items[Math.floor(random() * items.length)]!
  const nutrient = (): NutrientId => pick(levels)[0]
  const beside = input.basis === 'besideForage'
  const draw = random()
  const placeholder = { max: 1 }
  if (draw < 0.45) {
    const measures = beside
      ? (['perHeadDay', 'perKgDryMatter'] as const)
      : (['perHeadDay', 'perKgDryMatter', 'perKgAsFed'] as const)
    return { id, kind: 'nutrient', nutrient: nutrient(), measure: pick(measures), ...placeholder }
  }
  if (draw < 0.6) {
    const numerator = nutrient()
    const others = nutrientIds.filter(
      (other) => other !== numerator && levels.some(([known]) => known === other),
    )
    return { id, kind: 'ratio', numerator, denominator: pick(others), ...placeholder }
  }
  if (draw < 0.9) {
    const ids = input.feeds.map((entry) => entry.id).filter(() => random() < 0.4)
    const of =
      random() < 0.3
        ? ({ by: 'forage' } as const)
        : ({ by: 'feeds', feedIds: ids.length > 0 ? ids : [input.feeds[0]!.id] } as const)
    return {
      id,
      kind: 'feeds',
      of,
      measure: pick(['shareOfDryMatter', 'shareAsFed', 'kgDryMatter', 'kgAsFed'] as const),
      within: pick(['mix', 'diet'] as const),
      ...placeholder,
    }
  }
  return { id, kind: input.basis === 'besideForage' && draw < 0.95 ? 'intake' : 'rate', ...placeholder }
}

/** Gives a limit the bounds that the anchor meets, on one side or both. */
function aroundAnchor(
  limit: Limit,
  input: FormulationInput,
  anchor: Map<string, number>,
  random: () => number,
): LimitInput {
  const { low, high } = readingsOf(input, limit, anchor)
  const rest: Partial<Limit> = { ...limit }
  delete rest.min
  delete rest.max
  const slack = (): number => (random() < 0.2 ? 0 : 0.3 * random() ** 2)
  const exact = limit.kind !== 'nutrient' && limit.kind !== 'ratio'
  const min = low * (1 - slack() - (exact ? 0 : 1e-3))
  const max = high * (1 + slack())
  const draw = random()
  const intake = limit.id === 'intake' || limit.id === 'rate'
  if (high >= 1e9 || (draw < 0.5 && !intake) || max === 0)
    return { ...rest, min: Math.min(min, 1e9) } as LimitInput
  return (draw < 0.85 && !intake ? { ...rest, max } : { ...rest, min, max }) as LimitInput
}
