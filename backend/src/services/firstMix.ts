import type { Basis, Feed, FirstMix, Group, MixDraft } from '@maslin/shared'
import { firstMixLimits, suggestedFeeds } from '@maslin/solver'
import { AppError } from '../errors'
import type { FarmRepositories } from '../repositories/inFarm'
import { listFeeds } from './feeds'
import { fallbackRequirement, resolveBaseDiet, solverFeed } from './formulationInput'
import { getGroup } from './groups'
import { stageOf, type RequirementLibrary } from './requirementLibrary'

/** Dry matter of a first batch, kg. */
const BATCH_KG = 1000

/**
 * A sensible first mix for a group, not saved: the suggested feeds that the farm keeps, the first limits, and the names of
 * suggested feeds it does not keep. Beside the base diet where the group has one, else per head and day.
 * Throws AppError `not_found`, `wrong_state` where the tables no longer know the group's stage.
 */
export async function firstMix(
  farm: FarmRepositories,
  library: RequirementLibrary,
  groupId: string,
  wanted?: Basis,
): Promise<FirstMix> {
  const group = await getGroup(farm, library, groupId)
  const stage = stageOf(library, group.animal)
  if (!stage)
    throw new AppError('wrong_state', { detail: 'The tables no longer know the stage of this group.' })
  const basis = wanted ?? (group.baseDiet.length > 0 ? 'besideForage' : 'perHead')
  const kind = { species: group.animal.species, phase: stage.phase, male: stage.male }

  const all = await listFeeds(farm)
  const kept = all.filter((feed) => !feed.archived)
  const suggestion = suggestedFeeds(library.defaults, kind)
  const beside = basis === 'besideForage'
  const baseIds = new Set(group.baseDiet.map(({ feedId }) => feedId))
  const chosen = kept.filter((feed) => {
    const suggested = feed.bookKey !== undefined && suggestion?.feeds.includes(feed.bookKey)
    return baseIds.has(feed.id)
      ? !beside && isFreeChoice(group, feed.id)
      : suggested || (!beside && isOwnForage(feed))
  })
  if (!beside && !chosen.some(({ forage }) => forage)) {
    chosen.unshift(...kept.filter(({ bookKey }) => bookKey && suggestion?.forages.includes(bookKey)))
  }
  const keys = [
    ...(beside || chosen.some(({ forage }) => forage) ? [] : (suggestion?.forages ?? [])),
    ...(suggestion?.feeds ?? []),
  ]
  const held = new Set(kept.map(({ bookKey }) => bookKey))
  const missing = keys.filter((key) => !held.has(key))

  const requirement = group.requirement ?? fallbackRequirement(group)
  // What the group eats counts, archived or not.
  const feeds = new Map(all.map((feed) => [feed.id, feed]))
  const base = resolveBaseDiet({ group, stage, feeds, defaults: library.defaults })
  const counted = [...chosen, ...(beside ? all.filter(({ id }) => baseIds.has(id)) : [])]
  const limits = firstMixLimits(library.defaults, kind, requirement, {
    basis,
    feeds: counted.map((feed) => ({ ...feed, values: solverFeed(feed).values })),
    ...(beside ? { baseIntakeKg: base.reduce((sum, { dryMatterKg }) => sum + dryMatterKg, 0) } : {}),
  })
  return {
    draft: {
      name: nameOf(group),
      groupId,
      basis,
      batchDryMatterKg: BATCH_KG,
      feeds: chosen.map(({ id }) => ({ feedId: id })),
      limits,
    } satisfies MixDraft,
    missingFeeds: missing.map((bookKey) => ({ bookKey, name: library.feedNames[bookKey] ?? bookKey })),
  }
}

/** A whole diet starts from the forage the group eats anyway; its rations count without being chosen. */
const isFreeChoice = (group: Group, feedId: string): boolean =>
  group.baseDiet.some((item) => item.feedId === feedId && item.mode === 'freeChoice')

const isOwnForage = ({ bookKey, forage }: Feed): boolean => forage && bookKey === undefined

const nameOf = ({ name }: Group): string => `Mix for ${name}`.slice(0, 120)
