import type {
  Answer,
  commentCreateSchema,
  reviewCreateSchema,
  RevisionState,
  Scenario,
  submitSchema,
  WaitingReview,
} from '@maslin/shared'
import type { z } from 'zod'
import { AppError } from '../errors'
import type { FarmRepositories } from '../repositories/inFarm'
import type { ScenarioRevisionRow } from '../repositories/scenarios'
import { contentOf, getScenario, revisionsOf, toSummary, type Person } from './scenarios'

interface Target {
  id: string
  /** The version of the scenario that the caller saw. */
  version: number
}

/**
 * Hands the latest revision to the advisors; from then on it never changes.
 * Throws AppError `wrong_state` where it is not a draft, not the latest, or has no cheapest mix; `stale_version`.
 */
export async function submitRevision(
  farm: FarmRepositories,
  person: Person,
  { id, version }: Target,
  { revision, note }: z.output<typeof submitSchema>,
): Promise<Scenario> {
  const { latestRevision } = await farm.scenarios.update(id, version, {})
  const row = await findRevision(farm, id, revision, { forUpdate: true })
  requireState(row, 'draft')
  if (row.revision !== latestRevision) throw wrongState('There is a newer revision; submit that one.')
  if (row.answerStatus !== 'optimal')
    throw wrongState('Only a revision with a cheapest mix can be submitted.')
  await farm.scenarioRevisions.update(row.id, row.version, { state: 'submitted', submittedAt: farm.now })
  await farm.comments.insert({ ...saidBy(person, id, revision), kind: 'submitted', text: note })
  return recorded(farm, id, 'submit', row)
}

/** Throws AppError `not_found`. */
export async function addComment(
  farm: FarmRepositories,
  person: Person,
  id: string,
  { revision, text }: z.output<typeof commentCreateSchema>,
): Promise<Scenario> {
  await farm.scenarios.get(id)
  await findRevision(farm, id, revision)
  const comment = await farm.comments.insert({ ...saidBy(person, id, revision), kind: 'comment', text })
  await farm.audit.record({
    action: 'comment',
    entity: 'scenario',
    entityId: id,
    after: { commentId: comment.id, revision, text },
  })
  return getScenario(farm, id)
}

/**
 * An advisor approves or returns a submitted revision.
 * Throws AppError `wrong_state` where it was not submitted, or may not be approved as it stands; `invalid_input` at
 * `acknowledged` where a caution to take note of is not named; `not_allowed` for one's own; `stale_version`.
 */
export async function reviewRevision(
  farm: FarmRepositories,
  person: Person,
  { id, version }: Target,
  { revision, decision, text, acknowledged }: z.output<typeof reviewCreateSchema>,
): Promise<Scenario> {
  await farm.scenarios.update(id, version, {})
  const row = await findRevision(farm, id, revision, { forUpdate: true })
  requireState(row, 'submitted')
  if (row.createdById === person.id)
    throw new AppError('not_allowed', { detail: 'Nobody signs off their own mix.' })
  const { answer } = contentOf(row)
  if (decision === 'approved') requireApprovable(answer, acknowledged)
  await farm.scenarioRevisions.update(row.id, row.version, {
    state: decision,
    decidedAt: farm.now,
    decidedBy: person.name,
  })
  await farm.reviews.insert({ ...saidBy(person, id, revision), decision, text, acknowledged })
  return recorded(farm, id, decision === 'approved' ? 'approve' : 'return', row, { text, acknowledged })
}

/** Submitted revisions of one farm that wait for an advisor, the longest waiting first. */
export async function waitingOn(farm: FarmRepositories): Promise<WaitingReview['scenario'][]> {
  const submitted = await farm.scenarioRevisions.list({ state: 'submitted' }, { columns: ['scenarioId'] })
  const ids = [...new Set(submitted.map(({ scenarioId }) => scenarioId))]
  const rows = await farm.scenarios.list({ id: ids })
  const revisions = await revisionsOf(farm, ids)
  const waiting = rows.flatMap((row) => {
    const newest = revisions.findLast(
      ({ scenarioId, state }) => scenarioId === row.id && state === 'submitted',
    )
    // The revision that waits is shown, even where the keeper has begun a newer draft.
    return newest ? [toSummary(row, newest)] : []
  })
  return waiting.sort((a, b) => ((a.latest.submittedAt ?? '') < (b.latest.submittedAt ?? '') ? -1 : 1))
}

function requireApprovable(answer: Answer, acknowledged: readonly string[]): void {
  if (answer.status !== 'optimal') throw wrongState('There is no cheapest mix to approve.')
  const blocking = answer.cautions.filter(({ level }) => level === 'block')
  if (blocking.length > 0)
    throw wrongState(`This must be put right first: ${blocking.map(({ code }) => code).join(', ')}.`)
  const open = answer.cautions
    .filter(({ level, code }) => level === 'acknowledge' && !acknowledged.includes(code))
    .map(({ code }) => code)
  if (open.length > 0) {
    const message = `Take note of each caution before approving: ${[...new Set(open)].join(', ')}.`
    throw new AppError('invalid_input', {
      detail: message,
      errors: [{ path: 'acknowledged', code: 'not_acknowledged', message }],
    })
  }
}

function requireState(row: ScenarioRevisionRow, state: RevisionState): void {
  if (row.state !== state) throw wrongState(`Revision ${row.revision} is ${row.state}, not ${state}.`)
}

const wrongState = (detail: string) => new AppError('wrong_state', { detail })

async function findRevision(
  farm: FarmRepositories,
  scenarioId: string,
  revision: number,
  options: { forUpdate?: boolean } = {},
): Promise<ScenarioRevisionRow> {
  const row = await farm.scenarioRevisions.findBy({ scenarioId, revision }, options)
  if (!row) throw new AppError('not_found', { detail: `There is no revision ${revision}.` })
  return row
}

const saidBy = (person: Person, scenarioId: string, revision: number) => ({
  scenarioId,
  revision,
  authorId: person.id,
  author: person.name,
})

async function recorded(
  farm: FarmRepositories,
  id: string,
  action: string,
  before: ScenarioRevisionRow,
  more: object = {},
): Promise<Scenario> {
  const scenario = await getScenario(farm, id)
  const after = scenario.revisions.find(({ revision }) => revision === before.revision)
  await farm.audit.record({
    action,
    entity: 'scenario',
    entityId: id,
    before: { revision: before.revision, state: before.state },
    after: { revision: before.revision, state: after?.state, contentHash: before.contentHash, ...more },
  })
  return scenario
}
