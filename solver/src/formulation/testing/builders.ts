import {
  FORMULATION_VERSION,
  limitSchema,
  type FormulationInput,
  type LimitInput,
  type NutrientId,
  type SolverFeed,
} from '@maslin/shared'

/** Builders for tests: a mix is put together in words, every figure that matters stands in the test. */

/** A stable id from a short name, in the form the schemas ask for. */
export function idOf(name: string): string {
  let hex = ''
  for (const sign of name) hex += sign.codePointAt(0)!.toString(16)
  const digits = hex.padEnd(20, '0').slice(-20)
  return `${digits.slice(0, 8)}-${digits.slice(8, 12)}-4000-8000-${digits.slice(12).padEnd(12, '0')}`
}

type Values = Partial<Record<NutrientId, number | { value: number; low?: number; high?: number } | undefined>>
type FeedOptions = Partial<Omit<SolverFeed, 'id' | 'name' | 'values'>>

/** A feed: dry matter share, price per kg as fed (undefined: none), contents per kg of dry matter. */
export function feed(
  name: string,
  dryMatter: number,
  pricePerKg: number | undefined,
  values: Values = {},
  options: FeedOptions = {},
): SolverFeed {
  const known = Object.entries(values).flatMap(([nutrient, entry]) =>
    entry === undefined
      ? []
      : [
          [
            nutrient,
            typeof entry === 'number' ? { value: entry, status: 'typed' } : { ...entry, status: 'typed' },
          ],
        ],
  )
  return {
    id: idOf(name),
    name,
    class: 'grain',
    dryMatter,
    forage: false,
    ruminantOrigin: 'no',
    nonProteinNitrogen: 0,
    addedCopper: false,
    ionophore: false,
    values: Object.fromEntries(known) as SolverFeed['values'],
    ...(pricePerKg === undefined ? {} : { pricePerKg }),
    ...options,
  }
}

type BaseItem = Partial<FormulationInput['baseDiet'][number]> & { dryMatterKg: number }

/** A mix under construction; every step returns a new one. */
export class MixBuilder {
  constructor(readonly input: FormulationInput) {}

  private but(change: Partial<FormulationInput>): MixBuilder {
    return new MixBuilder({ ...this.input, ...change })
  }

  with(...feeds: SolverFeed[]): MixBuilder {
    return this.but({ feeds: [...this.input.feeds, ...feeds] })
  }

  limit(...limits: LimitInput[]): MixBuilder {
    return this.but({ limits: [...this.input.limits, ...limits.map((limit) => limitSchema.parse(limit))] })
  }

  /** The same mix with one bound of one limit at another value. */
  moved(limitId: string, change: { min?: number; max?: number }): MixBuilder {
    return this.but({
      limits: this.input.limits.map((limit) => (limit.id === limitId ? { ...limit, ...change } : limit)),
    })
  }

  /** The same mix with another price of one feed. */
  priced(feedId: string, pricePerKg: number): MixBuilder {
    return this.but({
      feeds: this.input.feeds.map((entry) => (entry.id === feedId ? { ...entry, pricePerKg } : entry)),
    })
  }

  group(change: Partial<FormulationInput['group']>): MixBuilder {
    return this.but({ group: { ...this.input.group, ...change } })
  }

  batchOf(batchDryMatterKg: number): MixBuilder {
    return this.but({ batchDryMatterKg })
  }

  assume(assumedHighs: FormulationInput['assumedHighs']): MixBuilder {
    return this.but({ assumedHighs })
  }

  beside(forage: SolverFeed, item: BaseItem): MixBuilder {
    return this.eaten(forage, { mode: 'freeChoice', ...item })
  }

  ration(fixed: SolverFeed, item: BaseItem): MixBuilder {
    return this.eaten(fixed, { mode: 'fixed', ...item })
  }

  eaten(base: SolverFeed, item: BaseItem): MixBuilder {
    return this.but({
      baseFeeds: [...this.input.baseFeeds, base],
      baseDiet: [
        ...this.input.baseDiet,
        { feedId: base.id, mode: 'fixed', wasteShare: 0, substitutionRate: 0, origin: 'typed', ...item },
      ],
    })
  }
}

export function mix(basis: FormulationInput['basis'] = 'batch'): MixBuilder {
  return new MixBuilder({
    version: FORMULATION_VERSION,
    basis,
    batchDryMatterKg: 1000,
    currency: 'USD',
    pricesAsOf: '2026-01-01',
    group: {
      id: idOf('group'),
      name: 'Ewes',
      species: 'sheep',
      class: 'ewe',
      stage: 'late pregnancy',
      male: false,
      young: false,
      phase: 'latePregnancy',
      bodyWeightKg: 70,
      heads: 10,
      equidsCanReach: false,
      intakeDryMatterKg: 2,
      requirementSource: '',
      needs: [],
    },
    baseDiet: [],
    baseFeeds: [],
    feeds: [],
    limits: [],
    assumedHighs: {},
  })
}
