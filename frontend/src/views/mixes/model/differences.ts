import type { Limit, MixDraft } from '@maslin/shared'
import { boundsText, limitName, measureOf, type FeedName } from './measures'
import type { Words } from './words'

export interface Difference {
  label: string
  theirs: string
  yours: string
}

/** What differs between two drafts of one mix, one line a feed or limit. */
export function draftDifferences(
  theirs: MixDraft,
  yours: MixDraft,
  nameOf: FeedName,
  words: Words,
): Difference[] {
  const { t, q } = words
  const lines: Difference[] = []
  const compare = (label: string, a: string, b: string) => {
    if (a !== b) lines.push({ label, theirs: a, yours: b })
  }
  compare(t('mixes.bench.name'), theirs.name, yours.name)
  compare(t('mixes.basis.label'), t(`mixes.basis.${theirs.basis}`), t(`mixes.basis.${yours.basis}`))
  compare(t('mixes.ribbon.pricesAsOf'), theirs.pricesAsOf ?? '', yours.pricesAsOf ?? '')
  const feedText = (draft: MixDraft, id: string) => {
    const feed = draft.feeds.find((one) => one.feedId === id)
    if (!feed) return t('common.none')
    return feed.pricePerKg === undefined ? t('common.yes') : q.pricePerWeight(feed.pricePerKg)
  }
  for (const id of union(theirs.feeds, yours.feeds, (feed) => feed.feedId)) {
    compare(nameOf(id), feedText(theirs, id), feedText(yours, id))
  }
  const limitText = (draft: MixDraft, id: string) => {
    const limit = draft.limits.find((one) => one.id === id)
    if (!limit) return t('common.none')
    const bounds = boundsText(limit, measureOf(limit, draft.basis, words), words)
    return limit.enabled ? bounds : t('scenarios.compare.off', { bounds })
  }
  const limits = new Map<string, Limit>([...theirs.limits, ...yours.limits].map((limit) => [limit.id, limit]))
  for (const [id, limit] of limits) {
    compare(limitName(limit, nameOf, words), limitText(theirs, id), limitText(yours, id))
  }
  return lines
}

const union = <T>(a: readonly T[], b: readonly T[], id: (item: T) => string): string[] => [
  ...new Set([...a, ...b].map(id)),
]
