import type { Answer, Group, MixDraft, Problem, Scenario, WaitingReview } from '@maslin/shared'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { startTestApp, type TestApp } from '../support/app'
import {
  addGroup,
  addMember,
  bodyOf,
  firstDraft,
  furnishFarm,
  ifMatch,
  saveScenario,
  startTestFarm,
  type TestFarm,
} from '../support/farm'
import { signUp, type Person } from '../support/people'
import type { SolvingPool } from '../../backend/src/solving/pool'

describe('reviews', () => {
  let farm: TestFarm
  let draft: MixDraft
  let advisor: Person

  beforeAll(async () => {
    farm = await startTestFarm()
    const group: Group = await addGroup(farm)
    draft = await firstDraft(farm, group)
    advisor = await addMember(farm, 'advisor')
  })
  afterAll(() => farm.close())

  const at = ({ id }: { id: string }) => `${farm.at}/scenarios/${id}`
  const submit = async (scenario: Scenario) =>
    bodyOf<Scenario>(
      await farm.owner
        .post(`${at(scenario)}/submit`)
        .set(ifMatch(scenario))
        .send({ revision: scenario.latest.revision }),
      200,
    )
  const submitted = async (name = 'Winter') => submit(await saveScenario(farm, draft, name))
  const cautionsOf = async (scenario: Scenario) => {
    const revision = await farm.owner.get(`${at(scenario)}/revisions/${scenario.latest.revision}`)
    const { answer } = bodyOf<{ answer: Answer }>(revision, 200)
    return answer.cautions.filter(({ level }) => level === 'acknowledge').map(({ code }) => code)
  }
  const review = (scenario: Scenario, decision: string, more: object = {}) =>
    advisor.visitor
      .post(`${at(scenario)}/reviews`)
      .set(ifMatch(scenario))
      .send({ revision: scenario.latest.revision, decision, text: 'Seen', ...more })
  const waiting = async ({ visitor }: Pick<Person, 'visitor'>) =>
    bodyOf<{ items: WaitingReview[] }>(await visitor.get('/api/v1/reviews'), 200).items

  it('shows an advisor what waits on each of their farms, and nobody else', async () => {
    const scenario = await submitted('For review')
    const other = await signUp(farm.test, 'Other Farm')
    await other.visitor
      .post(`/api/v1/farms/${other.farmId}/members`)
      .send({ email: advisor.email, role: 'manager' })
      .expect(201)
    const items = await waiting(advisor)
    expect(items.find((item) => item.scenario.id === scenario.id)).toMatchObject({
      farm: { id: farm.farmId },
      scenario: { name: 'For review', latest: { state: 'submitted' } },
    })
    expect(await waiting({ visitor: farm.owner })).toEqual([])
    expect(await waiting(other)).toEqual([])
  })

  it('shows the revision that waits, also behind a newer draft', async () => {
    const scenario = await submitted()
    await farm.owner
      .post(`${at(scenario)}/revisions`)
      .set(ifMatch(scenario))
      .send({ draft })
      .expect(201)
    const item = (await waiting(advisor)).find((one) => one.scenario.id === scenario.id)
    expect(item?.scenario).toMatchObject({ revisionCount: 2, latest: { revision: 1, state: 'submitted' } })
  })

  it('approves with a reason on record, and it waits no longer', async () => {
    const scenario = await submitted()
    const acknowledged = await cautionsOf(scenario)
    const approved = bodyOf<Scenario>(await review(scenario, 'approved', { acknowledged, text: 'Feed it' }))
    expect(approved.latest).toMatchObject({ state: 'approved', decidedBy: 'Some advisor' })
    expect(approved.latest.decidedAt).toBeDefined()
    expect(approved.latest.contentHash).toBe(scenario.latest.contentHash)
    expect(approved.comments.at(-1)).toMatchObject({
      kind: 'approved',
      text: 'Feed it',
      author: 'Some advisor',
    })
    expect((await waiting(advisor)).map((item) => item.scenario.id)).not.toContain(scenario.id)
  })

  it('returns it, and the keeper answers with a new revision', async () => {
    const scenario = await submitted()
    const returned = bodyOf<Scenario>(await review(scenario, 'returned', { text: 'More calcium' }))
    expect(returned.latest.state).toBe('returned')
    const revised = bodyOf<Scenario>(
      await farm.owner
        .post(`${at(scenario)}/revisions`)
        .set(ifMatch(returned))
        .send({ draft }),
    )
    const again = await submit(revised)
    expect(again.revisions.map(({ state }) => state)).toEqual(['returned', 'submitted'])
    expect(again.comments.map(({ kind }) => kind)).toEqual(['submitted', 'returned', 'submitted'])
  })

  it('decides once', async () => {
    const scenario = await submitted()
    const returned = bodyOf<Scenario>(await review(scenario, 'returned'))
    expect((await review(returned, 'returned').expect(409)).body).toMatchObject({ code: 'wrong_state' })
    expect((await review(scenario, 'returned').expect(409)).body).toMatchObject({ code: 'stale_version' })
  })

  it('does not take a draft, nor a revision that is not there', async () => {
    const scenario = await saveScenario(farm, draft)
    expect((await review(scenario, 'approved').expect(409)).body).toMatchObject({ code: 'wrong_state' })
    await review(scenario, 'approved', { revision: 5 }).expect(404)
  })

  it('asks for a reason and for a decision there is', async () => {
    const scenario = await submitted()
    const answer = await review(scenario, 'approved', { text: '  ' }).expect(400)
    expect((answer.body as Problem).errors?.[0]?.path).toBe('text')
    await review(scenario, 'perhaps').expect(400)
  })

  it('is the advisor’s alone', async () => {
    const scenario = await submitted()
    const manager = await addMember(farm, 'manager')
    for (const visitor of [farm.owner, manager.visitor]) {
      await visitor
        .post(`${at(scenario)}/reviews`)
        .set(ifMatch(scenario))
        .send({ revision: 1, decision: 'approved', text: 'Mine' })
        .expect(403)
    }
  })

  it('does not let anyone sign off their own mix, whatever they have become since', async () => {
    const turncoat = await addMember(farm, 'manager')
    const saved = await turncoat.visitor.post(`${farm.at}/scenarios`).send({ name: 'Own', draft })
    const scenario = await submit(bodyOf<Scenario>(saved))
    const { items } = bodyOf<{ items: { id: string; userId: string; version: number }[] }>(
      await farm.owner.get(`${farm.at}/members`),
      200,
    )
    const member = items.find(({ userId }) => userId === turncoat.userId)
    await farm.owner
      .patch(`${farm.at}/members/${member?.id ?? ''}`)
      .set(ifMatch(member ?? { version: 0 }))
      .send({ role: 'advisor' })
      .expect(200)
    const answer = await turncoat.visitor
      .post(`${at(scenario)}/reviews`)
      .set(ifMatch(scenario))
      .send({ revision: 1, decision: 'returned', text: 'Fine' })
      .expect(403)
    expect(answer.body).toMatchObject({ code: 'not_allowed' })
  })

  it('keeps what is said, in its order', async () => {
    const scenario = await submitted()
    const comments = `${at(scenario)}/comments`
    await advisor.visitor.post(comments).send({ revision: 1, text: 'Which hay?' }).expect(201)
    const answer = await farm.owner.post(comments).send({ revision: 1, text: 'First cut' }).expect(201)
    expect((answer.body as Scenario).comments.map(({ text }) => text)).toEqual([
      '',
      'Which hay?',
      'First cut',
    ])
    // A remark changes nothing that an editor could have seen: what was read before can still be decided on.
    expect(bodyOf<Scenario>(await review(scenario, 'returned')).latest.state).toBe('returned')
  })

  it('names the farm in every statement', () => expect(farm.test.scopeViolations).toEqual([]))

  describe('cautions', () => {
    let cautious: TestApp
    const levels: { code: string; level: 'warn' | 'acknowledge' | 'block' }[] = []

    beforeAll(async () => {
      // The same workers, with cautions of the test's choosing added to what they answer.
      const solving: Pick<SolvingPool, 'solveMix' | 'traceCurve' | 'ready'> = {
        ready: () => Promise.resolve(true),
        traceCurve: (...call) => farm.pool.traceCurve(...call),
        solveMix: async (...call) => {
          const answer = await farm.pool.solveMix(...call)
          const added = levels.map((one) => ({
            ...one,
            params: {},
            feedIds: [],
            source: 'test',
            status: 'practice' as const,
          }))
          return { ...answer, cautions: [...answer.cautions, ...added] }
        },
      }
      cautious = await startTestApp({ solving })
    })
    afterAll(() => cautious.close())

    it.each([
      { name: 'must be named', level: 'acknowledge' as const, acknowledged: [], refused: 'invalid_input' },
      {
        name: 'let pass once named',
        level: 'acknowledge' as const,
        acknowledged: ['copperHigh'],
        refused: undefined,
      },
      {
        name: 'need no naming when they only warn',
        level: 'warn' as const,
        acknowledged: [],
        refused: undefined,
      },
      {
        name: 'stop an approval',
        level: 'block' as const,
        acknowledged: ['copperHigh'],
        refused: 'wrong_state',
      },
    ])('$name', async ({ level, acknowledged, refused }) => {
      levels.splice(0, levels.length, { code: 'copperHigh', level })
      const there = await furnishFarm(cautious, farm.pool)
      const reviewer = await addMember(there, 'advisor')
      const scenario = await saveScenario(there, await firstDraft(there, await addGroup(there)))
      const handedIn = bodyOf<Scenario>(
        await there.owner
          .post(`${there.at}/scenarios/${scenario.id}/submit`)
          .set(ifMatch(scenario))
          .send({ revision: 1 }),
        200,
      )
      const own = await there.owner.get(`${there.at}/scenarios/${scenario.id}/revisions/1`)
      const named = bodyOf<{ answer: Answer }>(own, 200)
        .answer.cautions.filter((one) => one.level === 'acknowledge' && one.code !== 'copperHigh')
        .map(({ code }) => code)
      const answer = await reviewer.visitor
        .post(`${there.at}/scenarios/${scenario.id}/reviews`)
        .set(ifMatch(handedIn))
        .send({ revision: 1, decision: 'approved', text: 'Seen', acknowledged: [...named, ...acknowledged] })
      if (refused === undefined) {
        expect(bodyOf<Scenario>(answer).latest.state).toBe('approved')
        return
      }
      expect(answer.body as Problem).toMatchObject({ code: refused })
      if (refused === 'invalid_input')
        expect((answer.body as Problem).errors?.[0]).toMatchObject({
          path: 'acknowledged',
          code: 'not_acknowledged',
        })
      const now = await there.owner.get(`${there.at}/scenarios/${scenario.id}`)
      expect(bodyOf<Scenario>(now, 200).latest.state).toBe('submitted')
    })
  })
})
