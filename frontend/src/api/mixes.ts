import {
  firstMixSchema,
  mixSchema,
  mixSummarySchema,
  type Basis,
  type FirstMix,
  type Mix,
  type MixDraft,
  type MixSummary,
} from '@maslin/shared'
import { get, getAll, post, put, remove } from './client'

export const fetchMixes = (farmId: string): Promise<MixSummary[]> =>
  getAll(`/farms/${farmId}/mixes`, mixSummarySchema)

export const fetchMix = (farmId: string, mixId: string, signal?: AbortSignal): Promise<Mix> =>
  get(`/farms/${farmId}/mixes/${mixId}`, mixSchema, { ...(signal ? { signal } : {}) })

export const createMix = (farmId: string, draft: MixDraft): Promise<Mix> =>
  post(`/farms/${farmId}/mixes`, mixSchema, draft)

/** Saves the whole draft over `version`. @throws {ApiError} `stale_version` where somebody saved in the meantime */
export const updateMix = (farmId: string, mixId: string, draft: MixDraft, version: number): Promise<Mix> =>
  put(`/farms/${farmId}/mixes/${mixId}`, mixSchema, draft, version)

export const deleteMix = (farmId: string, mixId: string, version: number): Promise<void> =>
  remove(`/farms/${farmId}/mixes/${mixId}`, version)

/** A sensible first mix for a group; nothing is saved. */
export const fetchFirstMix = (
  farmId: string,
  groupId: string,
  basis?: Basis,
  signal?: AbortSignal,
): Promise<FirstMix> =>
  get(`/farms/${farmId}/groups/${groupId}/first-mix`, firstMixSchema, {
    query: { basis },
    ...(signal ? { signal } : {}),
  })
