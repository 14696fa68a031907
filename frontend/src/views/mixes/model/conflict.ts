import type { Basis, InfeasibleAnswer, Limit, Loosening } from '@maslin/shared'
import { limitName, measureOf, type FeedName } from './measures'
import { rich, strong, type Run, type Words } from './words'

export interface ConflictContext {
  limits: readonly Limit[]
  basis: Basis
  nameOf: FeedName
}

function bound(limit: Limit, side: 'min' | 'max', context: ConflictContext, words: Words): string {
  const measure = measureOf(limit, context.basis, words)
  const value = side === 'min' ? limit.min : limit.max
  return words.t(`mixes.conflict.${side}`, {
    name: limitName(limit, context.nameOf, words),
    value: value === undefined ? '' : measure.text(value),
    basis: measure.basis,
  })
}

/** What cannot hold together, as one sentence. */
export function conflictSentence(answer: InfeasibleAnswer, context: ConflictContext, words: Words): Run[] {
  const members = answer.conflict.flatMap(({ limitId, side }) => {
    const limit = context.limits.find((one) => one.id === limitId)
    return limit ? [bound(limit, side, context, words)] : []
  })
  if (members.length === 0) return rich(words, 'mixes.conflict.totals', {})
  if (members.length === 1) return rich(words, 'mixes.conflict.one', { limit: strong(members[0] ?? '') })
  const last = members.at(-1) ?? ''
  const first = members.slice(0, -1).join(words.t('mixes.conflict.comma'))
  return rich(words, 'mixes.conflict.several', { first: strong(first), last: strong(last) })
}

/** What a proposal would change: `Crude protein: at least 190 g a head and day instead of 214 g`. */
export function looseningText(loosening: Loosening, context: ConflictContext, words: Words): string {
  const limit = context.limits.find((one) => one.id === loosening.limitId)
  if (!limit) return ''
  const measure = measureOf(limit, context.basis, words)
  const [from, to] = apart(loosening.from, loosening.to, (value, digits) => measure.text(value, digits))
  return words.t(`mixes.conflict.loosen.${loosening.side}`, {
    name: limitName(limit, context.nameOf, words),
    from,
    to,
    basis: measure.basis,
  })
}

function apart(from: number, to: number, text: (value: number, digits: number) => string): [string, string] {
  for (const digits of [3, 4, 5, 6]) {
    if (text(from, digits) !== text(to, digits)) return [text(from, digits), text(to, digits)]
  }
  return [text(from, 6), text(to, 6)]
}
