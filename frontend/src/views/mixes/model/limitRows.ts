import {
  nutrientIds,
  type Basis,
  type Caution,
  type Limit,
  type LimitResult,
  type OptimalAnswer,
} from '@maslin/shared'
import { dearness } from './margins'
import { limitName, measureOf, type FeedName, type Measure } from './measures'
import type { Words } from './words'

/** One limit as the bench shows it: the keeper's limit, and what the answer says about it. */
export interface LimitRow {
  limit: Limit
  name: string
  measure: Measure
  /** Absent while there is no mix, and for limits that are switched off. */
  result?: LimitResult
}

export interface LimitGroups {
  /** Binding, dearest first. */
  costing: LimitRow[]
  /** With room, nearest to binding first. */
  room: LimitRow[]
  /** Resting on unknown values. */
  notCheckable: LimitRow[]
  off: LimitRow[]
  /** Those the answer says nothing of: there is no mix, or they were just added. */
  waiting: LimitRow[]
}

/** Room to the nearer bound as a part of it, 0 at the bound. */
export function closeness({ value, min, max }: LimitResult): number {
  const gaps = [
    min === undefined ? Infinity : (value - min) / (Math.abs(min) || 1),
    max === undefined ? Infinity : (max - value) / (Math.abs(max) || 1),
  ]
  return Math.min(...gaps)
}

export function limitRows(
  limits: readonly Limit[],
  answer: OptimalAnswer | undefined,
  basis: Basis,
  nameOf: FeedName,
  words: Words,
): LimitGroups {
  const groups: LimitGroups = { costing: [], room: [], notCheckable: [], off: [], waiting: [] }
  for (const limit of limits) {
    const result = answer?.limits.find((one) => one.limitId === limit.id)
    const row: LimitRow = {
      limit,
      name: limitName(limit, nameOf, words),
      measure: measureOf(limit, basis, words),
      ...(result && limit.enabled ? { result } : {}),
    }
    if (!limit.enabled) groups.off.push(row)
    else if (!result) groups.waiting.push(row)
    else if (result.state === 'notCheckable') groups.notCheckable.push(row)
    else if (result.state === 'room') groups.room.push(row)
    else groups.costing.push(row)
  }
  const of = (row: LimitRow, rank: (result: LimitResult) => number) => (row.result ? rank(row.result) : 0)
  groups.costing.sort((a, b) => of(b, dearness) - of(a, dearness))
  groups.room.sort((a, b) => of(a, closeness) - of(b, closeness))
  return groups
}

/** The nutrient a caution is about: named in its parameters, or at the head of its code; undefined for a rule on feeds. */
function nutrientOf({ code, params }: Caution): string | undefined {
  const named = params['nutrient']
  if (typeof named === 'string') return named
  return nutrientIds.find((id) => new RegExp(`^${id}(?![a-z])`).test(code))
}

/** The cautions that stand beside a limit. */
export function cautionsOf(limit: Limit, cautions: readonly Caution[]): Caution[] {
  return cautions.filter((caution) => {
    if (caution.params['limitId'] === limit.id) return true
    const nutrient = nutrientOf(caution)
    if (nutrient === undefined) return false
    if (limit.kind === 'nutrient') return limit.nutrient === nutrient
    return limit.kind === 'ratio' && (limit.numerator === nutrient || limit.denominator === nutrient)
  })
}

/** True for a note about a feed that a rule keeps out: it stands where the feed stands. */
export const isAboutLeftOut = ({ code }: Caution): boolean => code.endsWith('LeftOut')
