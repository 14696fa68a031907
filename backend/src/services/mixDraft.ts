import type { FieldProblem, MixDraft } from '@maslin/shared'
import { AppError } from '../errors'
import type { FarmRepositories } from '../repositories/inFarm'

/**
 * Sees that everything a draft names is the farm's own: its group, feeds, offers, and the feeds of its limits.
 * Throws AppError `invalid_input` with the path of each that is not, a hundred at most.
 * @param within prefix of the paths in problems (`draft.`)
 * @param toSave locks the feeds, so that none is removed before the draft is saved
 */
export async function checkDraft(
  farm: FarmRepositories,
  draft: MixDraft,
  { within = '', toSave = false }: { within?: string; toSave?: boolean } = {},
): Promise<void> {
  const problems = [
    ...(await groupProblems(farm, draft)),
    ...(await feedProblems(farm, draft, toSave)),
    ...(await offerProblems(farm, draft)),
  ].map((problem) => ({ ...problem, path: within + problem.path }))
  if (problems.length > 0) throw new AppError('invalid_input', { errors: problems.slice(0, 100) })
}

/** Every feed that a draft names, in its list and in its limits. */
export function feedsNamedIn(draft: MixDraft): { feedId: string; path: string }[] {
  return [
    ...draft.feeds.map(({ feedId }, index) => ({ feedId, path: `feeds.${index}.feedId` })),
    ...draft.limits.flatMap((limit, index) =>
      limit.kind === 'feeds' && limit.of.by === 'feeds'
        ? limit.of.feedIds.map((feedId, place) => ({ feedId, path: `limits.${index}.of.feedIds.${place}` }))
        : [],
    ),
  ]
}

async function groupProblems(farm: FarmRepositories, { groupId }: MixDraft): Promise<FieldProblem[]> {
  if ((await farm.groups.count({ id: groupId })) > 0) return []
  return [{ path: 'groupId', code: 'unknown_group', message: 'The farm has no such group.' }]
}

async function feedProblems(
  farm: FarmRepositories,
  draft: MixDraft,
  forUpdate: boolean,
): Promise<FieldProblem[]> {
  const named = feedsNamedIn(draft)
  const ids = [...new Set(named.map(({ feedId }) => feedId))]
  const known = new Set(
    (await farm.feeds.list({ id: ids }, { columns: ['id'], forUpdate })).map(({ id }) => id),
  )
  return named
    .filter(({ feedId }) => !known.has(feedId))
    .map(({ path }) => ({ path, code: 'unknown_feed', message: 'The farm keeps no such feed.' }))
}

async function offerProblems(farm: FarmRepositories, draft: MixDraft): Promise<FieldProblem[]> {
  const ids = draft.feeds.flatMap(({ offerId }) => (offerId === undefined ? [] : [offerId]))
  if (ids.length === 0) return []
  const offers = new Map((await farm.offers.list({ id: ids })).map((offer) => [offer.id, offer.feedId]))
  return draft.feeds.flatMap(({ feedId, offerId }, index) => {
    if (offerId === undefined || offers.get(offerId) === feedId) return []
    return [
      {
        path: `feeds.${index}.offerId`,
        code: 'unknown_offer',
        message: 'The farm has no such offer for this feed.',
      },
    ]
  })
}
