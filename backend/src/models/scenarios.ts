import type { Answer, Comment, ReviewCreate, RevisionState } from '@maslin/shared'
import { DataTypes, type Sequelize } from 'sequelize'
import { defineFarmTable, idColumn, type FarmRow } from './farmTable'

export interface ScenarioRow extends FarmRow {
  mixId: string | null
  name: string
  latestRevision: number
}

export interface ScenarioRevisionRow extends FarmRow {
  scenarioId: string
  /** From 1. */
  revision: number
  state: RevisionState
  note: string
  groupName: string
  answerStatus: Answer['status']
  pricesAsOf: string
  /** Decimal texts in the farm's currency; null without an answer. */
  costPerHeadDay: string | null
  costPerKgAsFed: string | null
  costPerGroup30Days: string | null
  schemaVersion: number
  /** SHA-256 of `content`, hexadecimal. */
  contentHash: string
  /** Canonical JSON (RFC 8785); big, so that lists leave it out. */
  content: string
  createdById: string
  createdBy: string
  submittedAt: Date | null
  decidedAt: Date | null
  decidedBy: string | null
}

interface Said extends FarmRow {
  scenarioId: string
  revision: number
  text: string
  authorId: string
  author: string
}
export interface CommentRow extends Said {
  kind: Extract<Comment['kind'], 'comment' | 'submitted'>
}
export interface ReviewRow extends Said {
  decision: ReviewCreate['decision']
  /** Codes of the cautions that the advisor took note of. */
  acknowledged: string[]
}

export const defineScenarios = (sequelize: Sequelize) =>
  defineFarmTable<ScenarioRow>(sequelize, 'scenarios', {
    mixId: idColumn(),
    name: DataTypes.STRING,
    latestRevision: DataTypes.INTEGER,
  })

const cost = () => DataTypes.DECIMAL(18, 6)

export const defineScenarioRevisions = (sequelize: Sequelize) =>
  defineFarmTable<ScenarioRevisionRow>(sequelize, 'scenario_revisions', {
    scenarioId: idColumn(),
    revision: DataTypes.INTEGER,
    state: DataTypes.STRING,
    note: DataTypes.STRING,
    groupName: DataTypes.STRING,
    answerStatus: DataTypes.STRING,
    pricesAsOf: DataTypes.DATEONLY,
    costPerHeadDay: cost(),
    costPerKgAsFed: cost(),
    costPerGroup30Days: { type: cost(), field: 'cost_per_group_30_days' },
    schemaVersion: DataTypes.INTEGER,
    contentHash: DataTypes.CHAR(64),
    content: DataTypes.TEXT('long'),
    createdById: idColumn(),
    createdBy: DataTypes.STRING,
    submittedAt: DataTypes.DATE(3),
    decidedAt: DataTypes.DATE(3),
    decidedBy: DataTypes.STRING,
  })

const said = () => ({
  scenarioId: idColumn(),
  revision: DataTypes.INTEGER,
  text: DataTypes.STRING,
  authorId: idColumn(),
  author: DataTypes.STRING,
})

export const defineComments = (sequelize: Sequelize) =>
  defineFarmTable<CommentRow>(sequelize, 'comments', { ...said(), kind: DataTypes.STRING })

export const defineReviews = (sequelize: Sequelize) =>
  defineFarmTable<ReviewRow>(sequelize, 'reviews', {
    ...said(),
    decision: DataTypes.STRING,
    acknowledged: DataTypes.JSON,
  })
