import { idSchema, memberCreateSchema, memberSchema, memberUpdateSchema, pageOf } from '@maslin/shared'
import { z } from 'zod'
import { addMember, changeRole, getMember, listMembers, removeMember } from '../services/members'
import { route } from './route'

const oneMember = {
  path: '/farms/:farmId/members/:memberId',
  params: z.object({ memberId: idSchema }),
}

export const memberRoutes = [
  route({
    method: 'get',
    path: '/farms/:farmId/members',
    access: 'members.read',
    answer: pageOf(memberSchema),
    handle: ({ inFarm }) => inFarm(async (farm) => ({ items: await listMembers(farm) })),
  }),
  route({
    method: 'post',
    path: '/farms/:farmId/members',
    access: 'members.manage',
    // The answer tells whether an address has an account.
    attemptsPerQuarterHour: 60,
    body: memberCreateSchema,
    answer: memberSchema,
    status: 201,
    handle: ({ body, inFarm }) => inFarm((farm) => addMember(farm, body.email, body.role)),
  }),
  route({
    ...oneMember,
    method: 'patch',
    access: 'members.manage',
    body: memberUpdateSchema,
    answer: memberSchema,
    current: ({ params, inFarm }) => inFarm((farm) => getMember(farm, params.memberId)),
    handle: ({ params, body, version, inFarm }) =>
      inFarm((farm) => changeRole(farm, params.memberId, version, body.role)),
  }),
  route({
    ...oneMember,
    method: 'delete',
    access: 'members.manage',
    current: ({ params, inFarm }) => inFarm((farm) => getMember(farm, params.memberId)),
    currentAnswer: memberSchema,
    handle: ({ params, version, inFarm }) => inFarm((farm) => removeMember(farm, params.memberId, version)),
  }),
]
