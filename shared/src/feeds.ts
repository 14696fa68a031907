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
import { nutrientIds } from './nutrients'

export const feedClasses = [
  'dryForage',
  'wetForage',
  'grain',
  'byProduct',
  'proteinMeal',
  'fat',
  'molasses',
  'mineral',
  'premix',
  'other',
] as const
export const feedClassSchema = z.enum(feedClasses)
export type FeedClass = z.infer<typeof feedClassSchema>

export const nutrientIdSchema = z.enum(nutrientIds)

/** One value of a feed, per kg of dry matter in the nutrient's unit. An unknown value has no entry at all: unknown is not zero. */
export const feedValueSchema = z.strictObject({
  value: finite(0, 1e9),
  low: finite(0, 1e9).optional(),
  high: finite(0, 1e9).optional(),
  /** Standard deviation, same unit and basis. */
  sd: finite(0, 1e9).optional(),
  source: z.string().max(600),
  status: valueStatusSchema,
})
export type FeedValue = z.infer<typeof feedValueSchema>

export const feedValuesSchema = z.partialRecord(nutrientIdSchema, feedValueSchema)
export type FeedValues = z.infer<typeof feedValuesSchema>

/** `exempt`: of ruminant origin, but outside the ban in some places (milk, blood products). */
export const ruminantOriginSchema = z.enum(['no', 'yes', 'exempt'])

const feedFields = {
  name: nameSchema,
  class: feedClassSchema,
  /** Dry matter, kg per kg as fed. */
  dryMatter: finite(0.01, 1),
  dryMatterSource: z.string().max(600),
  dryMatterStatus: valueStatusSchema,
  forage: z.boolean(),
  /** kg as fed per US bushel; absent where unknown. */
  testWeightKg: finite(1, 200).optional(),
  /** kg as fed per litre; absent where unknown. */
  bulkDensityKgPerL: finite(0.01, 5).optional(),
  ruminantOrigin: ruminantOriginSchema,
  /** Share of the crude protein (N × 6.25) that is non-protein nitrogen: 1 for urea and ammonium salts. */
  nonProteinNitrogen: finite(0, 1),
  addedCopper: z.boolean(),
  ionophore: z.boolean(),
  note: noteSchema.optional(),
  values: feedValuesSchema,
}

export const feedSchema = z.object({
  id: idSchema,
  ...feedFields,
  /** Key of the book feed it was copied from; absent for a feed of the farm's own. */
  bookKey: z.string().optional(),
  archived: z.boolean(),
  version: versionSchema,
  updatedAt: timestampSchema,
})
export type Feed = z.infer<typeof feedSchema>

export const feedCreateSchema = z.strictObject({
  ...feedFields,
  dryMatterSource: feedFields.dryMatterSource.default(''),
  dryMatterStatus: valueStatusSchema.default('typed'),
  ruminantOrigin: ruminantOriginSchema.default('no'),
  nonProteinNitrogen: feedFields.nonProteinNitrogen.default(0),
  addedCopper: z.boolean().default(false),
  ionophore: z.boolean().default(false),
  values: feedValuesSchema.default({}),
})
export type FeedCreate = z.input<typeof feedCreateSchema>

export const feedUpdateSchema = z
  .strictObject(feedFields)
  .partial()
  .extend({ archived: z.boolean().optional() })
export type FeedUpdate = z.infer<typeof feedUpdateSchema>

/** Copies book feeds into the farm, where they can be edited. Already copied ones are left as they are. */
export const feedCopySchema = z.strictObject({ bookKeys: z.array(z.string().min(1).max(80)).min(1).max(300) })
export type FeedCopy = z.infer<typeof feedCopySchema>

export const bookFeedSchema = z.object({
  key: z.string(),
  ...feedFields,
  internationalFeedNumber: z.string().optional(),
})
export type BookFeed = z.infer<typeof bookFeedSchema>

/** A farm's feed in a list: what a table shows, with the cheapest price on the day asked for. */
export const feedSummarySchema = feedSchema.extend({
  price: z
    .object({ offerId: idSchema, supplierName: z.string(), perKgAsFed: z.string(), date: dateSchema })
    .optional(),
})
export type FeedSummary = z.infer<typeof feedSummarySchema>
