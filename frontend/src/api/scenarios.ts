import {
  revisionSchema,
  scenarioSchema,
  scenarioSummarySchema,
  type ReviewCreate,
  type Revision,
  type RevisionCreate,
  type Scenario,
  type ScenarioCreate,
  type ScenarioSummary,
} from '@maslin/shared'
import { get, getAll, patch, post, remove } from './client'

const under = (farmId: string, scenarioId: string) => `/farms/${farmId}/scenarios/${scenarioId}`

export const fetchScenarios = (farmId: string): Promise<ScenarioSummary[]> =>
  getAll(`/farms/${farmId}/scenarios`, scenarioSummarySchema)

export const fetchScenario = (farmId: string, scenarioId: string): Promise<Scenario> =>
  get(under(farmId, scenarioId), scenarioSchema)

export const fetchRevision = (farmId: string, scenarioId: string, revision: number): Promise<Revision> =>
  get(`${under(farmId, scenarioId)}/revisions/${revision}`, revisionSchema)

/** Saves a draft as a new scenario; the server solves it again, with a second opinion. */
export const createScenario = (farmId: string, body: ScenarioCreate): Promise<Scenario> =>
  post(`/farms/${farmId}/scenarios`, scenarioSchema, body)

export const createRevision = (
  farmId: string,
  scenarioId: string,
  body: RevisionCreate,
  version: number,
): Promise<Scenario> => post(`${under(farmId, scenarioId)}/revisions`, scenarioSchema, body, { version })

export const renameScenario = (
  farmId: string,
  scenarioId: string,
  name: string,
  version: number,
): Promise<Scenario> => patch(under(farmId, scenarioId), scenarioSchema, { name }, version)

/** Only while nothing of it was ever submitted. @throws {ApiError} `wrong_state` else */
export const deleteScenario = (farmId: string, scenarioId: string, version: number): Promise<void> =>
  remove(under(farmId, scenarioId), version)

export const submitRevision = (
  farmId: string,
  scenarioId: string,
  body: { revision: number; note?: string },
  version: number,
): Promise<Scenario> => post(`${under(farmId, scenarioId)}/submit`, scenarioSchema, body, { version })

export const addComment = (
  farmId: string,
  scenarioId: string,
  body: { revision: number; text: string },
): Promise<Scenario> => post(`${under(farmId, scenarioId)}/comments`, scenarioSchema, body)

/** @throws {ApiError} `invalid_input` at `acknowledged` while a caution that must be acknowledged is not named */
export const reviewRevision = (
  farmId: string,
  scenarioId: string,
  body: ReviewCreate,
  version: number,
): Promise<Scenario> => post(`${under(farmId, scenarioId)}/reviews`, scenarioSchema, body, { version })
