import type { FirstMix, Group, GroupCreate, Problem, Stage } from '@maslin/shared'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import {
  addGroup,
  bodyOf,
  draftOf,
  ewes,
  firstDraft,
  ifMatch,
  startTestFarm,
  type TestFarm,
} from '../support/farm'
import { signUp } from '../support/people'

const nobody = '01900000-0000-7000-8000-000000000000'

describe('groups', () => {
  let farm: TestFarm
  beforeAll(async () => {
    farm = await startTestFarm()
  })
  afterAll(() => farm.close())

  const get = async (id: string) => bodyOf<Group>(await farm.owner.get(`${farm.at}/groups/${id}`), 200)
  const change = (group: Group, changes: object) =>
    farm.owner.patch(`${farm.at}/groups/${group.id}`).set(ifMatch(group)).send(changes)

  it('names the stages that the tables know', async () => {
    const { items } = bodyOf<{ items: Stage[] }>(await farm.owner.get('/api/v1/book/stages'), 200)
    expect(items).toContainEqual(
      expect.objectContaining({
        species: 'sheep',
        class: 'ewe',
        stage: 'latePregnancy',
        phase: 'latePregnancy',
      }),
    )
  })

  it('keeps a group and answers it with the published requirement', async () => {
    const asked = ewes(farm)
    const group = await addGroup(farm, asked)
    expect(group).toMatchObject({ ...asked, version: 1 })
    // NRC 1985, ewes of 70 kg in the last four weeks, one lamb: 1.8 kg, 193 g of crude protein.
    expect(group.requirement).toMatchObject({ system: 'NRC 1985', intakeDryMatterKg: 1.8 })
    expect(group.requirement?.needs).toContainEqual(
      expect.objectContaining({ nutrient: 'crudeProtein', kind: 'min', perHeadDay: 193, status: 'memory' }),
    )
    expect(await get(group.id)).toEqual(group)
    const { items } = bodyOf<{ items: Group[] }>(await farm.owner.get(`${farm.at}/groups`), 200)
    expect(items).toContainEqual(group)
  })

  it('says what the tables ask of an animal that is not saved, or nothing where they hold nothing', async () => {
    const ask = async (animal: object) =>
      bodyOf<{ requirement?: object }>(
        await farm.owner.post(`${farm.at}/groups/requirement`).send({ animal }),
        200,
      )
    expect((await ask(ewes(farm).animal)).requirement).toMatchObject({ intakeDryMatterKg: 1.8 })
    const unknown = { species: 'horse', class: 'mare', stage: 'idle', bodyWeightKg: 500 }
    expect(await ask(unknown)).toEqual({})
  })

  it('keeps the published figure and the reason beside a changed need', async () => {
    const group = await addGroup(farm)
    const reason = 'Thin after a hard autumn'
    const needOverrides = [
      { nutrient: 'crudeProtein', perHeadDay: 240, reason },
      { nutrient: 'selenium', perHeadDay: 0.3, reason: 'The soil here is short of it' },
    ]
    const intakeOverride = { dryMatterKg: 1.7, reason: 'Weighed back for a week' }
    const changed = bodyOf<Group>(await change(group, { needOverrides, intakeOverride }), 200)
    expect(changed.requirement?.intakeDryMatterKg).toBe(1.7)
    expect(changed.requirement?.needs).toContainEqual(
      expect.objectContaining({
        nutrient: 'crudeProtein',
        perHeadDay: 240,
        status: 'typed',
        override: { published: 193, reason },
      }),
    )
    expect(changed.requirement?.needs).toContainEqual(
      expect.objectContaining({ nutrient: 'selenium', kind: 'min', perHeadDay: 0.3 }),
    )
    const back = bodyOf<Group>(await change(changed, { needOverrides: [], intakeOverride: null }), 200)
    expect(back.requirement).toEqual(group.requirement)
    expect(back.intakeOverride).toBeUndefined()
  })

  it('refuses a change of a version that is no longer the latest, and answers what stands there', async () => {
    const group = await addGroup(farm)
    await change(group, { heads: 41 }).expect(200)
    const answer = await change(group, { heads: 42 }).expect(409)
    expect(answer.body as Problem).toMatchObject({
      code: 'stale_version',
      current: { heads: 41, version: 2 },
    })
    expect((await get(group.id)).heads).toBe(41)
    await farm.owner.patch(`${farm.at}/groups/${group.id}`).send({ heads: 1 }).expect(412)
  })

  const wrong: { name: string; changes: (group: GroupCreate) => object; path: string; code: string }[] = [
    {
      name: 'a stage the tables do not know',
      changes: ({ animal }) => ({ animal: { ...animal, stage: 'flying' } }),
      path: 'animal.stage',
      code: 'unknown_stage',
    },
    {
      name: 'a system the stage has no figures from',
      changes: ({ animal }) => ({ animal: { ...animal, system: 'Folklore' } }),
      path: 'animal.system',
      code: 'unknown_system',
    },
    {
      name: 'a base diet of a feed the farm does not keep',
      changes: () => ({ baseDiet: [{ feedId: nobody, mode: 'freeChoice' }] }),
      path: 'baseDiet.0.feedId',
      code: 'unknown_feed',
    },
    {
      name: 'a ration without a weight',
      changes: ({ baseDiet }) => ({ baseDiet: [{ ...baseDiet?.[0], mode: 'fixed' }] }),
      path: 'baseDiet.0.dryMatterKg',
      code: 'required',
    },
    {
      name: 'two free-choice feeds',
      changes: ({ baseDiet }) => ({ baseDiet: [baseDiet?.[0], baseDiet?.[0]] }),
      path: 'baseDiet',
      code: 'only_one_free_choice',
    },
    {
      name: 'a need changed twice',
      changes: () => ({
        needOverrides: [1, 2].map((perHeadDay) => ({ nutrient: 'zinc', perHeadDay, reason: 'because' })),
      }),
      path: 'needOverrides.1.nutrient',
      code: 'duplicate_nutrient',
    },
    {
      name: 'a changed need without a reason',
      changes: () => ({ needOverrides: [{ nutrient: 'zinc', perHeadDay: 1, reason: ' ' }] }),
      path: 'needOverrides.0.reason',
      code: 'required',
    },
    { name: 'no animals', changes: () => ({ heads: 0 }), path: 'heads', code: 'too_small' },
    {
      name: 'a field that is not known',
      changes: () => ({ farmId: nobody }),
      path: 'farmId',
      code: 'unknown_field',
    },
  ]

  it.each(wrong)('refuses $name, changing nothing', async ({ changes, path, code }) => {
    const count = async () =>
      bodyOf<{ items: Group[] }>(await farm.owner.get(`${farm.at}/groups`), 200).items.length
    const before = await count()
    const wanted = ewes(farm)
    const created = await farm.owner
      .post(`${farm.at}/groups`)
      .send({ ...wanted, ...changes(wanted) })
      .expect(400)
    expect((created.body as Problem).errors).toContainEqual(expect.objectContaining({ path, code }))
    expect(await count()).toBe(before)
    const group = await addGroup(farm, wanted)
    await change(group, changes(wanted)).expect(400)
    expect(await get(group.id)).toEqual(group)
  })

  it('removes a group, unless a mix is for it', async () => {
    const group = await addGroup(farm)
    const remove = () => farm.owner.delete(`${farm.at}/groups/${group.id}`).set(ifMatch(group))
    const mix = await farm.owner
      .post(`${farm.at}/mixes`)
      .send(await firstDraft(farm, group))
      .expect(201)
    expect((await remove().expect(409)).body).toMatchObject({ code: 'in_use' })
    expect(draftOf(mix.body as never)).toMatchObject({ groupId: group.id })
    await farm.owner
      .delete(`${farm.at}/mixes/${(mix.body as Group).id}`)
      .set(ifMatch(mix.body as Group))
      .expect(204)
    await remove().expect(204)
    await farm.owner.get(`${farm.at}/groups/${group.id}`).expect(404)
  })

  it('does not let go of a feed that a base diet needs', async () => {
    await addGroup(farm)
    const hay = farm.feed('timothy-hay-early-bloom')
    const answer = await farm.owner.delete(`${farm.at}/feeds/${hay.id}`).set(ifMatch(hay)).expect(409)
    expect(answer.body).toMatchObject({ code: 'in_use' })
  })

  it('writes an event for every change', async () => {
    const group = await addGroup(farm)
    const changed = bodyOf<Group>(await change(group, { heads: 12 }), 200)
    await farm.owner.delete(`${farm.at}/groups/${group.id}`).set(ifMatch(changed)).expect(204)
    const events = await farm.test.database.models.auditEvents.findAll({
      where: { farmId: farm.farmId, entityId: group.id },
      order: [['id', 'ASC']],
    })
    expect(events.map((event) => event.get('action'))).toEqual(['create', 'update', 'delete'])
  })

  describe('first mix', () => {
    const first = async (group: Group, query: object = {}) =>
      bodyOf<FirstMix>(await farm.owner.get(`${farm.at}/groups/${group.id}/first-mix`).query(query), 200)

    it('stands beside the base diet where there is one, with the feeds the farm keeps', async () => {
      const group = await addGroup(farm)
      const { draft, missingFeeds } = await first(group)
      expect(draft.basis).toBe('besideForage')
      const ids = draft.feeds.map(({ feedId }) => feedId)
      expect(ids).toContain(farm.feed('barley-grain').id)
      expect(ids).not.toContain(farm.feed('timothy-hay-early-bloom').id)
      expect(missingFeeds).toEqual([])
      expect(draft.limits.map(({ id }) => id)).toEqual(
        expect.arrayContaining(['energy', 'protein', 'calcium', 'phosphorus', 'forageShare']) as string[],
      )
    })

    it('is the whole diet of a group without one, forage included', async () => {
      const group = await addGroup(farm, ewes(farm, { baseDiet: [] }))
      const { draft } = await first(group)
      expect(draft.basis).toBe('perHead')
      expect(draft.feeds.map(({ feedId }) => feedId)).toContain(farm.feed('timothy-hay-early-bloom').id)
      expect((await first(group, { basis: 'batch' })).draft.basis).toBe('batch')
    })

    it('names the suggested feeds that the farm does not keep', async () => {
      const { visitor, farmId } = await signUp(farm.test, 'New Keeper')
      const at = `/api/v1/farms/${farmId}`
      const group = bodyOf<Group>(await visitor.post(`${at}/groups`).send(ewes(farm, { baseDiet: [] })))
      const answer = await visitor.get(`${at}/groups/${group.id}/first-mix`)
      const { draft, missingFeeds } = bodyOf<FirstMix>(answer, 200)
      expect(draft.feeds).toEqual([])
      expect(missingFeeds).toContainEqual({ bookKey: 'barley-grain', name: 'Barley grain' })
      expect(missingFeeds.map(({ bookKey }) => bookKey)).toContain('timothy-hay-early-bloom')
    })

    it('can be saved as it is', async () => {
      const { draft } = await first(await addGroup(farm))
      const saved = await farm.owner.post(`${farm.at}/mixes`).send(draft).expect(201)
      expect(draftOf(saved.body as never)).toEqual(draft)
    })
  })

  it('names the farm in every statement', () => expect(farm.test.scopeViolations).toEqual([]))
})
