import {
  importPreviewSchema,
  priceImportSchema,
  type ImportApplyRequest,
  type ImportPreview,
  type ImportPreviewRequest,
  type PriceImport,
} from '@maslin/shared'
import { getAll, post } from './client'

/** Reads a price list and says of every row what it would do. Saves nothing. */
export const previewImport = (
  farmId: string,
  body: ImportPreviewRequest,
  signal?: AbortSignal,
): Promise<ImportPreview> =>
  post(`/farms/${farmId}/price-imports/preview`, importPreviewSchema, body, { ...(signal ? { signal } : {}) })
/** Applies all good rows together, or none. @param idempotencyKey the same for every try of the same list */
export const applyImport = (
  farmId: string,
  body: ImportApplyRequest,
  idempotencyKey: string,
): Promise<PriceImport> => post(`/farms/${farmId}/price-imports`, priceImportSchema, body, { idempotencyKey })
export const fetchImports = (farmId: string): Promise<PriceImport[]> =>
  getAll(`/farms/${farmId}/price-imports`, priceImportSchema)
