import { pageOf, supplierSchema, type Supplier, type SupplierCreate } from '@maslin/shared'
import { get, patch, post, remove } from './client'

const suppliersSchema = pageOf(supplierSchema)

export const fetchSuppliers = async (farmId: string): Promise<Supplier[]> =>
  (await get(`/farms/${farmId}/suppliers`, suppliersSchema, { query: { limit: 500 } })).items
export const createSupplier = (farmId: string, body: SupplierCreate): Promise<Supplier> =>
  post(`/farms/${farmId}/suppliers`, supplierSchema, body)
export const updateSupplier = (
  farmId: string,
  supplierId: string,
  body: Partial<SupplierCreate>,
  version: number,
): Promise<Supplier> => patch(`/farms/${farmId}/suppliers/${supplierId}`, supplierSchema, body, version)
export const removeSupplier = (farmId: string, supplierId: string, version: number): Promise<void> =>
  remove(`/farms/${farmId}/suppliers/${supplierId}`, version)
