import type { Animal, FeedClass, NutrientId, Requirement, Species, Stage, ValueStatus } from '@maslin/shared'

/** The nutrients a row of the requirement tables can hold, as amounts per head and day (or additions to them). */
export const rowNutrients = [
  'totalDigestibleNutrients',
  'digestibleEnergy',
  'metabolizableEnergy',
  'crudeProtein',
  'calcium',
  'phosphorus',
  'vitaminA',
  'vitaminD',
  'vitaminE',
] as const satisfies readonly NutrientId[]
export type RowNutrient = (typeof rowNutrients)[number]

/** One published line of a requirement table. A figure the source does not give is absent. */
export interface RequirementRow {
  key: string
  /** Rows of one table are interpolated between; of two tables never. */
  table: string
  system: string
  species: Species
  /** Class, stage and litter as published. */
  class: string
  stage: string
  litter: string
  /** `total`: the whole need; `addition`: on top of another row (per kg of milk, for so much gain, for pregnancy). */
  role: 'total' | 'addition'
  bodyWeightKg?: number
  dailyGainG?: number
  milkKg?: number
  milkFatPercent?: number
  intakeDryMatterKg?: number
  /** In the amount unit of the nutrient (g, Mcal, IU) per head and day. */
  amounts: Partial<Record<RowNutrient, number>>
  sourceKey: string
  status: ValueStatus
  note: string
}

/** How a stage that pages offer is put together from the tables of one system. */
export interface StageRow {
  species: Species
  class: string
  classLabel: string
  stage: string
  stageLabel: string
  male: boolean
  young: boolean
  pregnant: boolean
  lactating: boolean
  phase: Stage['phase']
  system: string
  litterFrom?: number
  litterTo?: number
  table: string
  /** Multiplies intake, energy and protein (activity, sex), not minerals or vitamins. */
  factor: number
  factorSourceKey?: string
  /** Tables of additions. */
  additions: string[]
  /** An equation that replaces part of the table. */
  equation?: 'kidMeat' | 'kidDairy' | 'kidLocal' | 'dairyGoatIntake'
  /** The table was made for another class of animal. */
  borrowed: boolean
  asks: Stage['asks']
  weightLowKg?: number
  weightHighKg?: number
}

export interface RequirementTables {
  rows: RequirementRow[]
  stages: StageRow[]
  /** Words for a source key. */
  sources: Record<string, string>
}

export type RequirementQuery = Pick<
  Animal,
  'species' | 'class' | 'stage' | 'bodyWeightKg' | 'dailyGainG' | 'milkKg' | 'litter' | 'system'
>

/** A requirement with how it was found. */
export interface RequirementLookup extends Requirement {
  /** The two table weights (kg) between which the figures lie. */
  interpolatedBetween?: [number, number]
  /** The animal lies outside the table in weight, gain or litter; the nearest row was taken, nothing extrapolated. */
  outsideTable: boolean
}

/** What an unknown value is taken as where a maximum counts it. */
export interface AssumedHigh {
  /** A feed class, or `any` for the whole library. */
  class: FeedClass | 'any'
  nutrient: NutrientId
  /** Per kg of dry matter, in the nutrient's unit. */
  value: number
  /** How many known values it rests on. */
  n: number
  name: string
}
