import {
  curveSchema,
  solveResponseSchema,
  type Curve,
  type CurveRequest,
  type MixDraft,
  type SolveResponse,
} from '@maslin/shared'
import { post } from './client'

/** Solves a draft with the farm's feeds and prices; nothing is saved. */
export const solveMix = (
  farmId: string,
  draft: MixDraft,
  options: { signal?: AbortSignal; secondOpinion?: boolean } = {},
): Promise<SolveResponse> =>
  post(
    `/farms/${farmId}/solve`,
    solveResponseSchema,
    { draft, ...(options.secondOpinion ? { secondOpinion: true } : {}) },
    { ...(options.signal ? { signal: options.signal } : {}) },
  )

/** Least cost and blend along the price of one feed or one side of one limit. */
export const fetchCurve = (farmId: string, asked: CurveRequest, signal?: AbortSignal): Promise<Curve> =>
  post(`/farms/${farmId}/solve/curve`, curveSchema, asked, { ...(signal ? { signal } : {}) })
