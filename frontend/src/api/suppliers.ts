import { supplierSchema, type Supplier, type SupplierCreate } from '@maslin/shared'
import { getAll, patch, post, remove } from './client'

export const fetchSuppliers = (farmId: string): Promise<Supplier[]> =>
  getAll(`/farms/${farmId}/suppliers`, supplierSchema)
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
