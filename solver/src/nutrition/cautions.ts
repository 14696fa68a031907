import type { Caution, LeftOut, SolverFeed, Species } from '@maslin/shared'
import type { FirstMixDefaults } from './defaults'

/** What the animal rules look at in a group. */
export interface RuleGroup {
  species: Species
  young: boolean
  /** True where horses or donkeys can reach the feed. */
  equidsCanReach: boolean
}

/** What the animal rules look at in a feed. */
export type RuleFeed = Pick<
  SolverFeed,
  'id' | 'ruminantOrigin' | 'nonProteinNitrogen' | 'addedCopper' | 'ionophore'
>

export interface AnimalRulesResult {
  /** Feeds that must stay out of the mix, each with the first rule that says so. */
  leftOut: { feedId: string; reason: Exclude<LeftOut['reason'], 'price' | 'noPrice'> }[]
  cautions: Caution[]
}

const ruminants: readonly Species[] = ['sheep', 'goat', 'beefCattle', 'dairyCattle']
const smallRuminants: readonly Species[] = ['sheep', 'goat']

type Reason = AnimalRulesResult['leftOut'][number]['reason']

interface Rule {
  reason: Reason
  code: string
  applies: (group: RuleGroup) => boolean
  forbids: (feed: RuleFeed) => boolean
  source: string
  status: Caution['status']
}

const banSource =
  'Rules on feeds of ruminant origin (for example 21 CFR 589.2000, which exempts milk and blood); laws differ by place'
const copperSource = 'Common practice of flock keepers: no added copper for sheep; In Practice 1997, 19:503'
const ureaSource =
  'Feedipedia, datasheet Urea: only with a working rumen, not for young stock or non-ruminants'
const ionophoreSource = 'Veterinary texts: monensin at cattle levels can be fatal to horses; see the label'

const rules: Rule[] = [
  {
    reason: 'addedCopper',
    code: 'addedCopper',
    applies: ({ species }) => species === 'sheep',
    forbids: (feed) => feed.addedCopper,
    source: copperSource,
    status: 'practice',
  },
  {
    reason: 'ruminantOrigin',
    code: 'ruminantOrigin',
    applies: ({ species }) => ruminants.includes(species),
    forbids: (feed) => feed.ruminantOrigin === 'yes',
    source: banSource,
    status: 'memory',
  },
  {
    reason: 'nonProteinNitrogen',
    code: 'nonProteinNitrogen',
    applies: ({ species, young }) =>
      young || !ruminants.includes(species) || smallRuminants.includes(species),
    forbids: (feed) => feed.nonProteinNitrogen > 0,
    source: ureaSource,
    status: 'read',
  },
  {
    reason: 'ionophore',
    code: 'ionophore',
    applies: ({ species, equidsCanReach }) => species === 'horse' || equidsCanReach,
    forbids: (feed) => feed.ionophore,
    source: ionophoreSource,
    status: 'read',
  },
]

/** Feeds that may stay, with a word of warning. */
const warnings: (Omit<Rule, 'reason'> & { level: Caution['level'] })[] = [
  {
    code: 'ruminantOriginExempt',
    level: 'warn',
    applies: ({ species }) => ruminants.includes(species),
    forbids: (feed) => feed.ruminantOrigin === 'exempt',
    source: banSource,
    status: 'memory',
  },
  {
    code: 'ionophoreLabel',
    level: 'acknowledge',
    applies: () => true,
    forbids: (feed) => feed.ionophore,
    source: ionophoreSource,
    status: 'read',
  },
  {
    code: 'nonProteinNitrogenAdult',
    level: 'acknowledge',
    applies: () => true,
    forbids: (feed) => feed.nonProteinNitrogen > 0,
    source: ureaSource,
    status: 'read',
  },
]

/**
 * The rules that hold from the first mix: no added copper for sheep, no feed of ruminant origin for ruminants (exempt
 * classes with a warning), no urea or other non-protein nitrogen for young or non-ruminant animals nor, by default, for
 * sheep and goats, no ionophore where equids can reach the feed.
 *
 * @param feeds feeds offered to the mix: those forbidden are left out, with a note
 * @param baseFeeds feeds of the base diet, which the mix cannot leave out: a forbidden one blocks
 * @returns codes and parameters; the words come from the message catalogue
 */
export function animalRules(
  group: RuleGroup,
  feeds: readonly RuleFeed[],
  baseFeeds: readonly RuleFeed[] = [],
): AnimalRulesResult {
  const leftOut = new Map<string, Reason>()
  const cautions: Caution[] = []
  const params = { species: group.species }
  const say = (
    rule: Omit<Rule, 'reason'>,
    level: Caution['level'],
    found: readonly RuleFeed[],
    code: string,
  ) => {
    if (!found.length) return
    const feedIds = [...new Set(found.map((feed) => feed.id))]
    cautions.push({ code, level, params, feedIds, source: rule.source, status: rule.status })
  }
  const active = rules.filter((rule) => rule.applies(group))
  for (const rule of active) {
    const out = feeds.filter(rule.forbids)
    for (const feed of out) if (!leftOut.has(feed.id)) leftOut.set(feed.id, rule.reason)
    say(rule, 'note', out, `${rule.code}LeftOut`)
    say(rule, 'block', baseFeeds.filter(rule.forbids), `${rule.code}InBaseDiet`)
  }
  const allowed = [...feeds, ...baseFeeds].filter((feed) => !active.some((rule) => rule.forbids(feed)))
  for (const warning of warnings.filter((rule) => rule.applies(group))) {
    say(warning, warning.level, allowed.filter(warning.forbids), warning.code)
  }
  return { leftOut: [...leftOut].map(([feedId, reason]) => ({ feedId, reason })), cautions }
}

export type CopperState = 'none' | 'low' | 'warn' | 'acknowledge' | 'block' | 'notCheckable'

export interface CopperInput {
  species: Species
  /** Copper of the whole diet, mg per kg of dry matter, unknown values taken at their assumed highs. */
  totalPerKg: number
  /** Part of that total that is assumed, 0 to 1. */
  assumedShare: number
  /** Whether the known part rests on tested lots or on book values. */
  origin: 'tested' | 'book'
  /** The feeds whose copper is unknown or largest, for the reader. */
  feedIds?: string[]
}

const levels = {
  low: 'note',
  warn: 'warn',
  acknowledge: 'acknowledge',
  notCheckable: 'acknowledge',
  block: 'block',
} as const satisfies Record<Exclude<CopperState, 'none'>, Caution['level']>

/**
 * Copper in a diet for sheep: above 10 mg/kg of dry matter a warning, above 15 to be acknowledged on book values and
 * blocked on tested ones. What the known values alone exceed counts as exceeded; a total that is low even with the assumed
 * highs is low, and is said too, so that no mix for sheep goes out without a look at copper; in between, with more assumed
 * than known, it cannot be checked. Other species: no caution.
 */
export function copperCaution(
  thresholds: FirstMixDefaults['copper'],
  input: CopperInput,
): { state: CopperState; caution?: Caution } {
  if (input.species !== 'sheep') return { state: 'none' }
  const { warnAbove, stopAbove } = thresholds
  const known = input.totalPerKg * (1 - input.assumedShare)
  const mostlyAssumed = input.assumedShare > 0.5
  const state = ((): Exclude<CopperState, 'none'> => {
    if (known > stopAbove.value) return input.origin === 'tested' ? 'block' : 'acknowledge'
    if (input.totalPerKg === 0 && mostlyAssumed) return 'notCheckable'
    if (input.totalPerKg <= warnAbove.value) return 'low'
    if (mostlyAssumed) return 'notCheckable'
    if (input.totalPerKg > stopAbove.value) return 'acknowledge'
    return 'warn'
  })()
  const figure = state === 'warn' || state === 'low' ? warnAbove : stopAbove
  return {
    state,
    caution: {
      code: `copper${state.charAt(0).toUpperCase()}${state.slice(1)}`,
      level: levels[state],
      params: {
        totalPerKg: input.totalPerKg,
        knownPerKg: known,
        assumedShare: input.assumedShare,
        limit: figure.value,
        origin: input.origin,
      },
      feedIds: input.feedIds ?? [],
      source: figure.source,
      status: figure.status,
    },
  }
}
