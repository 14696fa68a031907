import type { Group, MixDraft, Problem, Revision, Scenario, ScenarioSummary } from '@maslin/shared'
import canonicalize from 'canonicalize'
import { createHash } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import { startTestApp, type TestAppOptions } from '../support/app'
import {
  addGroup,
  bodyOf,
  ewes,
  firstDraft,
  furnishFarm,
  ifMatch,
  saveScenario,
  solve,
  startTestFarm,
  type TestFarm,
} from '../support/farm'

describe('scenarios', () => {
  let farm: TestFarm
  let group: Group
  let draft: MixDraft

  beforeAll(async () => {
    farm = await startTestFarm()
    group = await addGroup(farm)
    draft = await firstDraft(farm, group)
  })
  afterAll(() => farm.close())

  const at = ({ id }: { id: string }) => `${farm.at}/scenarios/${id}`
  const open = async (scenario: { id: string }) => bodyOf<Scenario>(await farm.owner.get(at(scenario)), 200)
  const openRevision = async (scenario: { id: string }, n: number) =>
    bodyOf<Revision>(await farm.owner.get(`${at(scenario)}/revisions/${n}`), 200)
  const submit = (scenario: Scenario, revision = scenario.latest.revision) =>
    farm.owner
      .post(`${at(scenario)}/submit`)
      .set(ifMatch(scenario))
      .send({ revision, note: 'Please look' })
  const revise = (scenario: Scenario, changes: Partial<MixDraft> = {}) =>
    farm.owner
      .post(`${at(scenario)}/revisions`)
      .set(ifMatch(scenario))
      .send({ draft: { ...draft, ...changes }, note: 'Again' })
  const impossible = (): MixDraft['limits'] => [
    ...draft.limits,
    { ...(draft.limits[0] as MixDraft['limits'][number]), id: 'tooMuch', min: 40 },
  ]
  const sequelize = () => farm.test.database.sequelize

  it('keeps the draft, everything the solve rested on, and the answer', async () => {
    const { answer } = await solve(farm, draft)
    const scenario = await saveScenario(farm, draft, 'Winter')
    expect(scenario).toMatchObject({ name: 'Winter', groupName: group.name, revisionCount: 1, version: 1 })
    expect(scenario.latest).toMatchObject({ revision: 1, state: 'draft', pricesAsOf: '2026-06-30' })
    const { draft: kept, input, answer: saved } = await openRevision(scenario, 1)
    expect(kept).toEqual(draft)
    expect(input.group.name).toBe(group.name)
    if (answer.status !== 'optimal' || saved.status !== 'optimal') throw new Error('no cheapest mix')
    expect(saved.cost.least).toBeCloseTo(answer.cost.least, 9)
    expect(saved.proof.secondOpinion).toMatchObject({ agrees: true })
    expect(Number(scenario.latest.costPerHeadDay)).toBeCloseTo(saved.cost.perHeadDay, 6)
    expect(Number(scenario.latest.costPerKgAsFed)).toBeCloseTo(saved.cost.mixPerKgAsFed, 6)
    expect(scenario.latest.costPerGroup30Days).toMatch(/^\d+(\.\d{1,6})?$/)
  })

  it('stands under a hash that anyone can compute again from what is answered', async () => {
    const scenario = await saveScenario(farm, draft)
    const { schemaVersion, draft: kept, input, answer } = await openRevision(scenario, 1)
    const text = canonicalize({ schemaVersion, draft: kept, input, answer }) ?? ''
    expect(createHash('sha256').update(text).digest('hex')).toBe(scenario.latest.contentHash)
  })

  it('is listed without what it keeps, last changed first', async () => {
    const scenario = await saveScenario(farm, draft, 'Newest')
    const { items } = bodyOf<{ items: ScenarioSummary[] }>(await farm.owner.get(`${farm.at}/scenarios`), 200)
    expect(items[0]).toMatchObject({ id: scenario.id, name: 'Newest' })
    expect(JSON.stringify(items).length).toBeLessThan(items.length * 1000)
  })

  it('never reads what is kept for a list', async () => {
    const query = vi.spyOn(sequelize(), 'query')
    await farm.owner.get(`${farm.at}/scenarios`).expect(200)
    const statements = query.mock.calls.map(([sql]) => String(sql))
    query.mockRestore()
    const reads = statements.filter((sql) => sql.includes('scenario_revisions'))
    expect(reads.length).toBeGreaterThan(0)
    for (const sql of reads) expect(sql).not.toMatch(/`content`|\*/)
  })

  it('takes a change as a new revision and leaves the ones before', async () => {
    const scenario = await saveScenario(farm, draft)
    const first = await openRevision(scenario, 1)
    const revised = bodyOf<Scenario>(await revise(scenario, { pricesAsOf: '2026-07-15' }))
    expect(revised).toMatchObject({ revisionCount: 2, version: 2 })
    expect(revised.latest).toMatchObject({ revision: 2, note: 'Again', pricesAsOf: '2026-07-15' })
    expect(revised.revisions.map(({ revision }) => revision)).toEqual([1, 2])
    expect(await openRevision(scenario, 1)).toEqual(first)
  })

  it('refuses a revision of one that somebody else revised meanwhile', async () => {
    const scenario = await saveScenario(farm, draft)
    await revise(scenario).expect(201)
    const answer = await revise(scenario).expect(409)
    expect(answer.body as Problem).toMatchObject({ code: 'stale_version', current: { revisionCount: 2 } })
    expect((await open(scenario)).revisionCount).toBe(2)
  })

  it('takes one of two revisions, and of two submissions, made at the same moment', async () => {
    const scenario = await saveScenario(farm, draft)
    const revisions = await Promise.all([revise(scenario), revise(scenario), revise(scenario)])
    expect(revisions.map(({ status }) => status).sort()).toEqual([201, 409, 409])
    const latest = await open(scenario)
    expect(latest.revisions.map(({ revision }) => revision)).toEqual([1, 2])
    const submissions = await Promise.all([submit(latest), submit(latest)])
    expect(submissions.map(({ status }) => status).sort()).toEqual([200, 409])
    expect((await open(scenario)).comments).toHaveLength(1)
  })

  it('can be renamed', async () => {
    const scenario = await saveScenario(farm, draft)
    const rename = (version: Scenario) =>
      farm.owner.patch(at(scenario)).set(ifMatch(version)).send({ name: 'Other' })
    expect(bodyOf<Scenario>(await rename(scenario), 200)).toMatchObject({ name: 'Other', version: 2 })
    expect((await rename(scenario)).body).toMatchObject({ code: 'stale_version' })
  })

  it('keeps a mix that is not possible too, but does not take it for review', async () => {
    const scenario = await saveScenario(farm, { ...draft, limits: impossible() })
    expect(scenario.latest.costPerHeadDay).toBeUndefined()
    expect((await openRevision(scenario, 1)).answer.status).toBe('infeasible')
    expect((await submit(scenario).expect(409)).body).toMatchObject({ code: 'wrong_state' })
    expect((await open(scenario)).latest.state).toBe('draft')
  })

  it('refuses costs that cannot be kept, with the reason', async () => {
    const herd = await addGroup(farm, { ...ewes(farm), name: 'Very many', heads: 100_000 })
    const dear = await firstDraft(farm, herd)
    const feeds = dear.feeds.map((feed) => ({ ...feed, pricePerKg: '999999' }))
    const answer = await farm.owner
      .post(`${farm.at}/scenarios`)
      .send({ name: 'Too dear', draft: { ...dear, feeds } })
    expect(answer.body).toMatchObject({ status: 400, errors: [{ code: 'cost_too_large' }] })
  })

  it('is handed in once, and only its latest revision', async () => {
    const scenario = await saveScenario(farm, draft)
    const revised = bodyOf<Scenario>(await revise(scenario))
    expect((await submit(revised, 1).expect(409)).body).toMatchObject({ code: 'wrong_state' })
    const handedIn = bodyOf<Scenario>(await submit(revised), 200)
    expect(handedIn.latest).toMatchObject({ revision: 2, state: 'submitted' })
    expect(handedIn.latest.submittedAt).toBeDefined()
    expect(handedIn.comments).toMatchObject([{ kind: 'submitted', revision: 2, text: 'Please look' }])
    expect((await submit(handedIn).expect(409)).body).toMatchObject({ code: 'wrong_state' })
    await submit(handedIn, 9).expect(404)
  })

  describe('what was handed in never changes', () => {
    const submitted = async () => bodyOf<Scenario>(await submit(await saveScenario(farm, draft)), 200)

    it('by way of the service: a change is a new revision', async () => {
      const scenario = await submitted()
      const before = await openRevision(scenario, 1)
      const revised = bodyOf<Scenario>(await revise(scenario, { pricesAsOf: '2026-07-15' }))
      expect(revised.revisions).toMatchObject([{ state: 'submitted' }, { state: 'draft' }])
      expect(await openRevision(scenario, 1)).toEqual(before)
    })

    it('nor is deleted', async () => {
      const scenario = await submitted()
      const answer = await farm.owner.delete(at(scenario)).set(ifMatch(scenario)).expect(409)
      expect(answer.body).toMatchObject({ code: 'wrong_state' })
      await open(scenario)
    })

    it.each([
      ['its content', "content = '{}'"],
      ['its hash', `content_hash = '${'0'.repeat(64)}'`],
      ['its number', 'revision = 7'],
    ])('nor by a statement on the database: %s', async (_name, change) => {
      const scenario = await submitted()
      await expect(
        sequelize().query(
          `UPDATE scenario_revisions SET ${change} WHERE farm_id = '${farm.farmId}' AND scenario_id = '${scenario.id}'`,
        ),
      ).rejects.toThrow('a saved revision never changes')
    })

    it('nor can it be removed from the database', async () => {
      const scenario = await submitted()
      await expect(
        sequelize().query(
          `DELETE FROM scenario_revisions WHERE farm_id = '${farm.farmId}' AND scenario_id = '${scenario.id}'`,
        ),
      ).rejects.toThrow('a submitted revision is never deleted')
    })
  })

  it('is deleted as long as nothing was handed in', async () => {
    const scenario = await saveScenario(farm, draft)
    const revised = bodyOf<Scenario>(await revise(scenario))
    expect((await farm.owner.delete(at(scenario)).set(ifMatch(scenario))).body).toMatchObject({
      code: 'stale_version',
    })
    await farm.owner.delete(at(scenario)).set(ifMatch(revised)).expect(204)
    await farm.owner.get(at(scenario)).expect(404)
    await farm.owner.get(`${at(scenario)}/revisions/1`).expect(404)
  })

  it('says so, and shows nothing, where what is stored was altered behind its back', async () => {
    const scenario = await saveScenario(farm, draft)
    const where = `WHERE farm_id = '${farm.farmId}' AND scenario_id = '${scenario.id}'`
    await sequelize().query('DROP TRIGGER scenario_revisions_keep_content')
    await sequelize().query(
      `UPDATE scenario_revisions SET content = REPLACE(content, '"heads":40', '"heads":41') ${where}`,
    )
    const answer = await farm.owner.get(`${at(scenario)}/revisions/1`).expect(500)
    expect(answer.body as Problem).toMatchObject({ code: 'damaged_record' })
    expect(answer.body).not.toHaveProperty('draft')
    // The rest of the scenario stays within reach.
    expect((await open(scenario)).latest.revision).toBe(1)
  })

  it('writes an event for every change', async () => {
    const scenario = await saveScenario(farm, draft)
    const revised = bodyOf<Scenario>(await revise(scenario))
    const said = await farm.owner.post(`${at(scenario)}/comments`).send({ revision: 2, text: 'Looks well' })
    bodyOf<Scenario>(said)
    await submit(revised).expect(200)
    const events = await farm.test.database.models.auditEvents.findAll({
      where: { farmId: farm.farmId, entityId: scenario.id },
      order: [['id', 'ASC']],
    })
    expect(events.map((event) => event.get('action'))).toEqual(['create', 'revise', 'comment', 'submit'])
  })

  it('answers 404 for a revision that is not there, or is no number', async () => {
    const scenario = await saveScenario(farm, draft)
    for (const revision of ['2', '0', '-1', 'latest', '1.5']) {
      await farm.owner.get(`${at(scenario)}/revisions/${revision}`).expect(404)
    }
    await farm.owner
      .post(`${at(scenario)}/comments`)
      .send({ revision: 3, text: 'x' })
      .expect(404)
  })

  it('puts it on record when the second engine disagrees', async () => {
    const solving: TestAppOptions['solving'] = {
      ready: () => Promise.resolve(true),
      traceCurve: (...call) => farm.pool.traceCurve(...call),
      solveMix: async (...call) => {
        const answer = await farm.pool.solveMix(...call)
        if (answer.status !== 'optimal') return answer
        const secondOpinion = { engine: 'other', agrees: false, relativeDifference: 0.1, note: 'dearer' }
        return { ...answer, proof: { ...answer.proof, secondOpinion } }
      },
    }
    const test = await startTestApp({ solving })
    try {
      const other = await furnishFarm(test, farm.pool)
      const scenario = await saveScenario(other, await firstDraft(other, await addGroup(other)))
      const events = await test.database.models.auditEvents.findAll({
        where: { farmId: other.farmId, action: 'engines_disagree' },
      })
      expect(events).toHaveLength(1)
      expect(events[0]?.get('afterState')).toMatchObject({
        opinion: { engine: 'other', relativeDifference: 0.1 },
      })
      expect(scenario.latest.state).toBe('draft')
    } finally {
      await test.close()
    }
  })

  it('names the farm in every statement', () => {
    expect(farm.test.scopeViolations).toEqual([])
  })
})
