import {
  limitSchema,
  type Limit,
  type LimitInput,
  type Loosening,
  type MixDraft,
  type MixFeed,
} from '@maslin/shared'

/** Every edit of the bench as a pure function: a new draft comes back, the old one stays for undo. */

export const feedOf = (draft: MixDraft, feedId: string): MixFeed | undefined =>
  draft.feeds.find((feed) => feed.feedId === feedId)

export const limitOf = (draft: MixDraft, limitId: string): Limit | undefined =>
  draft.limits.find((limit) => limit.id === limitId)

export function addFeed(draft: MixDraft, feedId: string): MixDraft {
  return feedOf(draft, feedId) ? draft : { ...draft, feeds: [...draft.feeds, { feedId }] }
}

/** Takes a feed out, together with the limits that are about it alone; in limits on several feeds it is left out. */
export function removeFeed(draft: MixDraft, feedId: string): MixDraft {
  const limits = draft.limits.flatMap((limit): Limit[] => {
    if (limit.kind !== 'feeds' || limit.of.by !== 'feeds' || limit.within === 'diet') return [limit]
    const feedIds = limit.of.feedIds.filter((id) => id !== feedId)
    return feedIds.length === 0 ? [] : [{ ...limit, of: { by: 'feeds', feedIds } }]
  })
  return { ...draft, feeds: draft.feeds.filter((feed) => feed.feedId !== feedId), limits }
}

function changeFeed(draft: MixDraft, feedId: string, change: (feed: MixFeed) => MixFeed): MixDraft {
  return { ...draft, feeds: draft.feeds.map((feed) => (feed.feedId === feedId ? change(feed) : feed)) }
}

/** Tries a price. @param perKg currency per kg as fed, a decimal string with at most six places */
export const tryPrice = (draft: MixDraft, feedId: string, perKg: string): MixDraft =>
  changeFeed(draft, feedId, (feed) => ({ ...feed, pricePerKg: perKg }))

/** Back to the price of the day. */
export const resetPrice = (draft: MixDraft, feedId: string): MixDraft =>
  changeFeed(draft, feedId, ({ pricePerKg: _tried, ...feed }) => feed)

export function changeLimit(draft: MixDraft, limitId: string, change: (limit: Limit) => Limit): MixDraft {
  return { ...draft, limits: draft.limits.map((limit) => (limit.id === limitId ? change(limit) : limit)) }
}

export interface Bounds {
  min?: number | undefined
  max?: number | undefined
}

/** Sets both bounds; without a reason the one that stood there is kept. */
export function setBounds(draft: MixDraft, limitId: string, bounds: Bounds, reason?: string): MixDraft {
  return changeLimit(draft, limitId, (limit) => withBounds(limit, bounds, reason))
}

function withBounds(limit: Limit, { min, max }: Bounds, reason?: string): Limit {
  const open = { ...limit }
  delete open.min
  delete open.max
  return {
    ...open,
    ...(min === undefined ? {} : { min }),
    ...(max === undefined ? {} : { max }),
    ...(reason?.trim() ? { reason: reason.trim() } : {}),
  }
}

/** Moves one bound. The other one gives way where the two would cross, and goes along where they were one figure. */
export function setBound(draft: MixDraft, limitId: string, side: 'min' | 'max', value: number): MixDraft {
  return changeLimit(draft, limitId, (limit) => {
    const other = side === 'min' ? 'max' : 'min'
    const stays = limit[other]
    const crossed = stays !== undefined && (side === 'min' ? value > stays : value < stays)
    const together = stays !== undefined && stays === limit[side]
    return { ...limit, [side]: value, ...(crossed || together ? { [other]: value } : {}) }
  })
}

export const setEnabled = (draft: MixDraft, limitId: string, enabled: boolean): MixDraft =>
  changeLimit(draft, limitId, (limit) => ({ ...limit, enabled }))

export const setNegotiable = (draft: MixDraft, limitId: string, negotiable: boolean): MixDraft =>
  changeLimit(draft, limitId, (limit) => ({ ...limit, negotiable }))

export const removeLimit = (draft: MixDraft, limitId: string): MixDraft => ({
  ...draft,
  limits: draft.limits.filter((limit) => limit.id !== limitId),
})

/** A short id that no limit of the draft has. */
export function freeLimitId(draft: MixDraft, base: string): string {
  const taken = new Set(draft.limits.map((limit) => limit.id))
  const stem = base.slice(0, 50)
  if (!taken.has(stem)) return stem
  let number = 2
  while (taken.has(`${stem}-${number}`)) number++
  return `${stem}-${number}`
}

/** Adds a limit. @throws {z.ZodError} where it has no bound, or the least is above the most */
export function addLimit(draft: MixDraft, limit: LimitInput): MixDraft {
  return { ...draft, limits: [...draft.limits, limitSchema.parse(limit)] }
}

/** The keeper's own limit on one feed of the mix, if there is one. */
export function ownLimitOf(draft: MixDraft, feedId: string): Extract<Limit, { kind: 'feeds' }> | undefined {
  return draft.limits.find(
    (limit): limit is Extract<Limit, { kind: 'feeds' }> =>
      limit.kind === 'feeds' &&
      limit.within === 'mix' &&
      limit.of.by === 'feeds' &&
      limit.of.feedIds.length === 1 &&
      limit.of.feedIds[0] === feedId,
  )
}

/**
 * Sets a feed's own limits; without any bound they are taken away.
 * @param measure what the bounds are: shares 0 to 1, or kg (of the batch, or per head and day)
 */
export function setOwnLimit(
  draft: MixDraft,
  feedId: string,
  measure: 'shareAsFed' | 'kgAsFed',
  bounds: Bounds,
): MixDraft {
  const own = ownLimitOf(draft, feedId)
  const none = bounds.min === undefined && bounds.max === undefined
  if (none) return own ? removeLimit(draft, own.id) : draft
  if (own) {
    return changeLimit(draft, own.id, () => withBounds({ ...own, measure, enabled: true }, bounds))
  }
  const id = freeLimitId(draft, `feed-${feedId}`)
  return addLimit(draft, { id, kind: 'feeds', of: { by: 'feeds', feedIds: [feedId] }, measure, ...bounds })
}

/** Keeps a feed in the list but at nothing, until it is let in again. */
export const keepOut = (draft: MixDraft, feedId: string): MixDraft =>
  setOwnLimit(draft, feedId, 'shareAsFed', { max: 0 })

export function isKeptOut(draft: MixDraft, feedId: string): boolean {
  const own = ownLimitOf(draft, feedId)
  return own !== undefined && own.enabled && own.max === 0
}

/** Applies a proposal: every bound it names moves to where a mix is possible. */
export function applyLoosenings(draft: MixDraft, loosenings: readonly Loosening[]): MixDraft {
  return loosenings.reduce((next, { limitId, side, to }) => setBound(next, limitId, side, to), draft)
}
