import { z } from 'zod'
import {
  dateSchema,
  finite,
  idSchema,
  nameSchema,
  noteSchema,
  timestampSchema,
  valueStatusSchema,
  versionSchema,
} from './common'
import { feedClassSchema, nutrientIdSchema } from './feeds'

/**
 * How a mix is meant:
 * - `batch`: the mix is the whole feed; solved with the dry matter of the batch fixed.
 * - `perHead`: the mix is the whole diet of one head and day, within the intake.
 * - `besideForage`: a supplement to the group's base diet; limits hold for the whole diet, per head and day.
 */
export const bases = ['batch', 'perHead', 'besideForage'] as const
export const basisSchema = z.enum(bases)
export type Basis = z.infer<typeof basisSchema>

/** Which feeds a limit is about. A selection by forage or class includes the base diet. */
export const feedSelectionSchema = z.discriminatedUnion('by', [
  z.strictObject({ by: z.literal('feeds'), feedIds: z.array(idSchema).min(1).max(100) }),
  z.strictObject({ by: z.literal('forage') }),
  z.strictObject({ by: z.literal('class'), class: feedClassSchema }),
])
export type FeedSelection = z.infer<typeof feedSelectionSchema>

const limitCommon = {
  /** Stable within the mix. */
  id: z.string().min(1).max(60),
  min: finite(0, 1e9).optional(),
  max: finite(0, 1e9).optional(),
  /** Where the figure comes from, in words; empty for the keeper's own. */
  source: z.string().max(600).default(''),
  status: valueStatusSchema.default('typed'),
  /** The keeper's reason, where a suggested figure was changed. */
  reason: z.string().max(500).optional(),
  enabled: z.boolean().default(true),
  /** A negotiable limit may be loosened by the proposals when no mix is possible; totals and animal rules never are. */
  negotiable: z.boolean().default(true),
}

/**
 * - `perHeadDay`: the nutrient's amount unit (g, mg, Mcal, IU) per head and day
 * - `perKgDryMatter`: the nutrient's unit, on dry matter
 * - `perKgAsFed`: the nutrient's unit, as fed (of the mix; not with `besideForage`)
 */
export const nutrientMeasures = ['perHeadDay', 'perKgDryMatter', 'perKgAsFed'] as const

/** Shares are fractions 0 to 1. Kilograms are of the batch (`batch`) or per head and day. */
export const feedMeasures = ['shareOfDryMatter', 'shareAsFed', 'kgDryMatter', 'kgAsFed'] as const

export const limitSchema = z
  .discriminatedUnion('kind', [
    z.strictObject({
      kind: z.literal('nutrient'),
      nutrient: nutrientIdSchema,
      measure: z.enum(nutrientMeasures),
      ...limitCommon,
    }),
    z.strictObject({
      kind: z.literal('ratio'),
      numerator: nutrientIdSchema,
      denominator: nutrientIdSchema,
      ...limitCommon,
    }),
    z.strictObject({
      kind: z.literal('feeds'),
      of: feedSelectionSchema,
      measure: z.enum(feedMeasures),
      /** Of what the share is taken: the mix alone, or the whole diet with the base diet. */
      within: z.enum(['mix', 'diet']).default('mix'),
      ...limitCommon,
    }),
    /** Dry matter eaten per head and day, base diet included, kg. */
    z.strictObject({ kind: z.literal('intake'), ...limitCommon }),
    /** The mix alone, kg as fed per head and day (the rate at which a supplement is fed). */
    z.strictObject({ kind: z.literal('rate'), ...limitCommon }),
  ])
  .refine((limit) => limit.min !== undefined || limit.max !== undefined, {
    message: 'no_bound',
    path: ['min'],
  })
  .refine((limit) => limit.min === undefined || limit.max === undefined || limit.min <= limit.max, {
    message: 'min_above_max',
    path: ['max'],
  })
export type Limit = z.infer<typeof limitSchema>
export type LimitInput = z.input<typeof limitSchema>

export const mixFeedSchema = z.strictObject({
  feedId: idSchema,
  /** The offer whose price holds; absent: the cheapest per kg on the day. */
  offerId: idSchema.optional(),
  /** A price tried out, per kg as fed in the farm's currency, in place of any offer's. */
  pricePerKg: z
    .string()
    .regex(/^\d{1,6}(\.\d{1,6})?$/, 'money')
    .optional(),
})
export type MixFeed = z.infer<typeof mixFeedSchema>

const mixFields = {
  name: nameSchema,
  groupId: idSchema,
  basis: basisSchema,
  /** With `batch`: how much is mixed, kg dry matter (the weight as fed follows from the feeds). */
  batchDryMatterKg: finite(0.1, 1e6).default(1000),
  /** Prices as of this day; absent: today. */
  pricesAsOf: dateSchema.optional(),
  feeds: z
    .array(mixFeedSchema)
    .max(200)
    .refine((feeds) => new Set(feeds.map((feed) => feed.feedId)).size === feeds.length, 'duplicate_feed'),
  limits: z
    .array(limitSchema)
    .max(200)
    .refine((limits) => new Set(limits.map((limit) => limit.id)).size === limits.length, 'duplicate_limit'),
  note: noteSchema.optional(),
}

/** A mix as the bench edits it; solving takes it as it is, saved or not. */
export const mixDraftSchema = z.strictObject(mixFields)
export type MixDraft = z.infer<typeof mixDraftSchema>
export type MixDraftInput = z.input<typeof mixDraftSchema>

export const mixCreateSchema = mixDraftSchema
/** The bench saves the whole draft: a PUT with If-Match. */
export const mixUpdateSchema = mixDraftSchema

export const mixSchema = z.object({
  id: idSchema,
  ...mixFields,
  version: versionSchema,
  updatedAt: timestampSchema,
})
export type Mix = z.infer<typeof mixSchema>

export const mixSummarySchema = z.object({
  id: idSchema,
  name: nameSchema,
  groupId: idSchema,
  groupName: nameSchema,
  basis: basisSchema,
  feedCount: z.number().int(),
  limitCount: z.number().int(),
  version: versionSchema,
  updatedAt: timestampSchema,
})
export type MixSummary = z.infer<typeof mixSummarySchema>

/** `GET …/groups/{groupId}/first-mix?basis=`: a sensible first mix for the group, not saved. */
export const firstMixQuerySchema = z.object({ basis: basisSchema.optional() })
export const firstMixSchema = z.object({
  draft: mixDraftSchema,
  /** Suggested book feeds that the farm does not keep yet. */
  missingFeeds: z.array(z.object({ bookKey: z.string(), name: z.string() })),
})
export type FirstMix = z.infer<typeof firstMixSchema>
