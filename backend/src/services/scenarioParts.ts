import type { Answer, Comment, RevisionSummary } from '@maslin/shared'
import { Decimal } from 'decimal.js'
import { invalidField } from '../errors'
import type { CommentRow, ReviewRow, ScenarioRevisionRow } from '../repositories/scenarios'
import { plainDecimal } from './offers'

/** Every column of a revision but the big one. */
export const allSummaryColumns = [
  'id',
  'farmId',
  'version',
  'createdAt',
  'updatedAt',
  'scenarioId',
  'revision',
  'state',
  'note',
  'groupName',
  'answerStatus',
  'pricesAsOf',
  'costPerHeadDay',
  'costPerKgAsFed',
  'costPerGroup30Days',
  'schemaVersion',
  'contentHash',
  'createdById',
  'createdBy',
  'submittedAt',
  'decidedAt',
  'decidedBy',
] as const satisfies readonly (keyof ScenarioRevisionRow)[]

type Costs = Pick<ScenarioRevisionRow, 'costPerHeadDay' | 'costPerKgAsFed' | 'costPerGroup30Days'>

/** Costs beside the stored answer, decimal texts with six places in the input's currency; null without a mix. */
export function costsOf(answer: Answer): Costs {
  if (answer.status !== 'optimal')
    return { costPerHeadDay: null, costPerKgAsFed: null, costPerGroup30Days: null }
  const { perHeadDay, mixPerKgAsFed, perGroup30Days } = answer.cost
  return {
    costPerHeadDay: decimal(perHeadDay),
    costPerKgAsFed: decimal(mixPerKgAsFed),
    costPerGroup30Days: decimal(perGroup30Days),
  }
}

/** More than the columns hold, and than any mix costs. */
const MOST_COST = 1e12

function decimal(value: number): string {
  if (Math.abs(value) < MOST_COST) return new Decimal(value).toDecimalPlaces(6).toFixed()
  const message = 'The mix costs more than can be kept: look at the prices tried and the heads of the group.'
  throw invalidField('draft.feeds', 'cost_too_large', message)
}

export function toRevisionSummary(row: ScenarioRevisionRow): RevisionSummary {
  return {
    revision: row.revision,
    state: row.state,
    note: row.note,
    pricesAsOf: row.pricesAsOf,
    ...(row.costPerHeadDay === null ? {} : { costPerHeadDay: plainDecimal(row.costPerHeadDay) }),
    ...(row.costPerKgAsFed === null ? {} : { costPerKgAsFed: plainDecimal(row.costPerKgAsFed) }),
    ...(row.costPerGroup30Days === null ? {} : { costPerGroup30Days: plainDecimal(row.costPerGroup30Days) }),
    contentHash: row.contentHash,
    createdAt: row.createdAt.toISOString(),
    createdBy: row.createdBy,
    ...(row.submittedAt === null ? {} : { submittedAt: row.submittedAt.toISOString() }),
    ...(row.decidedAt === null ? {} : { decidedAt: row.decidedAt.toISOString() }),
    ...(row.decidedBy === null ? {} : { decidedBy: row.decidedBy }),
  }
}

/** Everything said about a scenario, oldest first. */
export function toComments(comments: readonly CommentRow[], reviews: readonly ReviewRow[]): Comment[] {
  const said = [
    ...comments.map((row) => ({ row, kind: row.kind })),
    ...reviews.map((row) => ({ row, kind: row.decision })),
  ]
  // Ids of version 7 sort by time.
  said.sort((a, b) => (a.row.id < b.row.id ? -1 : 1))
  return said.map(({ row, kind }) => ({
    id: row.id,
    revision: row.revision,
    kind,
    text: row.text,
    author: row.author,
    createdAt: row.createdAt.toISOString(),
  }))
}
