import { z } from 'zod'
import { dateSchema, finite, idSchema, speciesSchema, valueStatusSchema } from './common'
import { feedClassSchema, nutrientIdSchema, ruminantOriginSchema } from './feeds'
import { baseDietItemSchema, needSchema } from './groups'
import { basisSchema, limitSchema } from './mixes'

/**
 * Everything a solve needs, self-contained: what the service gathers from the database, what a worker solves, and what a
 * scenario stores. An answer saved today can be computed again from it in five years. Amounts are SI; composition is
 * per kg of dry matter; prices are per kg as fed in `currency`.
 */
export const FORMULATION_VERSION = 1

/** A value of one feed as the solver uses it; `low`/`high` where only an interval is known. An unknown value is absent. */
export const solverValueSchema = z.strictObject({
  value: finite(0, 1e9),
  low: finite(0, 1e9).optional(),
  high: finite(0, 1e9).optional(),
  status: valueStatusSchema,
})

export const solverFeedSchema = z.strictObject({
  id: idSchema,
  name: z.string(),
  class: feedClassSchema,
  dryMatter: finite(0.01, 1),
  forage: z.boolean(),
  ruminantOrigin: ruminantOriginSchema,
  nonProteinNitrogen: finite(0, 1),
  addedCopper: z.boolean(),
  ionophore: z.boolean(),
  values: z.partialRecord(nutrientIdSchema, solverValueSchema),
  /** Currency per kg as fed, freight and storage loss included; absent: no price on the day, so the feed stays out. */
  pricePerKg: finite(0, 1e7).optional(),
  /** How that price came about, for the page and the record. */
  priceOrigin: z
    .strictObject({
      supplierName: z.string(),
      packageQuantity: z.number(),
      packageUnit: z.string(),
      packageKg: z.number(),
      price: z.string(),
      date: dateSchema,
    })
    .optional(),
})
export type SolverFeed = z.infer<typeof solverFeedSchema>

export const formulationInputSchema = z.strictObject({
  version: z.literal(FORMULATION_VERSION),
  basis: basisSchema,
  batchDryMatterKg: finite(0.1, 1e6),
  currency: z.string(),
  pricesAsOf: dateSchema,
  group: z.strictObject({
    id: idSchema,
    name: z.string(),
    species: speciesSchema,
    class: z.string(),
    stage: z.string(),
    male: z.boolean(),
    young: z.boolean(),
    phase: z.string(),
    bodyWeightKg: z.number().positive(),
    heads: z.number().int().positive(),
    equidsCanReach: z.boolean(),
    intakeDryMatterKg: z.number().positive(),
    requirementSource: z.string(),
    needs: z.array(needSchema),
  }),
  /** Feeds of the base diet stand in `baseFeeds`, feeds to choose from in `feeds`; one feed may stand in both. */
  baseDiet: z.array(
    baseDietItemSchema.extend({
      /** Resolved: kg dry matter per head and day eaten without a supplement, and kg forage dry matter given up per kg of supplement dry matter. */
      dryMatterKg: finite(0, 100),
      substitutionRate: finite(0, 1.5),
      origin: z.enum(['typed', 'fibreCap', 'table', 'default']),
    }),
  ),
  baseFeeds: z.array(solverFeedSchema),
  feeds: z.array(solverFeedSchema),
  limits: z.array(limitSchema),
  /** What an unknown value is taken as where a maximum counts it: by feed class, then `any`. From `data/assumed-highs.csv`. */
  assumedHighs: z.record(
    z.string(),
    z.partialRecord(nutrientIdSchema, z.strictObject({ value: z.number(), basis: z.string() })),
  ),
})
export type FormulationInput = z.infer<typeof formulationInputSchema>

// --- the answer ------------------------------------------------------------------------------------------------

/** One direction at the margin. `perUnit` = change of cost per unit of the limit, currency per `unit` of cost basis; absent: that move is impossible. */
export const marginSchema = z.strictObject({
  /** Change of the cost (in the answer's `costBasis`) per unit by which the limit moves this way; ≥ 0 costs, ≤ 0 saves. */
  perUnit: z.number().optional(),
  /** The value of the limit up to which that holds; absent: without end. */
  until: z.number().optional(),
  impossible: z.boolean(),
})
export type Margin = z.infer<typeof marginSchema>

export const blendPartSchema = z.strictObject({
  feedId: idSchema,
  kgAsFed: z.number(),
  kgDryMatter: z.number(),
  /** Shares of the mix, 0 to 1. */
  shareAsFed: z.number(),
  shareOfDryMatter: z.number(),
  /** Cost in the answer's cost basis. */
  cost: z.number(),
  pricePerKg: z.number(),
  /** Price range, currency per kg as fed, in which the blend stays as it is; `high` absent: at any higher price. */
  priceWindow: z.strictObject({ low: z.number().optional(), high: z.number().optional() }).optional(),
})
export type BlendPart = z.infer<typeof blendPartSchema>

export const leftOutReasons = [
  'price',
  'noPrice',
  'ruminantOrigin',
  'nonProteinNitrogen',
  'addedCopper',
  'ionophore',
] as const

export const leftOutSchema = z.strictObject({
  feedId: idSchema,
  reason: z.enum(leftOutReasons),
  pricePerKg: z.number().optional(),
  /** Currency per kg as fed at which it would come in; absent with `reason: 'price'`: at no price. */
  buyInPrice: z.number().optional(),
  /** Share as fed of the mix just below that price, and the feed whose share falls most. */
  thenShareAsFed: z.number().optional(),
  replaces: idSchema.optional(),
})
export type LeftOut = z.infer<typeof leftOutSchema>

export const limitResultSchema = z.strictObject({
  limitId: z.string(),
  /** Where the mix (or diet) lies, in the limit's own measure. */
  value: z.number(),
  min: z.number().optional(),
  max: z.number().optional(),
  /** `costs`: binding with a price; `tight`: at its bound at no cost; `room`; `notCheckable`: rests on unknown values too much to tell. */
  state: z.enum(['costs', 'tight', 'room', 'notCheckable']),
  bindingSide: z.enum(['min', 'max']).optional(),
  /** The share (0 to 1) of the total that is assumed, for a maximum; the part of the dry matter whose value is unknown, for a minimum. */
  assumedShare: z.number(),
  unknownFeeds: z.array(idSchema),
  /** Moving the binding bound up and down, in the limit's own unit. */
  raise: marginSchema.optional(),
  lower: marginSchema.optional(),
  /** True where a unit more and a unit less are worth differently (a degenerate optimum). */
  differs: z.boolean(),
})
export type LimitResult = z.infer<typeof limitResultSchema>

export const cautionLevels = ['note', 'warn', 'acknowledge', 'block'] as const
export const cautionSchema = z.strictObject({
  /** Words come from the message catalogue by this code. */
  code: z.string(),
  level: z.enum(cautionLevels),
  params: z.record(z.string(), z.union([z.string(), z.number()])),
  feedIds: z.array(idSchema),
  source: z.string(),
  status: valueStatusSchema,
})
export type Caution = z.infer<typeof cautionSchema>

export const supplySchema = z.strictObject({
  nutrient: nutrientIdSchema,
  /** In the nutrient's amount unit: per head and day, or in the batch. */
  amount: z.number(),
  fromBaseDiet: z.number(),
  /** Per kg of dry matter of the whole diet (or of the mix, for a batch). */
  perKgDryMatter: z.number(),
  /** Part of the dry matter whose value is unknown and counted as nothing here. */
  unknownShare: z.number(),
  /** What each feed brings, in the same unit. */
  parts: z.array(z.strictObject({ feedId: idSchema, amount: z.number(), base: z.boolean() })),
})

/** Evidence that the answer is right, computed on the original data by code that shares nothing with the engines. */
export const proofSchema = z.strictObject({
  engine: z.string(),
  certified: z.boolean(),
  /** Largest relative violation found, and the relative gap between cost and bound. */
  worstViolation: z.number(),
  costGap: z.number(),
  tolerance: z.number(),
  milliseconds: z.number(),
  secondOpinion: z
    .strictObject({
      engine: z.string(),
      agrees: z.boolean().optional(),
      relativeDifference: z.number().optional(),
      note: z.string(),
    })
    .optional(),
})
export type Proof = z.infer<typeof proofSchema>

export const looseningSchema = z.strictObject({
  limitId: z.string(),
  side: z.enum(['min', 'max']),
  from: z.number(),
  to: z.number(),
})
export type Loosening = z.infer<typeof looseningSchema>

export const invalidReasonSchema = z.strictObject({
  code: z.enum([
    'noFeeds',
    'noPricedFeeds',
    'limitNeedsGroup',
    'badLimit',
    'badNumber',
    'noBaseDiet',
    'unknownFeed',
  ]),
  limitId: z.string().optional(),
  feedId: z.string().optional(),
  detail: z.string(),
})

const answerCommon = {
  version: z.literal(FORMULATION_VERSION),
  leftOut: z.array(leftOutSchema),
  cautions: z.array(cautionSchema),
}

export const optimalAnswerSchema = z.strictObject({
  ...answerCommon,
  status: z.literal('optimal'),
  /** The cost that was made least, and that margins refer to: currency per batch, or per head and day (base diet included). */
  costBasis: z.enum(['batch', 'headDay']),
  blend: z.array(blendPartSchema),
  totals: z.strictObject({ kgAsFed: z.number(), kgDryMatter: z.number(), dryMatterShare: z.number() }),
  cost: z.strictObject({
    /** The minimised cost, in `costBasis`. */
    least: z.number(),
    mix: z.number(),
    baseDiet: z.number(),
    mixPerKgAsFed: z.number(),
    mixPerKgDryMatter: z.number(),
    perHeadDay: z.number(),
    perGroup30Days: z.number(),
    /** Base-diet feeds without a price: their cost is unknown and not in the sums. */
    unpricedBaseFeeds: z.array(idSchema),
  }),
  /** kg dry matter and as fed per head and day eaten of each base-diet feed beside the mix. */
  baseDiet: z.array(
    z.strictObject({ feedId: idSchema, kgDryMatter: z.number(), kgAsFed: z.number(), kgOffered: z.number() }),
  ),
  limits: z.array(limitResultSchema),
  supply: z.array(supplySchema),
  /** True where the cheapest blend is one of several that cost the same, or prices differ for more and less. */
  degenerate: z.boolean(),
  proof: proofSchema,
})
export type OptimalAnswer = z.infer<typeof optimalAnswerSchema>

export const infeasibleAnswerSchema = z.strictObject({
  ...answerCommon,
  status: z.literal('infeasible'),
  /** A smallest set of limits that cannot all hold; empty where totals or animal rules alone leave nothing. */
  conflict: z.array(z.strictObject({ limitId: z.string(), side: z.enum(['min', 'max']) })),
  /** Proposals, each of which makes a mix possible when all its loosenings are applied. The first moves least in all. */
  proposals: z.array(
    z.strictObject({ loosenings: z.array(looseningSchema), leastCost: z.number().optional() }),
  ),
  proof: proofSchema,
})
export type InfeasibleAnswer = z.infer<typeof infeasibleAnswerSchema>

export const failedAnswerSchema = z.strictObject({
  ...answerCommon,
  status: z.enum(['unbounded', 'stopped', 'invalid']),
  reasons: z.array(invalidReasonSchema),
  detail: z.string(),
})
export type FailedAnswer = z.infer<typeof failedAnswerSchema>

export const answerSchema = z.discriminatedUnion('status', [
  optimalAnswerSchema,
  infeasibleAnswerSchema,
  failedAnswerSchema,
])
export type Answer = z.infer<typeof answerSchema>

// --- requests ----------------------------------------------------------------------------------------------------

/** What a curve is drawn along: a feed's price per kg as fed, or one side of a limit. */
export const curveAlongSchema = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('price'), feedId: idSchema }),
  z.strictObject({ kind: z.literal('limit'), limitId: z.string(), side: z.enum(['min', 'max']) }),
])
export type CurveAlong = z.infer<typeof curveAlongSchema>

export const curveSchema = z.strictObject({
  along: curveAlongSchema,
  /** True where the kinks are exact; false where the curve was sampled (limits that stay coefficients). */
  exact: z.boolean(),
  /** Today's value on the axis. */
  at: z.number(),
  /** Values with no possible mix beyond, where the curve met one. */
  possible: z.strictObject({ from: z.number().optional(), to: z.number().optional() }),
  points: z.array(
    z.strictObject({
      value: z.number(),
      /** Cost in the answer's cost basis. */
      cost: z.number(),
      /** kg as fed of each feed used, in the mix. At a step two points share one value. */
      blend: z.array(z.strictObject({ feedId: idSchema, kgAsFed: z.number() })),
    }),
  ),
})
export type Curve = z.infer<typeof curveSchema>
