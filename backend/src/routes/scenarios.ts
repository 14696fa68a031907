import {
  commentCreateSchema,
  idSchema,
  pageOf,
  reviewCreateSchema,
  revisionCreateSchema,
  revisionSchema,
  scenarioCreateSchema,
  scenarioSchema,
  scenarioSummarySchema,
  scenarioUpdateSchema,
  submitSchema,
} from '@maslin/shared'
import { z } from 'zod'
import { addComment, reviewRevision, submitRevision } from '../services/reviews'
import {
  createRevision,
  createScenario,
  deleteScenario,
  getRevision,
  getScenario,
  listScenarios,
  renameScenario,
} from '../services/scenarios'
import { route, type Call } from './route'
import { solveContextOf } from './solve'

/** Saving solves twice over and keeps the answer for good. */
const SAVES = 600

const path = '/farms/:farmId/scenarios/:scenarioId'
const params = z.object({ scenarioId: idSchema })
type ScenarioParams = z.infer<typeof params>

const current = ({ params: { scenarioId }, inFarm }: Call<ScenarioParams, undefined, undefined>) =>
  inFarm((farm) => getScenario(farm, scenarioId))

export const scenarioRoutes = [
  route({
    method: 'get',
    path: '/farms/:farmId/scenarios',
    access: 'scenarios.read',
    answer: pageOf(scenarioSummarySchema),
    handle: ({ inFarm }) => inFarm(async (farm) => ({ items: await listScenarios(farm) })),
  }),
  route({
    method: 'post',
    path: '/farms/:farmId/scenarios',
    access: 'scenarios.write',
    attemptsPerQuarterHour: SAVES,
    body: scenarioCreateSchema,
    answer: scenarioSchema,
    status: 201,
    handle: (call) => createScenario(solveContextOf(call), call.signedIn(), call.body),
  }),
  route({
    method: 'get',
    path,
    params,
    access: 'scenarios.read',
    answer: scenarioSchema,
    handle: ({ params: { scenarioId }, inFarm }) => inFarm((farm) => getScenario(farm, scenarioId)),
  }),
  route({
    method: 'patch',
    path,
    params,
    access: 'scenarios.write',
    body: scenarioUpdateSchema,
    answer: scenarioSchema,
    current,
    handle: ({ params: { scenarioId }, version, body, inFarm }) =>
      inFarm((farm) => renameScenario(farm, scenarioId, version, body.name)),
  }),
  route({
    method: 'delete',
    path,
    params,
    access: 'scenarios.write',
    current,
    currentAnswer: scenarioSchema,
    handle: ({ params: { scenarioId }, version, inFarm }) =>
      inFarm((farm) => deleteScenario(farm, scenarioId, version)),
  }),
  route({
    method: 'get',
    path: `${path}/revisions/:revision`,
    params: params.extend({ revision: z.coerce.number().int().positive() }),
    access: 'scenarios.read',
    answer: revisionSchema,
    handle: ({ params: { scenarioId, revision }, inFarm }) =>
      inFarm((farm) => getRevision(farm, scenarioId, revision)),
  }),
  route({
    method: 'post',
    path: `${path}/revisions`,
    params,
    access: 'scenarios.write',
    attemptsPerQuarterHour: SAVES,
    body: revisionCreateSchema,
    answer: scenarioSchema,
    status: 201,
    current,
    handle: (call) =>
      createRevision(
        solveContextOf(call),
        call.signedIn(),
        { id: call.params.scenarioId, version: call.version },
        call.body,
      ),
  }),
  route({
    method: 'post',
    path: `${path}/submit`,
    params,
    access: 'scenarios.submit',
    body: submitSchema,
    answer: scenarioSchema,
    current,
    handle: ({ params: { scenarioId }, version, body, signedIn, inFarm }) =>
      inFarm((farm) => submitRevision(farm, signedIn(), { id: scenarioId, version }, body)),
  }),
  route({
    method: 'post',
    path: `${path}/comments`,
    params,
    access: 'scenarios.comment',
    body: commentCreateSchema,
    answer: scenarioSchema,
    status: 201,
    handle: ({ params: { scenarioId }, body, signedIn, inFarm }) =>
      inFarm((farm) => addComment(farm, signedIn(), scenarioId, body)),
  }),
  route({
    method: 'post',
    path: `${path}/reviews`,
    params,
    access: 'scenarios.review',
    body: reviewCreateSchema,
    answer: scenarioSchema,
    status: 201,
    current,
    handle: ({ params: { scenarioId }, version, body, signedIn, inFarm }) =>
      inFarm((farm) => reviewRevision(farm, signedIn(), { id: scenarioId, version }, body)),
  }),
]
