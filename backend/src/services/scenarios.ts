import type {
  Answer,
  FormulationInput,
  Revision,
  Scenario,
  ScenarioSummary,
  scenarioCreateSchema,
  revisionCreateSchema,
} from '@maslin/shared'
import type { z } from 'zod'
import { AppError, invalidField } from '../errors'
import type { FarmRepositories } from '../repositories/inFarm'
import type { ScenarioRevisionRow, ScenarioRow } from '../repositories/scenarios'
import {
  DamagedContentError,
  readRevisionContent,
  writeRevisionContent,
  type RevisionContent,
} from './revisionContent'
import { allSummaryColumns, costsOf, toComments, toRevisionSummary } from './scenarioParts'
import { solveDraft, type SolveContext } from './solve'

/** Who saves, comments or decides. */
export interface Person {
  id: string
  name: string
}

const SAVE_DEADLINE_MS = 10_000

/** Last changed first, without the stored inputs and answers. */
export async function listScenarios(farm: FarmRepositories): Promise<ScenarioSummary[]> {
  const rows = await farm.scenarios.list(
    {},
    {
      orderBy: [
        ['updatedAt', 'DESC'],
        ['id', 'DESC'],
      ],
    },
  )
  const revisions = await revisionsOf(
    farm,
    rows.map(({ id }) => id),
  )
  return rows.map((row) => toSummary(row, latestOf(row, revisions)))
}

/** Throws AppError `not_found`. */
export async function getScenario(farm: FarmRepositories, id: string): Promise<Scenario> {
  const row = await farm.scenarios.get(id)
  const revisions = await revisionsOf(farm, [id])
  const [comments, reviews] = [
    await farm.comments.list({ scenarioId: id }),
    await farm.reviews.list({ scenarioId: id }),
  ]
  return {
    ...toSummary(row, latestOf(row, revisions)),
    revisions: revisions.map(toRevisionSummary),
    comments: toComments(comments, reviews),
  }
}

/** One revision with inputs and answer. Throws AppError `not_found`, or `damaged_record` where the store was altered. */
export async function getRevision(farm: FarmRepositories, id: string, revision: number): Promise<Revision> {
  const row = await farm.scenarioRevisions.findBy({ scenarioId: id, revision })
  if (!row) throw new AppError('not_found')
  const { draft, input, answer } = contentOf(row)
  return { ...toRevisionSummary(row), schemaVersion: row.schemaVersion, draft, input, answer }
}

/** What a revision keeps, checked against its hash. */
export function contentOf(row: Pick<ScenarioRevisionRow, 'content' | 'contentHash'>): RevisionContent {
  try {
    return readRevisionContent(row.content, row.contentHash)
  } catch (error) {
    if (!(error instanceof DamagedContentError)) throw error
    throw new AppError('damaged_record', {
      detail: 'What is stored of this revision is not what was saved. Restore it from a backup.',
      cause: error,
    })
  }
}

/**
 * Solves the draft once more, with a second engine's opinion, and keeps inputs and answer as the first revision.
 * Throws AppError `invalid_input`, `busy`, `deadline_passed`, `not_ready`.
 */
export async function createScenario(
  context: SolveContext,
  person: Person,
  request: z.output<typeof scenarioCreateSchema>,
): Promise<Scenario> {
  const { name, mixId, note } = request
  await context.run(async (farm) => {
    if (mixId !== undefined && (await farm.mixes.count({ id: mixId })) === 0)
      throw invalidField('mixId', 'unknown_mix', 'The farm has no such mix.')
  })
  const saved = await solveToSave(context, request.draft)
  return context.run(async (farm) => {
    const row = await farm.scenarios.insert({ name, mixId: mixId ?? null, latestRevision: 1 })
    await addRevision(farm, person, { ...saved, scenarioId: row.id, revision: 1, note })
    const scenario = await getScenario(farm, row.id)
    await farm.audit.record({
      action: 'create',
      entity: 'scenario',
      entityId: row.id,
      after: { name, mixId, latest: scenario.latest },
    })
    return scenario
  })
}

/** Adds a revision; those before stay as they are. Throws like `createScenario`, and `stale_version`. */
export async function createRevision(
  context: SolveContext,
  person: Person,
  target: { id: string; version: number },
  request: z.output<typeof revisionCreateSchema>,
): Promise<Scenario> {
  const before = await context.run((farm) => farm.scenarios.get(target.id))
  if (before.version !== target.version) throw new AppError('stale_version')
  const saved = await solveToSave(context, request.draft)
  return context.run(async (farm) => {
    const revision = before.latestRevision + 1
    await farm.scenarios.update(target.id, target.version, { latestRevision: revision })
    await addRevision(farm, person, { ...saved, scenarioId: target.id, revision, note: request.note })
    const scenario = await getScenario(farm, target.id)
    await farm.audit.record({
      action: 'revise',
      entity: 'scenario',
      entityId: target.id,
      after: { latest: scenario.latest },
    })
    return scenario
  })
}

/** Throws AppError `stale_version`, `not_found`. */
export async function renameScenario(
  farm: FarmRepositories,
  id: string,
  version: number,
  name: string,
): Promise<Scenario> {
  const before = await farm.scenarios.get(id)
  await farm.scenarios.update(id, version, { name })
  await farm.audit.record({
    action: 'update',
    entity: 'scenario',
    entityId: id,
    before: { name: before.name },
    after: { name },
  })
  return getScenario(farm, id)
}

/** Throws AppError `wrong_state` once anything of it was submitted, `stale_version`, `not_found`. */
export async function deleteScenario(farm: FarmRepositories, id: string, version: number): Promise<void> {
  const before = await farm.scenarios.get(id, { forUpdate: true })
  if (before.version !== version) throw new AppError('stale_version')
  const revisions = await revisionsOf(farm, [id])
  if (revisions.some(({ state }) => state !== 'draft'))
    throw new AppError('wrong_state', { detail: 'What was once submitted stays on record.' })
  await farm.scenarioRevisions.replace({ scenarioId: id }, [])
  await farm.scenarios.remove(id, version)
  await farm.audit.record({
    action: 'delete',
    entity: 'scenario',
    entityId: id,
    before: { name: before.name, revisions: revisions.map(toRevisionSummary) },
  })
}

async function solveToSave(context: SolveContext, draft: RevisionContent['draft']) {
  const { input, answer } = await solveDraft(context, {
    draft,
    secondOpinion: true,
    deadlineMs: SAVE_DEADLINE_MS,
  })
  return { draft, input, answer }
}

async function addRevision(
  farm: FarmRepositories,
  person: Person,
  given: {
    scenarioId: string
    revision: number
    note: string
    draft: RevisionContent['draft']
    input: FormulationInput
    answer: Answer
  },
): Promise<void> {
  const { scenarioId, revision, note, draft, input, answer } = given
  const { text, hash, schemaVersion } = writeRevisionContent({ draft, input, answer })
  const row = await farm.scenarioRevisions.insert({
    scenarioId,
    revision,
    state: 'draft',
    note,
    groupName: input.group.name,
    answerStatus: answer.status,
    pricesAsOf: input.pricesAsOf,
    ...costsOf(answer),
    schemaVersion,
    contentHash: hash,
    content: text,
    createdById: person.id,
    createdBy: person.name,
    submittedAt: null,
    decidedAt: null,
    decidedBy: null,
  })
  const opinion = answer.status === 'optimal' ? answer.proof.secondOpinion : undefined
  if (opinion?.agrees === false) {
    await farm.audit.record({
      action: 'engines_disagree',
      entity: 'scenario_revision',
      entityId: row.id,
      after: { engine: answer.status === 'optimal' ? answer.proof.engine : '', opinion },
    })
  }
}

/** Revisions of scenarios in their order, without what they keep. */
export function revisionsOf(
  farm: FarmRepositories,
  scenarioIds: readonly string[],
): Promise<ScenarioRevisionRow[]> {
  return farm.scenarioRevisions.list(
    { scenarioId: [...scenarioIds] },
    { columns: allSummaryColumns, orderBy: [['revision', 'ASC']] },
  )
}

export function latestOf(row: ScenarioRow, revisions: readonly ScenarioRevisionRow[]): ScenarioRevisionRow {
  const latest = revisions.find(
    ({ scenarioId, revision }) => scenarioId === row.id && revision === row.latestRevision,
  )
  if (!latest) throw new Error(`scenario ${row.id} lacks its revision ${row.latestRevision}`)
  return latest
}

export function toSummary(row: ScenarioRow, latest: ScenarioRevisionRow): ScenarioSummary {
  return {
    id: row.id,
    name: row.name,
    ...(row.mixId === null ? {} : { mixId: row.mixId }),
    groupName: latest.groupName,
    latest: toRevisionSummary(latest),
    revisionCount: row.latestRevision,
    version: row.version,
    updatedAt: row.updatedAt.toISOString(),
  }
}
