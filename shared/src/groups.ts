import { z } from 'zod'
import {
  finite,
  idSchema,
  nameSchema,
  noteSchema,
  speciesSchema,
  timestampSchema,
  valueStatusSchema,
  versionSchema,
} from './common'
import { nutrientIdSchema } from './feeds'

/**
 * What the animals are. `class` and `stage` are keys of `data/stages.csv`; which pairs exist is answered by
 * `GET /api/v1/book/stages`.
 */
export const animalSchema = z.strictObject({
  species: speciesSchema,
  class: z.string().min(1).max(60),
  stage: z.string().min(1).max(80),
  bodyWeightKg: finite(0.02, 1500),
  /** Daily gain, g per head. */
  dailyGainG: finite(-2000, 3000).optional(),
  /** Milk, kg per head and day. */
  milkKg: finite(0, 80).optional(),
  /** Young carried or suckled. */
  litter: z.number().int().min(0).max(20).optional(),
  /** The requirement system (for example `NRC 1985`); absent: the default of the stage. */
  system: z.string().max(60).optional(),
  /** True where horses or donkeys can reach the feed. */
  equidsCanReach: z.boolean().default(false),
})
export type Animal = z.infer<typeof animalSchema>

/** One daily need of one animal, in the nutrient's amount unit (g, mg, Mcal, IU) per head and day. */
export const needSchema = z.strictObject({
  nutrient: nutrientIdSchema,
  kind: z.enum(['min', 'max']),
  perHeadDay: finite(0, 1e9),
  source: z.string().max(600),
  status: valueStatusSchema,
  /** Set where the keeper changed the published figure: the figure before, and why. */
  override: z
    .strictObject({ published: finite(0, 1e9), reason: z.string().trim().min(3).max(500) })
    .optional(),
})
export type Need = z.infer<typeof needSchema>

export const requirementNoteCodes = [
  'interpolated',
  'outsideTable',
  'derivedEnergy',
  'otherStage',
  'noRow',
  'tableGain',
  'sumOfRows',
  'smallestLitter',
] as const

export const requirementSchema = z.object({
  system: z.string(),
  /** Expected intake, kg dry matter per head and day. */
  intakeDryMatterKg: z.number().positive(),
  needs: z.array(needSchema),
  source: z.string(),
  status: valueStatusSchema,
  /** What the reader must know: a table left, an interpolation, with its parameters. */
  notes: z.array(
    z.object({
      code: z.enum(requirementNoteCodes),
      params: z.record(z.string(), z.union([z.string(), z.number()])),
    }),
  ),
})
export type Requirement = z.infer<typeof requirementSchema>

/** A need changed by the keeper. */
export const needOverrideSchema = z.strictObject({
  nutrient: nutrientIdSchema,
  perHeadDay: finite(0, 1e9),
  reason: z.string().trim().min(3).max(500),
})
export type NeedOverride = z.infer<typeof needOverrideSchema>

/** What the group eats anyway. At most one item is free choice; the others are fixed rations. */
export const baseDietItemSchema = z.strictObject({
  feedId: idSchema,
  mode: z.enum(['fixed', 'freeChoice']),
  /** kg dry matter eaten per head and day: the ration when fixed; when free choice, eaten alone without a supplement (absent: the fibre cap). */
  dryMatterKg: finite(0, 100).optional(),
  /** Share of what is offered that is wasted; it is paid for, not eaten. */
  wasteShare: finite(0, 0.9).default(0),
  /** kg of this forage's dry matter left uneaten per kg dry matter of supplement; absent: the default of stage and fibre. */
  substitutionRate: finite(0, 1.5).optional(),
})
export type BaseDietItem = z.infer<typeof baseDietItemSchema>

const groupFields = {
  name: nameSchema,
  animal: animalSchema,
  heads: z.number().int().min(1).max(100000),
  baseDiet: z
    .array(baseDietItemSchema)
    .max(6)
    .refine(
      (items) => items.filter((item) => item.mode === 'freeChoice').length <= 1,
      'only_one_free_choice',
    ),
  needOverrides: z.array(needOverrideSchema).max(60),
  /** kg dry matter per head and day, where the keeper knows better than the table; with a reason. */
  intakeOverride: z
    .strictObject({ dryMatterKg: finite(0.005, 60), reason: z.string().trim().min(3).max(500) })
    .optional(),
  note: noteSchema.optional(),
}

export const groupSchema = z.object({
  id: idSchema,
  ...groupFields,
  /** From the tables, overrides applied. Absent where the tables hold nothing for this animal. */
  requirement: requirementSchema.optional(),
  version: versionSchema,
  updatedAt: timestampSchema,
})
export type Group = z.infer<typeof groupSchema>

export const groupCreateSchema = z.strictObject({
  ...groupFields,
  baseDiet: groupFields.baseDiet.default([]),
  needOverrides: groupFields.needOverrides.default([]),
})
export type GroupCreate = z.input<typeof groupCreateSchema>
/** `intakeOverride: null` takes it back. */
export const groupUpdateSchema = z
  .strictObject({ ...groupFields, intakeOverride: groupFields.intakeOverride.nullable() })
  .partial()
export type GroupUpdate = z.input<typeof groupUpdateSchema>

/** A stage that the tables know, for the choices on the page. */
export const stageSchema = z.object({
  species: speciesSchema,
  class: z.string(),
  classLabel: z.string(),
  stage: z.string(),
  stageLabel: z.string(),
  male: z.boolean(),
  young: z.boolean(),
  phase: z.enum([
    'maintenance',
    'breeding',
    'earlyPregnancy',
    'latePregnancy',
    'lactation',
    'growing',
    'finishing',
  ]),
  systems: z.array(z.string()),
  weights: z.object({ lowKg: z.number(), highKg: z.number() }),
  /** Which of litter, milk and gain tell rows of this stage apart. */
  asks: z.array(z.enum(['litter', 'milkKg', 'dailyGainG'])),
})
export type Stage = z.infer<typeof stageSchema>

/** `POST …/groups/requirement`: what the tables say for an animal that is not saved yet. */
export const requirementRequestSchema = z.strictObject({ animal: animalSchema })
