import {
  importApplyRequestSchema,
  importPreviewRequestSchema,
  importPreviewSchema,
  MAX_IMPORT_CHARACTERS,
  pageOf,
  priceImportSchema,
} from '@maslin/shared'
import { applyImport, listImports, previewImport } from '../services/priceImports'
import { route } from './route'

/** A list's characters take up to four bytes each, and some are escaped in JSON. */
const listRoute = {
  method: 'post',
  access: 'prices.write',
  bodyLimit: 4 * MAX_IMPORT_CHARACTERS + 1_000_000,
  longTexts: { text: MAX_IMPORT_CHARACTERS },
  attemptsPerQuarterHour: 300,
} as const

export const priceImportRoutes = [
  route({
    ...listRoute,
    path: '/farms/:farmId/price-imports/preview',
    body: importPreviewRequestSchema,
    answer: importPreviewSchema,
    handle: ({ body, inFarm }) => inFarm((farm) => previewImport(farm, body)),
  }),
  route({
    ...listRoute,
    path: '/farms/:farmId/price-imports',
    needsIdempotencyKey: true,
    body: importApplyRequestSchema,
    answer: priceImportSchema,
    status: 201,
    handle: ({ body, idempotencyKey, inFarm }) => inFarm((farm) => applyImport(farm, idempotencyKey, body)),
  }),
  route({
    method: 'get',
    path: '/farms/:farmId/price-imports',
    access: 'prices.read',
    answer: pageOf(priceImportSchema),
    handle: ({ inFarm }) => inFarm(async (farm) => ({ items: await listImports(farm) })),
  }),
]
