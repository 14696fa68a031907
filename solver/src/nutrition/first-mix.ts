import type { Basis, FeedClass, Limit, NutrientId, Requirement, Species } from '@maslin/shared'
import type { DefaultFigure, FirstMixDefaults, Phase } from './defaults'

export interface FirstMixGroup {
  species: Species
  phase: Phase
  male: boolean
}

/** A feed on the first mix's list, as far as the limits look at it. */
export interface FirstMixFeed {
  id: string
  /** Key of the book feed it was copied from. */
  bookKey?: string
  class: FeedClass
  /** kg dry matter per kg as fed. */
  dryMatter: number
  /** Known values per kg of dry matter, in the nutrient's unit. */
  values: Partial<Record<NutrientId, { value: number }>>
}

export interface FirstMixOptions {
  basis: Basis
  /** The feeds of the mix and of the base diet: where the starch of one is unknown, NFC takes its row. */
  feeds?: readonly FirstMixFeed[]
  /** Free-choice and fixed base diet eaten without a supplement, kg dry matter per head and day. */
  baseIntakeKg?: number
}

type Origin = Pick<Limit, 'source' | 'status'>

const common = { enabled: true, negotiable: true } as const
const origin = (figure: DefaultFigure): Origin => ({ source: figure.source, status: figure.status })

/**
 * The limits of a first mix: ME, crude protein, calcium, phosphorus, Ca:P, share of forage, starch (or NFC), fat, and
 * intake as a window; the loose mineral of the species at its rate and ceilings for minerals, salt, by-products and molasses
 * where such feeds are among the feeds. A need that the requirement does not name gives no row. Needs are amounts per head and day, for a batch they are put as concentrations at the
 * expected intake.
 */
export function firstMixLimits(
  defaults: FirstMixDefaults,
  group: FirstMixGroup,
  requirement: Requirement,
  options: FirstMixOptions,
): Limit[] {
  const { basis, feeds = [] } = options
  const batch = basis === 'batch'
  const intake = requirement.intakeDryMatterKg
  const amount = (perHeadDay: number) => (batch ? perHeadDay / intake : perHeadDay)
  const need = (nutrient: NutrientId) =>
    requirement.needs.find((entry) => entry.nutrient === nutrient && entry.kind === 'min')
  const measure = batch ? ('perKgDryMatter' as const) : ('perHeadDay' as const)
  const limits: Limit[] = []

  const energy = need(defaults.energy.nutrient)
  if (energy) {
    const { source, status, perHeadDay } = energy
    limits.push({
      ...common, id: 'energy', kind: 'nutrient', nutrient: energy.nutrient, measure, min: amount(perHeadDay), source, status,
    }) // prettier-ignore
  }

  const protein = proteinNeed(defaults, group, requirement)
  if (protein) {
    const { perHeadDay, ...source } = protein
    limits.push({
      ...common,
      id: 'protein',
      kind: 'nutrient',
      nutrient: 'crudeProtein',
      measure,
      min: amount(perHeadDay),
      ...source,
    })
  }

  const ratio = defaults.calciumToPhosphorus
  const calcium = need('calcium')
  if (calcium) {
    limits.push({
      ...common,
      id: 'calcium',
      kind: 'nutrient',
      nutrient: 'calcium',
      measure,
      min: amount(calcium.perHeadDay),
      source: calcium.source,
      status: calcium.status,
    })
  }
  const phosphorus = need('phosphorus')
  if (phosphorus) {
    limits.push({
      ...common,
      id: 'phosphorus',
      kind: 'nutrient',
      nutrient: 'phosphorus',
      measure,
      min: amount(phosphorus.perHeadDay),
      source: phosphorus.source,
      status: phosphorus.status,
    })
  }
  // A row of its own: animals that fill themselves with hay eat more phosphorus than the table's intake holds, not richer.
  const stones = ratio.males.phosphorusMax
  if (group.male && (phosphorus?.perHeadDay ?? 0) <= stones.value * intake) {
    limits.push(concentrationMax('phosphorusMost', 'phosphorus', stones))
  }
  limits.push({
    ...common,
    id: 'calciumToPhosphorus',
    kind: 'ratio',
    numerator: 'calcium',
    denominator: 'phosphorus',
    ...(group.male
      ? { min: ratio.males.min.value, max: ratio.males.max.value, ...origin(ratio.males.min) }
      : { min: ratio.general.min.value, ...origin(ratio.general.min) }),
  })

  const forage = defaults.forageShareMin[group.phase]
  limits.push({
    ...common,
    id: 'forageShare',
    kind: 'feeds',
    of: { by: 'forage' },
    measure: 'shareOfDryMatter',
    within: 'diet',
    min: forage.value,
    ...origin(forage),
  })

  const starchKnown = feeds.length > 0 && feeds.every((feed) => feed.values.starch !== undefined)
  const carbohydrate = starchKnown ? 'starch' : 'nonFiberCarbohydrate'
  const most = (starchKnown ? defaults.starchMax : defaults.nonFiberCarbohydrateMax)[group.phase]
  limits.push(
    concentrationMax(carbohydrate, carbohydrate, most),
    concentrationMax('fat', 'crudeFat', defaults.fatMax),
  )

  if (!batch) limits.push(intakeWindow(defaults, requirement, options))
  const mineral = mineralLimit(defaults, group.species, feeds, intake, batch)
  if (mineral) limits.push(mineral)
  return [...limits, ...ceilingLimits(defaults, group, feeds)]
}

/** The table's crude protein, or the floor of the species where that is more; g per head and day. */
function proteinNeed(
  defaults: FirstMixDefaults,
  group: FirstMixGroup,
  requirement: Requirement,
): (Origin & { perHeadDay: number }) | undefined {
  const table = requirement.needs.find(({ nutrient, kind }) => nutrient === 'crudeProtein' && kind === 'min')
  const floor = defaults.proteinFloor[group.species]?.[group.phase]
  const least = (floor?.value ?? 0) * requirement.intakeDryMatterKg
  if (floor && least > (table?.perHeadDay ?? 0)) return { perHeadDay: least, ...origin(floor) }
  return table && { perHeadDay: table.perHeadDay, source: table.source, status: table.status }
}

function concentrationMax(id: string, nutrient: NutrientId, figure: DefaultFigure): Limit {
  return {
    ...common,
    id,
    kind: 'nutrient',
    nutrient,
    measure: 'perKgDryMatter',
    max: figure.value,
    ...origin(figure),
  }
}

/**
 * What the animal eats in all. Beside hay or pasture there is no lower end, and the upper one is the table's intake, or a
 * fifth more than what it eats of the forage alone where that is higher: a supplement displaces good forage only in part.
 */
function intakeWindow(defaults: FirstMixDefaults, requirement: Requirement, options: FirstMixOptions): Limit {
  const most = requirement.intakeDryMatterKg
  const window = { ...common, id: 'intake', kind: 'intake' as const, max: most }
  if (options.basis === 'besideForage') {
    const { baseIntakeKg = 0 } = options
    const over = defaults.intakeOverForage
    const withSupplement = baseIntakeKg * over.value
    if (withSupplement > most) return { ...window, max: withSupplement, ...origin(over) }
    return { ...window, source: requirement.source, status: requirement.status }
  }
  const least = defaults.intakeMinShareOfTable
  return {
    ...window,
    min: most * least.value,
    source: `${requirement.source}; lower end: ${least.source}`.slice(0, 600),
    status: requirement.status,
  }
}

/**
 * The loose mineral of the species at its rate, exactly: kg as fed per head and day, or its share of a batch. A small animal
 * gets less, by what it eats: the rate of a grown one would bring it too much selenium and, for goats, copper. No proposal
 * may change the rate.
 */
function mineralLimit(
  defaults: FirstMixDefaults,
  species: Species,
  feeds: readonly FirstMixFeed[],
  intakeKg: number,
  batch: boolean,
): Limit | undefined {
  const rate = defaults.mineral[species]
  const feed = rate && feeds.find((entry) => entry.bookKey === rate.feedKey)
  if (!rate || !feed) return undefined
  const { maxShareOfIntake: most } = defaults.mineral
  const share = (rate.value * feed.dryMatter) / intakeKg
  const small = share > most.value
  const value = batch
    ? Math.min(share, most.value)
    : small
      ? (most.value * intakeKg) / feed.dryMatter
      : rate.value
  return {
    ...common,
    negotiable: false,
    id: 'mineral',
    kind: 'feeds',
    of: { by: 'feeds', feedIds: [feed.id] },
    measure: batch ? 'shareOfDryMatter' : 'kgAsFed',
    within: 'mix',
    min: value,
    max: value,
    ...origin(small ? most : rate),
  }
}

/**
 * Ceilings that keep a cheap feed from filling a mix: minerals together, salt, each by-product, molasses; and sulphur where
 * a feed holds more of it than the whole diet may. Only what occurs among the feeds gets a row. Shares are of the whole
 * diet's dry matter or of the mix as fed, as the defaults say.
 */
export function ceilingLimits(
  defaults: FirstMixDefaults,
  group: Pick<FirstMixGroup, 'phase'>,
  feeds: readonly FirstMixFeed[],
): Limit[] {
  const ceilings = defaults.ceilings.flatMap((ceiling): Limit[] => {
    if (ceiling.phases && !ceiling.phases.includes(group.phase)) return []
    const fitting = feeds.filter((feed) =>
      ceiling.bookKey === undefined ? feed.class === ceiling.feedClass : feed.bookKey === ceiling.bookKey,
    )
    const { measure, within, negotiable = true } = ceiling
    const rest = { ...common, negotiable, kind: 'feeds', measure, within } as const
    if (!fitting.length) return []
    if (!ceiling.each) {
      const of = { by: 'class' as const, class: ceiling.feedClass }
      return [{ ...rest, id: ceiling.id, of, max: ceiling.value, ...origin(ceiling) }]
    }
    return fitting.map((feed) => ({
      ...rest,
      id: `${ceiling.id}-${feed.id}`.slice(0, 60),
      of: { by: 'feeds' as const, feedIds: [feed.id] },
      max: ceiling.value,
      ...origin(ceiling),
    }))
  })
  const sulphur = defaults.sulphurMax[group.phase === 'finishing' ? 'grainDiet' : 'forageDiet']
  const rich = feeds.some(({ values }) => (values.sulfur?.value ?? 0) > sulphur.value)
  return rich ? [...ceilings, concentrationMax('sulfur', 'sulfur', sulphur)] : ceilings
}
