import { z } from 'zod'
import {
  dateSchema,
  finite,
  idSchema,
  nameSchema,
  noteSchema,
  timestampSchema,
  versionSchema,
} from './common'
import { moneySchema } from './money'
import { packageUnits } from './units'

export const supplierSchema = z.object({
  id: idSchema,
  name: nameSchema,
  note: noteSchema.optional(),
  version: versionSchema,
})
export type Supplier = z.infer<typeof supplierSchema>
export const supplierCreateSchema = z.strictObject({ name: nameSchema, note: noteSchema.optional() })
export type SupplierCreate = z.infer<typeof supplierCreateSchema>
export const supplierUpdateSchema = supplierCreateSchema.partial()

export const packageUnitSchema = z.enum(packageUnits)

/** One price on one day, in the farm's currency per package. */
export const priceSchema = z.object({
  id: idSchema,
  offerId: idSchema,
  date: dateSchema,
  price: moneySchema,
  source: z.enum(['typed', 'import', 'demo']),
  createdAt: timestampSchema,
})
export type Price = z.infer<typeof priceSchema>

/** What one supplier asks for one feed in one package, with its price on the day asked for. */
export const offerSchema = z.object({
  id: idSchema,
  supplierId: idSchema,
  supplierName: nameSchema,
  feedId: idSchema,
  feedName: nameSchema,
  packageQuantity: finite(1e-6, 1e6),
  packageUnit: packageUnitSchema,
  /** Weight of the package, kg as fed; absent for a bushel of a feed without a test weight. */
  packageKg: z.number().optional(),
  /** Freight to the farm per package. */
  freight: moneySchema,
  current: z
    .object({
      date: dateSchema,
      price: moneySchema,
      /** Price and freight per kg as fed, and per kg of dry matter; absent where the package weight is unknown. */
      perKgAsFed: z.string().optional(),
      perKgDryMatter: z.string().optional(),
    })
    .optional(),
  version: versionSchema,
})
export type Offer = z.infer<typeof offerSchema>

export const offerCreateSchema = z.strictObject({
  supplierId: idSchema,
  feedId: idSchema,
  packageQuantity: finite(1e-6, 1e6),
  packageUnit: packageUnitSchema,
  freight: moneySchema.default('0'),
  /** A first price, set together with the offer. */
  price: moneySchema.optional(),
  date: dateSchema.optional(),
})
export type OfferCreate = z.input<typeof offerCreateSchema>
export const offerUpdateSchema = z.strictObject({
  packageQuantity: finite(1e-6, 1e6).optional(),
  packageUnit: packageUnitSchema.optional(),
  freight: moneySchema.optional(),
})
export type OfferUpdate = z.infer<typeof offerUpdateSchema>

/** Sets the price of a day; the same day again replaces it, with a trace in the audit. */
export const priceSetSchema = z.strictObject({ date: dateSchema, price: moneySchema })
export type PriceSet = z.infer<typeof priceSetSchema>

export const offersQuerySchema = z.object({ asOf: dateSchema.optional(), feedId: idSchema.optional() })

// --- import of a price list ---------------------------------------------------------------------------------------

export const importFields = ['feed', 'supplier', 'package', 'quantity', 'unit', 'price', 'date'] as const
export type ImportField = (typeof importFields)[number]

/** Which column (by its position, from 0) holds which field. `package` is a text such as `50 lb`; or quantity and unit apart. */
export const importMappingSchema = z.strictObject({
  header: z.boolean(),
  delimiter: z.enum([',', ';', '\t', '|']),
  decimal: z.enum(['.', ',']),
  dateOrder: z.enum(['ymd', 'mdy', 'dmy']),
  columns: z.partialRecord(z.enum(importFields), z.number().int().min(0).max(99)),
})
export type ImportMapping = z.infer<typeof importMappingSchema>

export const MAX_IMPORT_CHARACTERS = 2_000_000
export const MAX_IMPORT_ROWS = 20_000

export const importPreviewRequestSchema = z.strictObject({
  fileName: z.string().trim().max(200).default(''),
  text: z.string().min(1).max(MAX_IMPORT_CHARACTERS),
  /** Absent: guessed. */
  mapping: importMappingSchema.optional(),
  /** Where no column names the supplier: the one this list is from, by its name (made if it is new). */
  supplierName: nameSchema.optional(),
  /** Where no column holds a date. */
  date: dateSchema.optional(),
  /** Feed names of the list matched by hand: name as written → feed of the farm, or null to leave its rows out. */
  feedMatches: z.record(z.string().max(200), idSchema.nullable()).default({}),
})
export type ImportPreviewRequest = z.input<typeof importPreviewRequestSchema>

export const importRowStates = ['new', 'changed', 'same', 'error', 'leftOut'] as const

export const importProblemCodes = [
  'missingFeed', 'unknownFeed', 'missingSupplier', 'missingPackage', 'unreadablePackage', 'unknownUnit', 'noTestWeight',
  'missingPrice', 'unreadablePrice', 'negativePrice', 'zeroPrice', 'priceTooLarge', 'missingDate', 'unreadableDate',
  'futureDate', 'duplicateRow', 'tooManyCells', 'textTooLong',
] as const // prettier-ignore

export const importProblemSchema = z.object({
  field: z.enum(importFields),
  code: z.enum(importProblemCodes),
  /** The cell as it stands in the file. */
  value: z.string(),
})

export const importRowSchema = z.object({
  /** Line in the file, from 1, header included. */
  line: z.number().int(),
  state: z.enum(importRowStates),
  cells: z.array(z.string()),
  problems: z.array(importProblemSchema),
  /** How the row was read; absent where it could not be. */
  read: z
    .object({
      feedId: idSchema,
      feedName: z.string(),
      supplierName: z.string(),
      newSupplier: z.boolean(),
      packageQuantity: z.number(),
      packageUnit: packageUnitSchema,
      packageKg: z.number().optional(),
      price: moneySchema,
      date: dateSchema,
      perKgAsFed: z.string().optional(),
      perKgDryMatter: z.string().optional(),
      /** The latest earlier or same-day price of that offer, where there is one. */
      before: z.object({ price: moneySchema, date: dateSchema }).optional(),
    })
    .optional(),
})
export type ImportRow = z.infer<typeof importRowSchema>

export const importPreviewSchema = z.object({
  mapping: importMappingSchema,
  header: z.array(z.string()),
  rows: z.array(importRowSchema),
  counts: z.record(z.enum(importRowStates), z.number().int()),
  /** Columns that no field uses, by their heading: they are not imported. */
  unusedColumns: z.array(z.string()),
  /** Names of feeds in the list that match no feed of the farm, each with the nearest ones. */
  unknownFeeds: z.array(
    z.object({ name: z.string(), suggestions: z.array(z.object({ feedId: idSchema, name: z.string() })) }),
  ),
  /** Fields the list needs and no column has. */
  missingFields: z.array(z.enum(importFields)),
})
export type ImportPreview = z.infer<typeof importPreviewSchema>

export const importApplyRequestSchema = importPreviewRequestSchema.extend({ mapping: importMappingSchema })
export type ImportApplyRequest = z.input<typeof importApplyRequestSchema>

/** The outcome of an applied list; every row of the file is counted in exactly one place. */
export const priceImportSchema = z.object({
  id: idSchema,
  fileName: z.string(),
  counts: z.record(z.enum(importRowStates), z.number().int()),
  /** Rows that were not applied, with their reasons, kept with the import. */
  leftOut: z.array(importRowSchema),
  createdAt: timestampSchema,
  createdBy: z.string(),
})
export type PriceImport = z.infer<typeof priceImportSchema>
