import { farmSchema, type Farm, type FarmUpdate } from '@maslin/shared'
import { get, patch } from './client'

export const fetchFarm = (farmId: string): Promise<Farm> => get(`/farms/${farmId}`, farmSchema)
export const updateFarm = (farmId: string, body: FarmUpdate, version: number): Promise<Farm> =>
  patch(`/farms/${farmId}`, farmSchema, body, version)
