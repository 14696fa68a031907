import type { FeedClass, NutrientId, Species, Stage, ValueStatus } from '@maslin/shared'

export type Phase = Stage['phase']

/** One figure of the defaults with its basis in words and where it comes from. */
export interface DefaultFigure {
  value: number
  basis: string
  source: string
  status: ValueStatus
}

export interface SuggestedFeeds {
  species: Species
  phases: Phase[]
  /** For stages of males (wethers among them). */
  males: boolean
  /** Book keys of forages, for a mix that has no base diet to stand on. */
  forages: string[]
  /** Book keys of the other feeds. */
  feeds: string[]
}

export interface Ceiling extends DefaultFigure {
  id: string
  feedClass: FeedClass
  /** Only the feed copied from this book feed; absent: the whole class. */
  bookKey?: string
  /** The phases it holds for; absent: all. */
  phases?: Phase[]
  /** True: for each feed of the class; false: for the class together. */
  each: boolean
  measure: 'shareOfDryMatter' | 'shareAsFed'
  within: 'mix' | 'diet'
  /** False: no proposal may loosen it; absent: true. */
  negotiable?: boolean
}

/** The shape of `data/first-mix.json`: the figures that make a first mix sensible. */
export interface FirstMixDefaults {
  energy: { nutrient: NutrientId; source: string; status: ValueStatus }
  /** Least crude protein, g per kg of diet dry matter, by species and phase. */
  proteinFloor: Partial<Record<Species, Partial<Record<Phase, DefaultFigure>>>>
  calciumToPhosphorus: {
    general: { min: DefaultFigure }
    males: { min: DefaultFigure; max: DefaultFigure; phosphorusMax: DefaultFigure }
  }
  /** Shares of the diet's dry matter, 0 to 1. */
  forageShareMin: Record<Phase, DefaultFigure>
  /** g per kg of diet dry matter. */
  starchMax: Record<Phase, DefaultFigure>
  nonFiberCarbohydrateMax: Record<Phase, DefaultFigure>
  fatMax: DefaultFigure
  sulphurMax: { forageDiet: DefaultFigure; grainDiet: DefaultFigure }
  intakeMinShareOfTable: DefaultFigure
  /** What is eaten with a supplement, as a multiple of a base diet that fills the animal beyond the table's intake. */
  intakeOverForage: DefaultFigure
  concentrateAtOneFeeding: { maxKg: DefaultFigure; maxShareOfBodyWeight: DefaultFigure }
  substitution: {
    byPhase: Partial<Record<Phase, DefaultFigure>>
    /** From the most fibrous forage down; `ndfFrom` in g per kg of the forage's dry matter. */
    lactationByForageFiber: (DefaultFigure & { ndfFrom: number })[]
    grazing: DefaultFigure
    rationed: DefaultFigure
  }
  /** kg of NDF eaten per kg of body weight and day. */
  fibreCap: { byPhase: Record<Phase, DefaultFigure> }
  ceilings: Ceiling[]
  /** mg per kg of diet dry matter. */
  copper: { warnAbove: DefaultFigure; stopAbove: DefaultFigure }
  margins: { minimaMetWith: DefaultFigure; toxicMaximaMetWith: DefaultFigure }
  /** A loose mineral at its rate, kg as fed per head and day, and its greatest share of the expected intake, 0 to 1. */
  mineral: Partial<Record<Species, DefaultFigure & { feedKey: string }>> & { maxShareOfIntake: DefaultFigure }
  suggestedFeeds: SuggestedFeeds[]
}

/** The feeds suggested for a first mix, by book key; undefined where there is no suggestion for the species. */
export function suggestedFeeds(
  defaults: FirstMixDefaults,
  group: { species: Species; phase: Phase; male: boolean },
): SuggestedFeeds | undefined {
  const fits = defaults.suggestedFeeds.filter(
    (entry) => entry.species === group.species && entry.phases.includes(group.phase),
  )
  return fits.find((entry) => entry.males === group.male) ?? fits[0]
}
