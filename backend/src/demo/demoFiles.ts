import { readFile } from 'node:fs/promises'
import { join } from 'node:path'
import {
  animalSchema,
  currencySchema,
  dateSchema,
  feedClassSchema,
  moneySchema,
  nutrientIdSchema,
  packageUnitSchema,
  roleSchema,
  unitSystemSchema,
  valueStatusSchema,
} from '@maslin/shared'
import { z } from 'zod'

/** A feed of the demo farm's own; values per kg of dry matter in the nutrient's unit, all from one report. */
const ownFeedSchema = z.object({
  ref: z.string(),
  name: z.string(),
  class: feedClassSchema,
  forage: z.boolean(),
  dryMatter: z.number(),
  source: z.string(),
  status: valueStatusSchema,
  values: z.partialRecord(nutrientIdSchema, z.number()),
})

const offerSchema = z.object({
  supplier: z.string(),
  /** Key of a book feed, or `ref` of an own one. */
  feed: z.string(),
  packageQuantity: z.number(),
  packageUnit: packageUnitSchema,
  freight: moneySchema,
  prices: z.array(z.object({ date: dateSchema, price: moneySchema })),
})

const groupSchema = z.object({
  name: z.string(),
  heads: z.number().int(),
  animal: animalSchema,
  baseDiet: z.array(
    z.object({
      feed: z.string(),
      mode: z.enum(['fixed', 'freeChoice']),
      dryMatterKg: z.number().optional(),
      wasteShare: z.number().default(0),
    }),
  ),
})

const farmSchema = z.object({
  name: z.string(),
  currency: currencySchema,
  units: unitSystemSchema,
  members: z.array(z.object({ ref: z.string(), name: z.string(), email: z.email(), role: roleSchema })),
  bookFeeds: z.array(z.string()),
  ownFeeds: z.array(ownFeedSchema),
  suppliers: z.array(z.object({ name: z.string() })),
  offers: z.array(offerSchema),
  groups: z.array(groupSchema),
})
export type DemoFarm = z.infer<typeof farmSchema>

const revisionSchema = z.object({
  /** `ref` of the member who saves it. */
  by: z.string(),
  pricesAsOf: dateSchema,
  note: z.string(),
  /** What is said on handing it in; absent: it stays a draft. */
  submit: z.string().optional(),
  review: z
    .object({ by: z.string(), decision: z.enum(['approved', 'returned']), text: z.string() })
    .optional(),
})

const mixSchema = z.object({
  farm: z.string(),
  group: z.string(),
  name: z.string(),
  scenario: z.object({ name: z.string(), revisions: z.array(revisionSchema).min(1) }).optional(),
})
export type DemoMix = z.infer<typeof mixSchema>

export interface DemoFiles {
  farms: DemoFarm[]
  mixes: DemoMix[]
}

/** The invented farms, and what their people have done so far. Throws where a file is missing or not of this shape. */
export async function readDemoFiles(directory: string): Promise<DemoFiles> {
  const read = async (file: string): Promise<unknown> =>
    JSON.parse(await readFile(join(directory, file), 'utf8'))
  const { farms } = z.object({ farms: z.array(farmSchema) }).parse(await read('farms.json'))
  const { mixes } = z.object({ mixes: z.array(mixSchema) }).parse(await read('scenarios.json'))
  return { farms, mixes }
}
