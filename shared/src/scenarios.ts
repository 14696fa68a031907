import { z } from 'zod'
import { dateSchema, idSchema, nameSchema, timestampSchema, versionSchema } from './common'
import { answerSchema, curveAlongSchema, formulationInputSchema } from './formulation'
import { mixDraftSchema } from './mixes'

/** `POST …/solve`: solves a draft with the farm's feeds and prices; nothing is saved. */
export const solveRequestSchema = z.strictObject({
  draft: mixDraftSchema,
  /** A second engine's opinion too (always taken when a scenario is saved). */
  secondOpinion: z.boolean().default(false),
  /** Milliseconds after which the server gives up with a reason. */
  deadlineMs: z.number().int().min(50).max(10_000).default(10_000),
})
export type SolveRequest = z.input<typeof solveRequestSchema>

/** The input travels back with the answer: names, prices and requirement as they were used. */
export const solveResponseSchema = z.object({ input: formulationInputSchema, answer: answerSchema })
export type SolveResponse = z.infer<typeof solveResponseSchema>

export const curveRequestSchema = z.strictObject({
  draft: mixDraftSchema,
  along: curveAlongSchema,
  /** Ends of the axis; absent: from half to one and a half times today's value. */
  from: z.number().min(0).max(1e9).optional(),
  to: z.number().min(0).max(1e9).optional(),
  deadlineMs: z.number().int().min(50).max(10_000).default(10_000),
})
export type CurveRequest = z.input<typeof curveRequestSchema>

/** Life of a revision: `draft` → `submitted` → `approved` or `returned`. From `submitted` on its content never changes. */
export const revisionStates = ['draft', 'submitted', 'approved', 'returned'] as const
export const revisionStateSchema = z.enum(revisionStates)
export type RevisionState = z.infer<typeof revisionStateSchema>

/** What lists and comparisons show, kept beside the big JSON. Costs are decimal strings in the farm's currency. */
export const revisionSummarySchema = z.object({
  revision: z.number().int().positive(),
  state: revisionStateSchema,
  note: z.string(),
  pricesAsOf: dateSchema,
  costPerHeadDay: z.string().optional(),
  costPerKgAsFed: z.string().optional(),
  costPerGroup30Days: z.string().optional(),
  /** SHA-256 over the canonical JSON (RFC 8785) of inputs and answer, hexadecimal. */
  contentHash: z.string().regex(/^[0-9a-f]{64}$/),
  createdAt: timestampSchema,
  createdBy: z.string(),
  submittedAt: timestampSchema.optional(),
  decidedAt: timestampSchema.optional(),
  decidedBy: z.string().optional(),
})
export type RevisionSummary = z.infer<typeof revisionSummarySchema>

export const scenarioSummarySchema = z.object({
  id: idSchema,
  name: nameSchema,
  mixId: idSchema.optional(),
  groupName: z.string(),
  latest: revisionSummarySchema,
  revisionCount: z.number().int(),
  version: versionSchema,
  updatedAt: timestampSchema,
})
export type ScenarioSummary = z.infer<typeof scenarioSummarySchema>

export const commentSchema = z.object({
  id: idSchema,
  revision: z.number().int(),
  kind: z.enum(['comment', 'approved', 'returned', 'submitted']),
  text: z.string(),
  author: z.string(),
  createdAt: timestampSchema,
})
export type Comment = z.infer<typeof commentSchema>

export const scenarioSchema = scenarioSummarySchema.extend({
  revisions: z.array(revisionSummarySchema),
  comments: z.array(commentSchema),
})
export type Scenario = z.infer<typeof scenarioSchema>

/** One revision, whole: `GET …/scenarios/{id}/revisions/{n}`. */
export const revisionSchema = revisionSummarySchema.extend({
  schemaVersion: z.number().int(),
  draft: mixDraftSchema,
  input: formulationInputSchema,
  answer: answerSchema,
})
export type Revision = z.infer<typeof revisionSchema>

/** Saves a draft as a new scenario: the server solves it again, with a second opinion, and stores inputs and answer. */
export const scenarioCreateSchema = z.strictObject({
  name: nameSchema,
  mixId: idSchema.optional(),
  note: z.string().trim().max(2000).default(''),
  draft: mixDraftSchema,
})
export type ScenarioCreate = z.input<typeof scenarioCreateSchema>

export const revisionCreateSchema = z.strictObject({
  note: z.string().trim().max(2000).default(''),
  draft: mixDraftSchema,
})
export type RevisionCreate = z.input<typeof revisionCreateSchema>

export const scenarioUpdateSchema = z.strictObject({ name: nameSchema })

/** Cautions of level `acknowledge` must be named by their codes before approval. */
export const reviewCreateSchema = z.strictObject({
  revision: z.number().int().positive(),
  decision: z.enum(['approved', 'returned']),
  text: z.string().trim().min(1).max(4000),
  acknowledged: z.array(z.string().max(80)).max(50).default([]),
})
export type ReviewCreate = z.input<typeof reviewCreateSchema>

export const submitSchema = z.strictObject({
  revision: z.number().int().positive(),
  note: z.string().trim().max(2000).default(''),
})
export const commentCreateSchema = z.strictObject({
  revision: z.number().int().positive(),
  text: z.string().trim().min(1).max(4000),
})

/** A revision that waits for this advisor, over all their farms. */
export const waitingReviewSchema = z.object({
  farm: z.object({ id: idSchema, name: nameSchema }),
  scenario: scenarioSummarySchema,
})
export type WaitingReview = z.infer<typeof waitingReviewSchema>
