import { memberSchema, type Member, type MemberCreate, type Role } from '@maslin/shared'
import { getAll, patch, post, remove } from './client'

export const fetchMembers = (farmId: string): Promise<Member[]> =>
  getAll(`/farms/${farmId}/members`, memberSchema)
export const addMember = (farmId: string, body: MemberCreate): Promise<Member> =>
  post(`/farms/${farmId}/members`, memberSchema, body)
export const changeRole = (farmId: string, memberId: string, role: Role, version: number): Promise<Member> =>
  patch(`/farms/${farmId}/members/${memberId}`, memberSchema, { role }, version)
export const removeMember = (farmId: string, memberId: string, version: number): Promise<void> =>
  remove(`/farms/${farmId}/members/${memberId}`, version)
