import {
  idSchema,
  mixCreateSchema,
  mixSchema,
  mixSummarySchema,
  mixUpdateSchema,
  pageOf,
} from '@maslin/shared'
import { z } from 'zod'
import { createMix, deleteMix, getMix, listMixes, replaceMix } from '../services/mixes'
import { route } from './route'

const oneMix = { path: '/farms/:farmId/mixes/:mixId', params: z.object({ mixId: idSchema }) }

export const mixRoutes = [
  route({
    method: 'get',
    path: '/farms/:farmId/mixes',
    access: 'mixes.read',
    answer: pageOf(mixSummarySchema),
    handle: ({ inFarm }) => inFarm(async (farm) => ({ items: await listMixes(farm) })),
  }),
  route({
    method: 'post',
    path: '/farms/:farmId/mixes',
    access: 'mixes.write',
    body: mixCreateSchema,
    answer: mixSchema,
    status: 201,
    handle: ({ body, inFarm }) => inFarm((farm) => createMix(farm, body)),
  }),
  route({
    ...oneMix,
    method: 'get',
    access: 'mixes.read',
    answer: mixSchema,
    handle: ({ params, inFarm }) => inFarm((farm) => getMix(farm, params.mixId)),
  }),
  route({
    ...oneMix,
    method: 'put',
    access: 'mixes.write',
    body: mixUpdateSchema,
    answer: mixSchema,
    current: ({ params, inFarm }) => inFarm((farm) => getMix(farm, params.mixId)),
    handle: ({ params, body, version, inFarm }) =>
      inFarm((farm) => replaceMix(farm, params.mixId, version, body)),
  }),
  route({
    ...oneMix,
    method: 'delete',
    access: 'mixes.write',
    current: ({ params, inFarm }) => inFarm((farm) => getMix(farm, params.mixId)),
    currentAnswer: mixSchema,
    handle: ({ params, version, inFarm }) => inFarm((farm) => deleteMix(farm, params.mixId, version)),
  }),
]
