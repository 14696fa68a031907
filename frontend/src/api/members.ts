import { memberSchema, pageOf, type Member, type MemberCreate, type Role } from '@maslin/shared'
import { get, patch, post, remove } from './client'

const membersSchema = pageOf(memberSchema)

export const fetchMembers = async (farmId: string): Promise<Member[]> =>
  (await get(`/farms/${farmId}/members`, membersSchema)).items
export const addMember = (farmId: string, body: MemberCreate): Promise<Member> =>
  post(`/farms/${farmId}/members`, memberSchema, body)
export const changeRole = (farmId: string, memberId: string, role: Role, version: number): Promise<Member> =>
  patch(`/farms/${farmId}/members/${memberId}`, memberSchema, { role }, version)
export const removeMember = (farmId: string, memberId: string, version: number): Promise<void> =>
  remove(`/farms/${farmId}/members/${memberId}`, version)
