import { curveRequestSchema, curveSchema, solveRequestSchema, solveResponseSchema } from '@maslin/shared'
import { solveDraft, traceDraftCurve, type SolveContext } from '../services/solve'
import { route, type Call } from './route'

/** More than several people at one address type on their benches: eight a second, all the time. */
const SOLVES = 7200

/** What a solve may reach on behalf of a call. */
export const solveContextOf = (call: Call<unknown, unknown, unknown>): SolveContext => ({
  run: call.inFarm,
  library: call.requirements,
  pool: call.solving,
  signal: call.signal,
  owner: String(call.request.params.farmId),
})

export const solveRoutes = [
  route({
    method: 'post',
    path: '/farms/:farmId/solve',
    access: 'mixes.solve',
    attemptsPerQuarterHour: SOLVES,
    body: solveRequestSchema,
    answer: solveResponseSchema,
    handle: (call) => solveDraft(solveContextOf(call), call.body),
  }),
  route({
    method: 'post',
    path: '/farms/:farmId/solve/curve',
    access: 'mixes.solve',
    attemptsPerQuarterHour: SOLVES,
    body: curveRequestSchema,
    answer: curveSchema,
    handle: (call) => traceDraftCurve(solveContextOf(call), call.body),
  }),
]
