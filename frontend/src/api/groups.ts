import {
  groupSchema,
  requirementSchema,
  type Animal,
  type Group,
  type GroupCreate,
  type GroupUpdate,
  type Requirement,
} from '@maslin/shared'
import { z } from 'zod'
import { get, getAll, patch, post, remove } from './client'

const answerSchema = z.object({ requirement: requirementSchema.optional() })

export const fetchGroups = (farmId: string): Promise<Group[]> =>
  getAll(`/farms/${farmId}/groups`, groupSchema)
export const fetchGroup = (farmId: string, groupId: string): Promise<Group> =>
  get(`/farms/${farmId}/groups/${groupId}`, groupSchema)
export const createGroup = (farmId: string, body: GroupCreate): Promise<Group> =>
  post(`/farms/${farmId}/groups`, groupSchema, body)
export const updateGroup = (
  farmId: string,
  groupId: string,
  body: GroupUpdate,
  version: number,
): Promise<Group> => patch(`/farms/${farmId}/groups/${groupId}`, groupSchema, body, version)
export const removeGroup = (farmId: string, groupId: string, version: number): Promise<void> =>
  remove(`/farms/${farmId}/groups/${groupId}`, version)
/** What the tables say for an animal; undefined where they hold nothing for it. */
export const fetchRequirement = async (
  farmId: string,
  animal: Animal,
  signal?: AbortSignal,
): Promise<Requirement | undefined> =>
  (
    await post(
      `/farms/${farmId}/groups/requirement`,
      answerSchema,
      { animal },
      { ...(signal ? { signal } : {}) },
    )
  ).requirement
