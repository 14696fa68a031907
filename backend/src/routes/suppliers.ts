import { idSchema, pageOf, supplierCreateSchema, supplierSchema, supplierUpdateSchema } from '@maslin/shared'
import { z } from 'zod'
import {
  createSupplier,
  getSupplier,
  listSuppliers,
  removeSupplier,
  updateSupplier,
} from '../services/suppliers'
import { route } from './route'

const oneSupplier = {
  path: '/farms/:farmId/suppliers/:supplierId',
  params: z.object({ supplierId: idSchema }),
}

export const supplierRoutes = [
  route({
    method: 'get',
    path: '/farms/:farmId/suppliers',
    access: 'prices.read',
    answer: pageOf(supplierSchema),
    handle: ({ inFarm }) => inFarm(async (farm) => ({ items: await listSuppliers(farm) })),
  }),
  route({
    method: 'post',
    path: '/farms/:farmId/suppliers',
    access: 'prices.write',
    body: supplierCreateSchema,
    answer: supplierSchema,
    status: 201,
    handle: ({ body, inFarm }) => inFarm((farm) => createSupplier(farm, body)),
  }),
  route({
    ...oneSupplier,
    method: 'patch',
    access: 'prices.write',
    body: supplierUpdateSchema,
    answer: supplierSchema,
    current: ({ params, inFarm }) => inFarm((farm) => getSupplier(farm, params.supplierId)),
    handle: ({ params, body, version, inFarm }) =>
      inFarm((farm) => updateSupplier(farm, params.supplierId, version, body)),
  }),
  route({
    ...oneSupplier,
    method: 'delete',
    access: 'prices.write',
    current: ({ params, inFarm }) => inFarm((farm) => getSupplier(farm, params.supplierId)),
    currentAnswer: supplierSchema,
    handle: ({ params, version, inFarm }) =>
      inFarm((farm) => removeSupplier(farm, params.supplierId, version)),
  }),
]
