import {
  firstMixQuerySchema,
  firstMixSchema,
  groupCreateSchema,
  groupSchema,
  groupUpdateSchema,
  idSchema,
  pageOf,
  requirementRequestSchema,
  requirementSchema,
  stageSchema,
} from '@maslin/shared'
import { z } from 'zod'
import { firstMix } from '../services/firstMix'
import {
  createGroup,
  deleteGroup,
  getGroup,
  listGroups,
  publishedRequirement,
  updateGroup,
} from '../services/groups'
import { route } from './route'

const oneGroup = { path: '/farms/:farmId/groups/:groupId', params: z.object({ groupId: idSchema }) }

export const groupRoutes = [
  route({
    method: 'get',
    path: '/book/stages',
    access: 'signedIn',
    answer: pageOf(stageSchema),
    handle: ({ requirements }) => Promise.resolve({ items: requirements.stages }),
  }),
  route({
    method: 'get',
    path: '/farms/:farmId/groups',
    access: 'groups.read',
    answer: pageOf(groupSchema),
    handle: ({ requirements, inFarm }) =>
      inFarm(async (farm) => ({ items: await listGroups(farm, requirements) })),
  }),
  route({
    method: 'post',
    path: '/farms/:farmId/groups',
    access: 'groups.write',
    body: groupCreateSchema,
    answer: groupSchema,
    status: 201,
    handle: ({ body, requirements, inFarm }) => inFarm((farm) => createGroup(farm, requirements, body)),
  }),
  route({
    method: 'post',
    path: '/farms/:farmId/groups/requirement',
    access: 'groups.read',
    body: requirementRequestSchema,
    answer: z.object({ requirement: requirementSchema.optional() }),
    handle: ({ body, requirements }) =>
      Promise.resolve({ requirement: publishedRequirement(requirements, body.animal) }),
  }),
  route({
    ...oneGroup,
    method: 'get',
    access: 'groups.read',
    answer: groupSchema,
    handle: ({ params, requirements, inFarm }) =>
      inFarm((farm) => getGroup(farm, requirements, params.groupId)),
  }),
  route({
    ...oneGroup,
    method: 'patch',
    access: 'groups.write',
    body: groupUpdateSchema,
    answer: groupSchema,
    current: ({ params, requirements, inFarm }) =>
      inFarm((farm) => getGroup(farm, requirements, params.groupId)),
    handle: ({ params, body, version, requirements, inFarm }) =>
      inFarm((farm) => updateGroup(farm, requirements, params.groupId, version, body)),
  }),
  route({
    ...oneGroup,
    method: 'delete',
    access: 'groups.write',
    current: ({ params, requirements, inFarm }) =>
      inFarm((farm) => getGroup(farm, requirements, params.groupId)),
    currentAnswer: groupSchema,
    handle: ({ params, version, requirements, inFarm }) =>
      inFarm((farm) => deleteGroup(farm, requirements, params.groupId, version)),
  }),
  route({
    method: 'get',
    path: `${oneGroup.path}/first-mix`,
    params: oneGroup.params,
    access: 'mixes.write',
    query: firstMixQuerySchema,
    answer: firstMixSchema,
    handle: ({ params, query, requirements, inFarm }) =>
      inFarm((farm) => firstMix(farm, requirements, params.groupId, query.basis)),
  }),
]
