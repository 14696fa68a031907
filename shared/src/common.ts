import { z } from 'zod'

export const idSchema = z.uuid()
export const versionSchema = z.number().int().positive()
/** A calendar day, `YYYY-MM-DD`. */
export const dateSchema = z.iso.date()
export const timestampSchema = z.iso.datetime()

export const nameSchema = z.string().trim().min(1).max(120)
export const noteSchema = z.string().trim().max(2000)

/** A cursor-paged list. `nextCursor` is absent on the last page. */
export const pageOf = <T extends z.ZodType>(item: T) =>
  z.object({ items: z.array(item), nextCursor: z.string().optional() })

export const pageQuerySchema = z.object({
  cursor: z.string().max(200).optional(),
  limit: z.coerce.number().int().min(1).max(500).default(200),
})

/** A finite number within a range; JSON cannot carry NaN, but 1e309 parses to Infinity. */
export const finite = (min: number, max: number) => z.number().min(min).max(max)

/** How a figure came to be known. `memory`: recalled from a named publication, not yet read again. */
export const valueStatuses = [
  'read',
  'memory',
  'practice',
  'derived',
  'laboratory',
  'typed',
  'invented',
] as const
export const valueStatusSchema = z.enum(valueStatuses)
export type ValueStatus = z.infer<typeof valueStatusSchema>

export const speciesList = ['sheep', 'goat', 'beefCattle', 'dairyCattle', 'pig', 'poultry', 'horse'] as const
export const speciesSchema = z.enum(speciesList)
export type Species = z.infer<typeof speciesSchema>
