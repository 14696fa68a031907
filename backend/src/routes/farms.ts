import { farmSchema, farmUpdateSchema } from '@maslin/shared'
import { getFarm, updateFarm } from '../services/farms'
import { route } from './route'

export const farmRoutes = [
  route({
    method: 'get',
    path: '/farms/:farmId',
    access: 'farm.read',
    answer: farmSchema,
    handle: ({ inFarm }) => inFarm(getFarm),
  }),
  route({
    method: 'patch',
    path: '/farms/:farmId',
    access: 'farm.update',
    body: farmUpdateSchema,
    answer: farmSchema,
    current: ({ inFarm }) => inFarm(getFarm),
    handle: ({ body, version, inFarm }) => inFarm((farm) => updateFarm(farm, version, body)),
  }),
]
