import type { Feed, Group, Mix, MixDraft, MixSummary, Problem, Scenario } from '@maslin/shared'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import {
  addGroup,
  bodyOf,
  draftOf,
  firstDraft,
  ifMatch,
  saveScenario,
  startTestFarm,
  type TestFarm,
} from '../support/farm'
import { signUp } from '../support/people'

describe('mixes', () => {
  let farm: TestFarm
  let group: Group
  let draft: MixDraft

  beforeAll(async () => {
    farm = await startTestFarm()
    group = await addGroup(farm)
    draft = await firstDraft(farm, group)
  })
  afterAll(() => farm.close())

  const add = async (changes: Partial<MixDraft> = {}) =>
    bodyOf<Mix>(await farm.owner.post(`${farm.at}/mixes`).send({ ...draft, ...changes }))
  const put = (mix: Mix, next: object) =>
    farm.owner.put(`${farm.at}/mixes/${mix.id}`).set(ifMatch(mix)).send(next)
  const get = async (id: string) => bodyOf<Mix>(await farm.owner.get(`${farm.at}/mixes/${id}`), 200)

  it('gives back what was saved: order of feeds, prices tried out, limits, note', async () => {
    const [first, second, ...rest] = draft.feeds
    const feeds = [
      ...rest,
      { ...second, pricePerKg: '0.25' },
      { ...first, pricePerKg: '3' },
    ] as MixDraft['feeds']
    const wanted = { ...draft, name: 'Barn mix', feeds, note: 'Kept dry', batchDryMatterKg: 250.5 }
    const mix = await add(wanted)
    expect(draftOf(mix)).toEqual(wanted)
    expect(await get(mix.id)).toEqual(mix)
    const { items } = bodyOf<{ items: MixSummary[] }>(await farm.owner.get(`${farm.at}/mixes`), 200)
    expect(items[0]).toMatchObject({
      id: mix.id,
      name: 'Barn mix',
      groupName: group.name,
      feedCount: feeds.length,
      limitCount: draft.limits.length,
    })
    expect(items[0]).not.toHaveProperty('limits')
  })

  it('keep the feeds that only their limits name from being removed', async () => {
    const feed = bodyOf<Feed>(
      await farm.owner
        .post(`${farm.at}/feeds`)
        .send({ name: 'Rye grain', class: 'grain', dryMatter: 0.88, forage: false }),
    )
    const of = { by: 'feeds' as const, feedIds: [feed.id] }
    const limit = { id: 'noRye', kind: 'feeds' as const, of, measure: 'shareAsFed' as const, max: 0 }
    const mix = await add({ name: 'Without rye', limits: [...draft.limits, limit] as MixDraft['limits'] })
    const removeFeed = () => farm.owner.delete(`${farm.at}/feeds/${feed.id}`).set(ifMatch(feed))
    expect((await removeFeed().expect(409)).body).toMatchObject({ code: 'in_use' })
    bodyOf(await put(mix, draftOf(mix)), 200)
    await farm.owner.delete(`${farm.at}/mixes/${mix.id}`).set('If-Match', '"2"').expect(204)
    await removeFeed().expect(204)
  })

  it('puts a whole draft in place of the one before', async () => {
    const mix = await add()
    const next = {
      ...draft,
      feeds: draft.feeds.slice(0, 2),
      limits: draft.limits.slice(0, 1),
      name: 'Smaller',
    }
    const answer = await put(mix, next)
    expect(draftOf(bodyOf<Mix>(answer, 200))).toEqual(next)
    expect(answer.headers.etag).toBe('"2"')
    expect(draftOf(await get(mix.id))).toEqual(next)
  })

  it('refuses a stale draft and answers the one that stands there', async () => {
    const mix = await add()
    await put(mix, { ...draft, name: 'Theirs' }).expect(200)
    const answer = await put(mix, { ...draft, name: 'Mine' }).expect(409)
    expect(answer.body as Problem).toMatchObject({
      code: 'stale_version',
      current: { name: 'Theirs', version: 2 },
    })
    expect((await get(mix.id)).name).toBe('Theirs')
  })

  it('takes one of two changes made at the same moment', async () => {
    const mix = await add()
    const answers = await Promise.all(['One', 'Two', 'Three'].map((name) => put(mix, { ...draft, name })))
    const taken = answers.filter(({ status }) => status === 200)
    expect(taken).toHaveLength(1)
    for (const { status, body } of answers) {
      if (status !== 200) expect(body).toMatchObject({ code: 'stale_version' })
    }
    expect(await get(mix.id)).toEqual(taken[0]?.body)
  })

  it('keeps the whole mix as it was where one of its feeds is not the farm’s', async () => {
    const mix = await add()
    const other = await signUp(farm.test, 'Neighbour')
    const copied = await other.visitor
      .post(`/api/v1/farms/${other.farmId}/feeds/copies`)
      .send({ bookKeys: ['barley-grain'] })
    const theirs = bodyOf<{ items: Feed[] }>(copied).items[0]?.id ?? ''
    const answer = await put(mix, { ...draft, feeds: [...draft.feeds, { feedId: theirs }] }).expect(400)
    expect((answer.body as Problem).errors?.[0]).toMatchObject({
      path: `feeds.${draft.feeds.length}.feedId`,
      code: 'unknown_feed',
    })
    expect(await get(mix.id)).toEqual(mix)
  })

  it('cannot point at a feed of another farm in the database either', async () => {
    const mix = await add()
    const other = await signUp(farm.test, 'Neighbour')
    const copied = await other.visitor
      .post(`/api/v1/farms/${other.farmId}/feeds/copies`)
      .send({ bookKeys: ['barley-grain'] })
    const theirs = bodyOf<{ items: Feed[] }>(copied).items[0]?.id ?? ''
    const { mixFeeds } = farm.test.database.models
    const [row] = await mixFeeds.findAll({ where: { farmId: farm.farmId, mixId: mix.id } })
    await expect(
      mixFeeds.update({ feedId: theirs }, { where: { farmId: farm.farmId, id: row?.get('id') ?? '' } }),
    ).rejects.toThrow(/foreign key/i)
  })

  it('goes, while scenarios saved from it stay', async () => {
    const mix = await add()
    const answer = await farm.owner.post(`${farm.at}/scenarios`).send({ name: 'Kept', mixId: mix.id, draft })
    const scenario = bodyOf<Scenario>(answer)
    expect(scenario.mixId).toBe(mix.id)
    await farm.owner.delete(`${farm.at}/mixes/${mix.id}`).set(ifMatch(mix)).expect(204)
    await farm.owner.get(`${farm.at}/mixes/${mix.id}`).expect(404)
    const kept = bodyOf<Scenario>(await farm.owner.get(`${farm.at}/scenarios/${scenario.id}`), 200)
    expect(kept.mixId).toBeUndefined()
    expect(kept.latest.contentHash).toBe(scenario.latest.contentHash)
  })

  it('is refused as the origin of a scenario where it does not exist', async () => {
    const mixId = (await saveScenario(farm, draft)).id
    const answer = await farm.owner.post(`${farm.at}/scenarios`).send({ name: 'x', mixId, draft }).expect(400)
    expect((answer.body as Problem).errors?.[0]).toMatchObject({ path: 'mixId', code: 'unknown_mix' })
  })

  it('holds on to the feeds and offers it names', async () => {
    const feed = farm.feed('corn-grain')
    const { items } = bodyOf<{ items: { id: string; version: number; feedId: string }[] }>(
      await farm.owner.get(`${farm.at}/offers`),
      200,
    )
    const offer = items.find(({ feedId }) => feedId === feed.id)
    await add({ feeds: [{ feedId: feed.id, ...(offer ? { offerId: offer.id } : {}) }] })
    const dropOffer = await farm.owner
      .delete(`${farm.at}/offers/${offer?.id ?? ''}`)
      .set(ifMatch(offer ?? { version: 0 }))
    expect(dropOffer.body).toMatchObject({ code: 'in_use' })
    const dropFeed = await farm.owner.delete(`${farm.at}/feeds/${feed.id}`).set(ifMatch(feed))
    expect(dropFeed.body).toMatchObject({ code: 'in_use' })
  })

  it('writes an event for every change, with what was before and after', async () => {
    const mix = await add()
    const changed = bodyOf<Mix>(await put(mix, { ...draft, name: 'Other' }), 200)
    await farm.owner.delete(`${farm.at}/mixes/${mix.id}`).set(ifMatch(changed)).expect(204)
    const events = await farm.test.database.models.auditEvents.findAll({
      where: { farmId: farm.farmId, entityId: mix.id },
      order: [['id', 'ASC']],
    })
    expect(events.map((event) => event.get('action'))).toEqual(['create', 'update', 'delete'])
    expect(events[1]?.get('beforeState')).toMatchObject({ name: draft.name })
    expect(events[1]?.get('afterState')).toMatchObject({ name: 'Other' })
  })

  it('names the farm in every statement', () => expect(farm.test.scopeViolations).toEqual([]))
})
