import type { Limit, OptimalAnswer, Revision, SolverFeed } from '@maslin/shared'
import { boundsText, limitName, measureOf, type FeedName } from '../mixes/model/measures'
import { packageOf, priceText } from '../mixes/model/prices'
import type { Words } from '../mixes/model/words'

/** One line of a comparison; a side is empty where there is nothing to show. */
export interface ComparedLine {
  id: string
  label: string
  left: string
  right: string
  /** Change from left to right in words; empty where it is none or cannot be told. */
  change: string
  /** A change of cost: up is dearer. */
  direction?: 'dearer' | 'cheaper'
  differs: boolean
}

export interface Comparison {
  cost: ComparedLine[]
  blend: ComparedLine[]
  limits: ComparedLine[]
  prices: ComparedLine[]
  /** What makes the two hard to compare: another group, another basis, another currency. */
  warnings: ('group' | 'basis' | 'currency')[]
}

const optimal = (revision: Revision): OptimalAnswer | undefined =>
  revision.answer.status === 'optimal' ? revision.answer : undefined

/** Two figures are the same where they differ by less than one part in a million. */
const same = (a: number, b: number) => Math.abs(a - b) <= 1e-6 * Math.max(Math.abs(a), Math.abs(b))

function moneyLine(
  id: string,
  label: string,
  left: number | undefined,
  right: number | undefined,
  text: (value: number) => string,
  words: Words,
): ComparedLine {
  const line = {
    id,
    label,
    left: left === undefined ? '' : text(left),
    right: right === undefined ? '' : text(right),
  }
  if (left === undefined || right === undefined) return { ...line, change: '', differs: left !== right }
  if (same(left, right)) return { ...line, change: '', differs: false }
  const dearer = right > left
  const change = words.t(`scenarios.compare.${dearer ? 'more' : 'less'}`, {
    amount: text(Math.abs(right - left)),
  })
  return { ...line, change, direction: dearer ? 'dearer' : 'cheaper', differs: true }
}

function costLines(left: Revision, right: Revision, words: Words): ComparedLine[] {
  const [a, b] = [optimal(left)?.cost, optimal(right)?.cost]
  const { t, q } = words
  const perWeight = (value: number) => q.pricePerWeight(value)
  const money = (value: number) => q.money(value)
  return [
    moneyLine('headDay', t('scenarios.compare.headDay'), a?.perHeadDay, b?.perHeadDay, money, words),
    moneyLine('asFed', t('scenarios.compare.asFed'), a?.mixPerKgAsFed, b?.mixPerKgAsFed, perWeight, words),
    moneyLine(
      'dry',
      t('scenarios.compare.dry'),
      a?.mixPerKgDryMatter,
      b?.mixPerKgDryMatter,
      perWeight,
      words,
    ),
    moneyLine('period', t('scenarios.compare.period'), a?.perGroup30Days, b?.perGroup30Days, money, words),
  ]
}

const feedsOf = (revision: Revision): SolverFeed[] => [...revision.input.feeds, ...revision.input.baseFeeds]

function blendLines(left: Revision, right: Revision, nameOf: FeedName, words: Words): ComparedLine[] {
  const [a, b] = [optimal(left)?.blend ?? [], optimal(right)?.blend ?? []]
  const ids = [...new Set([...a, ...b].map((part) => part.feedId))]
  const shareIn = (blend: typeof a, id: string) => blend.find((part) => part.feedId === id)?.shareAsFed ?? 0
  return ids
    .map((id) => ({ id, before: shareIn(a, id), after: shareIn(b, id) }))
    .sort((x, y) => Math.max(y.before, y.after) - Math.max(x.before, x.after))
    .map(({ id, before, after }) => {
      const differs = Math.abs(before - after) > 5e-4
      const points = words.q.number(Math.abs(after - before) * 100, { maximumFractionDigits: 1 })
      return {
        id,
        label: nameOf(id),
        left: before > 0 ? words.q.percent(before) : '',
        right: after > 0 ? words.q.percent(after) : '',
        change: differs
          ? words.t(`scenarios.compare.${after > before ? 'pointsMore' : 'pointsLess'}`, { points })
          : '',
        differs,
      }
    })
}

/** A limit is the same one in both where it is about the same thing, whatever its id. */
function subject({
  id: _id,
  min: _min,
  max: _max,
  source: _s,
  status: _t,
  reason: _r,
  enabled: _e,
  negotiable: _n,
  ...about
}: Limit) {
  return JSON.stringify(about)
}

function limitLines(left: Revision, right: Revision, nameOf: FeedName, words: Words): ComparedLine[] {
  const before = new Map(left.draft.limits.map((limit) => [subject(limit), limit]))
  const after = new Map(right.draft.limits.map((limit) => [subject(limit), limit]))
  const text = (limit: Limit | undefined, revision: Revision) => {
    if (!limit) return ''
    const bounds = boundsText(limit, measureOf(limit, revision.draft.basis, words), words)
    return limit.enabled ? bounds : words.t('scenarios.compare.off', { bounds })
  }
  const costs = (revision: Revision, limit: Limit | undefined) =>
    optimal(revision)?.limits.find((one) => one.limitId === limit?.id)?.state === 'costs'
  return [...new Set([...before.keys(), ...after.keys()])].map((key) => {
    const [a, b] = [before.get(key), after.get(key)]
    const shown = { left: text(a, left), right: text(b, right) }
    const [costBefore, costsNow] = [costs(left, a), costs(right, b)]
    const change =
      costBefore === costsNow ? '' : words.t(`scenarios.compare.${costsNow ? 'nowCosts' : 'nowFree'}`)
    const limit = b ?? a
    return {
      id: key,
      label: limit ? limitName(limit, nameOf, words) : '',
      ...shown,
      change,
      differs: shown.left !== shown.right || change !== '',
    }
  })
}

function priceLines(left: Revision, right: Revision, words: Words): ComparedLine[] {
  const ids = [...new Set([...left.input.feeds, ...right.input.feeds].map((feed) => feed.id))]
  return ids.map((id) => {
    const a = left.input.feeds.find((feed) => feed.id === id)
    const b = right.input.feeds.find((feed) => feed.id === id)
    const size = packageOf(b ?? a, words)
    const text = (value: number) => priceText(value, size, words)
    return moneyLine(id, (b ?? a)?.name ?? '', a?.pricePerKg, b?.pricePerKg, text, words)
  })
}

/** What differs between two revisions, from left to right, in the trade's terms. */
export function compareRevisions(left: Revision, right: Revision, words: Words): Comparison {
  const names = new Map([...feedsOf(left), ...feedsOf(right)].map((feed) => [feed.id, feed.name]))
  const nameOf: FeedName = (id) => names.get(id) ?? ''
  const warnings: Comparison['warnings'] = []
  if (left.input.group.id !== right.input.group.id) warnings.push('group')
  if (left.input.basis !== right.input.basis) warnings.push('basis')
  if (left.input.currency !== right.input.currency) warnings.push('currency')
  return {
    cost: costLines(left, right, words),
    blend: blendLines(left, right, nameOf, words),
    limits: limitLines(left, right, nameOf, words),
    prices: priceLines(left, right, words),
    warnings,
  }
}
