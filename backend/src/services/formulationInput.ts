import {
  FORMULATION_VERSION,
  type BaseDietItem,
  type Feed,
  type FormulationInput,
  type Group,
  type MixDraft,
  type NutrientId,
  type Requirement,
  type SolverFeed,
  type Stage,
} from '@maslin/shared'
import {
  defaultSubstitution,
  fibreCapIntake,
  withDerivedNutrients,
  type AssumedHigh,
  type FirstMixDefaults,
} from '@maslin/solver'

/** Expected intake where no table holds the animal: share of body weight as dry matter a day (common practice, no source). */
const FALLBACK_INTAKE_SHARE = 0.025
const FALLBACK_SOURCE =
  'No table holds this animal; intake taken as 2.5 % of body weight (common practice, no source)'

export type SolverPrice = Required<Pick<SolverFeed, 'pricePerKg' | 'priceOrigin'>>

/** Rows of one farm that a solve rests on, already scoped and read. */
export interface SolveParts {
  draft: MixDraft
  currency: string
  pricesAsOf: string
  group: Group
  stage: Stage
  feeds: ReadonlyMap<string, Feed>
  /** Price of an offer on the day, by offer; and the cheapest by feed. Absent: no price. */
  priceOfOffer: ReadonlyMap<string, SolverPrice>
  cheapest: ReadonlyMap<string, SolverPrice>
  assumedHighs: readonly AssumedHigh[]
  defaults: FirstMixDefaults
}

/**
 * Everything the solver needs, in one self-contained document: what a worker gets and what a scenario stores. Amounts in
 * SI, composition per kg of dry matter, prices per kg as fed.
 */
export function buildFormulationInput(parts: SolveParts): FormulationInput {
  const { draft, group, stage } = parts
  const chosen = new Map(draft.feeds.map((feed) => [feed.feedId, feed]))
  const feedOf = (feedId: string): SolverFeed => {
    const feed = parts.feeds.get(feedId)
    if (!feed) throw new RangeError(`feed ${feedId} was not read`)
    return { ...solverFeed(feed), ...priceOf(parts, feedId, chosen.get(feedId)) }
  }
  const requirement = group.requirement
  return {
    version: FORMULATION_VERSION,
    basis: draft.basis,
    batchDryMatterKg: draft.batchDryMatterKg,
    currency: parts.currency,
    pricesAsOf: parts.pricesAsOf,
    group: {
      id: group.id,
      name: group.name,
      species: group.animal.species,
      class: group.animal.class,
      stage: group.animal.stage,
      male: stage.male,
      young: stage.young,
      phase: stage.phase,
      bodyWeightKg: group.animal.bodyWeightKg,
      heads: group.heads,
      equidsCanReach: group.animal.equidsCanReach,
      intakeDryMatterKg: expectedIntake(group),
      requirementSource: requirement?.source ?? FALLBACK_SOURCE,
      needs: requirement?.needs ?? [],
    },
    baseDiet: resolveBaseDiet(parts),
    baseFeeds: group.baseDiet.map(({ feedId }) => feedOf(feedId)),
    feeds: draft.feeds.map(({ feedId }) => feedOf(feedId)),
    limits: draft.limits,
    assumedHighs: highsByClass(parts.assumedHighs),
  }
}

/** kg dry matter per head and day: the keeper's figure, else the table's, else a share of body weight. */
export function expectedIntake(group: Pick<Group, 'animal' | 'requirement' | 'intakeOverride'>): number {
  return (
    group.intakeOverride?.dryMatterKg ??
    group.requirement?.intakeDryMatterKg ??
    group.animal.bodyWeightKg * FALLBACK_INTAKE_SHARE
  )
}

/** What a group without a row in the tables starts from: no needs, an intake by weight. */
export function fallbackRequirement(group: Pick<Group, 'animal' | 'intakeOverride'>): Requirement {
  return {
    system: '',
    intakeDryMatterKg: expectedIntake(group),
    needs: [],
    source: FALLBACK_SOURCE,
    status: 'practice',
    notes: [{ code: 'noRow', params: {} }],
  }
}

/** The feed as the solver reads it; what follows from other values (ME from TDN, NFC) is added, marked as derived. */
export function solverFeed(feed: Feed): SolverFeed {
  const values: SolverFeed['values'] = {}
  const known = withDerivedNutrients(feed.values, (value, before) => ({
    value,
    source: before?.source ?? '',
    status: 'derived' as const,
  }))
  for (const [nutrient, entry] of Object.entries(known)) {
    const { value, low, high, status } = entry
    values[nutrient as NutrientId] = {
      value,
      ...(low === undefined ? {} : { low }),
      ...(high === undefined ? {} : { high }),
      status,
    }
  }
  return {
    id: feed.id,
    name: feed.name,
    class: feed.class,
    dryMatter: feed.dryMatter,
    forage: feed.forage,
    ruminantOrigin: feed.ruminantOrigin,
    nonProteinNitrogen: feed.nonProteinNitrogen,
    addedCopper: feed.addedCopper,
    ionophore: feed.ionophore,
    values,
  }
}

/** A price tried out, else that of the chosen offer, else the cheapest on the day. */
function priceOf(
  parts: SolveParts,
  feedId: string,
  chosen: MixDraft['feeds'][number] | undefined,
): Partial<SolverPrice> {
  if (chosen?.pricePerKg !== undefined) return { pricePerKg: Number(chosen.pricePerKg) }
  if (chosen?.offerId !== undefined) return parts.priceOfOffer.get(chosen.offerId) ?? {}
  return parts.cheapest.get(feedId) ?? {}
}

/**
 * Base diet with its figures filled in, kg dry matter per head and day:
 * - a ration as typed, giving way to nothing
 * - free choice: as typed, else what the gut holds of it after the rations (fibre cap), else the expected intake less the
 *   rations; it gives way to a supplement at the typed rate, else at the default of stage and fibre
 */
export function resolveBaseDiet({
  group,
  stage,
  feeds,
  defaults,
}: Pick<SolveParts, 'group' | 'stage' | 'feeds' | 'defaults'>): FormulationInput['baseDiet'] {
  const rations = group.baseDiet.reduce(
    (sum, item) => sum + (item.mode === 'fixed' ? (item.dryMatterKg ?? 0) : 0),
    0,
  )
  return group.baseDiet.map((item) => {
    if (item.mode === 'fixed') return resolved(item, item.dryMatterKg ?? 0, 'typed', 0)
    const fibre = feeds.get(item.feedId)?.values.neutralDetergentFiber?.value
    const rate = item.substitutionRate ?? defaultSubstitution(defaults, stage.phase, fibre).value
    if (item.dryMatterKg !== undefined) return resolved(item, item.dryMatterKg, 'typed', rate)
    const cap = fibreCapIntake(defaults, group.animal.bodyWeightKg, stage.phase, fibre)
    const whole = cap ?? expectedIntake(group)
    const origin = cap !== undefined ? 'fibreCap' : group.requirement ? 'table' : 'default'
    return resolved(item, Math.max(0, whole - rations), origin, rate)
  })
}

function resolved(
  item: BaseDietItem,
  dryMatterKg: number,
  origin: FormulationInput['baseDiet'][number]['origin'],
  substitutionRate: number,
): FormulationInput['baseDiet'][number] {
  return {
    feedId: item.feedId,
    mode: item.mode,
    wasteShare: item.wasteShare,
    dryMatterKg: Math.min(dryMatterKg, 100),
    substitutionRate,
    origin,
  }
}

function highsByClass(rows: readonly AssumedHigh[]): FormulationInput['assumedHighs'] {
  const found: FormulationInput['assumedHighs'] = {}
  for (const { class: feedClass, nutrient, value, name } of rows) {
    ;(found[feedClass] ??= {})[nutrient] = { value, basis: name }
  }
  return found
}
