import type { Curve, Group, MixDraft, OptimalAnswer, Problem } from '@maslin/shared'
import { solveMix } from '@maslin/solver'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { addGroup, firstDraft, solve, startTestFarm, type TestFarm } from '../support/farm'
import { signUp } from '../support/people'

const optimal = (answer: { status: string }): OptimalAnswer => {
  expect(answer.status, JSON.stringify(answer)).toBe('optimal')
  return answer as OptimalAnswer
}

describe('solving a draft', () => {
  let farm: TestFarm
  let group: Group
  let draft: MixDraft

  beforeAll(async () => {
    farm = await startTestFarm()
    group = await addGroup(farm)
    draft = await firstDraft(farm, group)
  })
  afterAll(() => farm.close())

  it.each(['besideForage', 'perHead', 'batch'] as const)(
    'finds the cheapest first mix: %s',
    async (basis) => {
      const { input, answer } = await solve(farm, await firstDraft(farm, group, basis))
      const { blend, cost, proof } = optimal(answer)
      expect(input.basis).toBe(basis)
      expect(blend.length).toBeGreaterThan(1)
      expect(cost.least).toBeGreaterThan(0)
      expect(proof.certified).toBe(true)
    },
  )

  it('can be computed again from the input that travels back, to the same cost', async () => {
    const { input, answer } = await solve(farm, draft)
    const again = optimal(await solveMix(input))
    expect(again.cost.least).toBeCloseTo(optimal(answer).cost.least, 9)
  })

  it('puts needs, base diet and assumed highs of the farm and the library into the input', async () => {
    const { input } = await solve(farm, draft)
    expect(input.group).toMatchObject({
      species: 'sheep',
      phase: 'latePregnancy',
      heads: 40,
      bodyWeightKg: 70,
    })
    expect(input.group.needs).toEqual(group.requirement?.needs)
    expect(input.group.intakeDryMatterKg).toBe(group.requirement?.intakeDryMatterKg)
    const hay = farm.feed('timothy-hay-early-bloom')
    const fibre = hay.values.neutralDetergentFiber?.value ?? 0
    // 1.2 % of body weight as fibre in late pregnancy, and 0.63 kg of hay left for a kg of supplement.
    expect(input.baseDiet).toEqual([
      {
        feedId: hay.id,
        mode: 'freeChoice',
        wasteShare: 0.1,
        dryMatterKg: expect.closeTo((0.012 * 70) / (fibre / 1000), 9) as number,
        substitutionRate: 0.63,
        origin: 'fibreCap',
      },
    ])
    expect(Object.keys(input.assumedHighs)).toContain('any')
  })

  it('takes the price tried out, else the offer chosen, else the cheapest of the day', async () => {
    const corn = farm.feed('corn-grain').id
    const priceOfCorn = async (changes: Partial<MixDraft>) => {
      const { input } = await solve(farm, { ...draft, ...changes })
      return input.feeds.find(({ id }) => id === corn)
    }
    const withCorn = (choice: object) => ({
      feeds: draft.feeds.map((feed) => (feed.feedId === corn ? { ...feed, ...choice } : feed)),
    })
    const bag = 50 * 0.45359237
    expect((await priceOfCorn({}))?.pricePerKg).toBeCloseTo(9.8 / bag, 6)
    expect((await priceOfCorn({}))?.priceOrigin).toMatchObject({ price: '9.8', date: '2026-06-01' })

    const supplier = await farm.owner.post(`${farm.at}/suppliers`).send({ name: 'Dear Dale' }).expect(201)
    const dear = await farm.owner
      .post(`${farm.at}/offers`)
      .send({
        supplierId: (supplier.body as { id: string }).id,
        feedId: corn,
        packageQuantity: 50,
        packageUnit: 'lb',
        freight: '1.25',
        price: '10.00',
        date: '2026-06-02',
      })
      .expect(201)
    const { id: offerId } = dear.body as { id: string }
    expect((await priceOfCorn({}))?.pricePerKg).toBeCloseTo(9.8 / bag, 6)
    expect((await priceOfCorn(withCorn({ offerId })))?.pricePerKg).toBeCloseTo(11.25 / bag, 6)
    expect((await priceOfCorn(withCorn({ offerId, pricePerKg: '0.3' })))?.pricePerKg).toBe(0.3)
    expect((await priceOfCorn({ pricesAsOf: '2026-05-31' }))?.pricePerKg).toBeUndefined()
  })

  it('asks a second engine when told to, which agrees', async () => {
    const { answer } = await solve(farm, draft, { secondOpinion: true })
    expect(optimal(answer).proof.secondOpinion).toMatchObject({ agrees: true })
  })

  it('answers an impossible mix with what conflicts and what to loosen', async () => {
    const limits = [...draft.limits, { ...draft.limits[0], id: 'tooMuch', min: 40 }] as MixDraft['limits']
    const { answer } = await solve(farm, { ...draft, limits })
    expect(answer.status).toBe('infeasible')
    if (answer.status !== 'infeasible') return
    expect(answer.conflict.map(({ limitId }) => limitId)).toContain('tooMuch')
    expect(answer.proposals.length).toBeGreaterThan(0)
  })

  it('answers a draft without feeds with the reason', async () => {
    const { answer } = await solve(farm, { ...draft, feeds: [] })
    expect(answer).toMatchObject({ status: 'invalid', reasons: [{ code: 'noFeeds' }] })
  })

  it('saves nothing', async () => {
    const before = (await farm.owner.get(`${farm.at}/mixes`)).body as unknown
    await solve(farm, draft)
    expect((await farm.owner.get(`${farm.at}/mixes`)).body).toEqual(before)
  })

  it('gives the cost along a price and along a limit', async () => {
    const feedId = farm.feed('barley-grain').id
    const price = await farm.owner
      .post(`${farm.at}/solve/curve`)
      .send({ draft, along: { kind: 'price', feedId } })
      .expect(200)
    expect((price.body as Curve).points.length).toBeGreaterThan(1)
    const limit = await farm.owner
      .post(`${farm.at}/solve/curve`)
      .send({ draft, along: { kind: 'limit', limitId: 'protein', side: 'min' }, from: 100, to: 250 })
      .expect(200)
    const { points } = limit.body as Curve
    expect(points[0]?.cost).toBeLessThanOrEqual(points.at(-1)?.cost ?? 0)
  })

  describe('wrong input', () => {
    const nobody = '01900000-0000-7000-8000-000000000000'
    const firstLimit = () => draft.limits[0] as MixDraft['limits'][number]

    it.each([
      { name: 'no draft', body: () => ({}), path: 'draft', code: 'required' },
      {
        name: 'a feed the farm does not keep',
        body: () => ({ draft: { ...draft, feeds: [{ feedId: nobody }] } }),
        path: 'draft.feeds.0.feedId',
        code: 'unknown_feed',
      },
      {
        name: 'a feed twice',
        body: () => ({ draft: { ...draft, feeds: [draft.feeds[0], draft.feeds[0]] } }),
        path: 'draft.feeds',
        code: 'duplicate_feed',
      },
      {
        name: 'an unknown group',
        body: () => ({ draft: { ...draft, groupId: nobody } }),
        path: 'draft.groupId',
        code: 'unknown_group',
      },
      {
        name: 'an unknown offer',
        body: () => ({ draft: { ...draft, feeds: [{ ...draft.feeds[0], offerId: nobody }] } }),
        path: 'draft.feeds.0.offerId',
        code: 'unknown_offer',
      },
      {
        name: 'a limit on an unknown feed',
        body: () => ({
          draft: {
            ...draft,
            limits: [
              { id: 'x', kind: 'feeds', of: { by: 'feeds', feedIds: [nobody] }, measure: 'kgAsFed', max: 1 },
            ],
          },
        }),
        path: 'draft.limits.0.of.feedIds.0',
        code: 'unknown_feed',
      },
      {
        name: 'a limit without a figure',
        body: () => ({ draft: { ...draft, limits: [{ id: 'x', kind: 'intake' }] } }),
        path: 'draft.limits.0.min',
        code: 'no_bound',
      },
      {
        name: 'a minimum above the maximum',
        body: () => ({ draft: { ...draft, limits: [{ ...firstLimit(), min: 2, max: 1 }] } }),
        path: 'draft.limits.0.max',
        code: 'min_above_max',
      },
      {
        name: 'a number too large for a number',
        body: () =>
          `{"draft":${JSON.stringify({ ...draft, batchDryMatterKg: 777 }).replace('777', '1e999')}}`,
        path: 'draft.batchDryMatterKg',
        code: 'not_a_number',
      },
      { name: 'no time', body: () => ({ draft, deadlineMs: 0 }), path: 'deadlineMs', code: 'too_small' },
      {
        name: 'an unknown field',
        body: () => ({ draft, quick: true }),
        path: 'quick',
        code: 'unknown_field',
      },
    ])('refuses $name and says where', async ({ body, path, code }) => {
      const answer = await farm.owner
        .post(`${farm.at}/solve`)
        .set('Content-Type', 'application/json')
        .send(body())
        .expect(400)
      expect((answer.body as Problem).errors).toContainEqual(expect.objectContaining({ path, code }))
    })

    it.each([
      { along: { kind: 'price', feedId: nobody }, path: 'along.feedId' },
      { along: { kind: 'limit', limitId: 'none', side: 'min' }, path: 'along.limitId' },
      { along: { kind: 'limit', limitId: 'fat', side: 'min' }, path: 'along.side' },
    ])('refuses a curve along $path that is not there', async ({ along, path }) => {
      const answer = await farm.owner.post(`${farm.at}/solve/curve`).send({ draft, along }).expect(400)
      expect((answer.body as Problem).errors?.[0]?.path).toBe(path)
    })

    it('refuses a curve that ends before it begins', async () => {
      const along = { kind: 'limit', limitId: 'protein', side: 'min' }
      const answer = await farm.owner
        .post(`${farm.at}/solve/curve`)
        .send({ draft, along, from: 5, to: 2 })
        .expect(400)
      expect((answer.body as Problem).errors?.[0]).toMatchObject({ path: 'to', code: 'to_not_above_from' })
    })
  })

  it("does not reach another farm's feeds, prices or groups", async () => {
    const { visitor, session } = await signUp(farm.test, 'neighbour')
    const theirs = `/api/v1/farms/${session.memberships[0]?.farm.id ?? ''}`
    await visitor.post(`${farm.at}/solve`).send({ draft }).expect(404)
    const answer = await visitor.post(`${theirs}/solve`).send({ draft }).expect(400)
    const paths = (answer.body as Problem).errors?.map(({ path }) => path)
    expect(paths).toContain('draft.groupId')
    expect(paths).toContain('draft.feeds.0.feedId')
    expect(farm.test.scopeViolations).toEqual([])
  })

  it('ends many solves at once, each within its deadline', async () => {
    const start = performance.now()
    const answers = await Promise.all(
      Array.from({ length: 30 }, () => farm.owner.post(`${farm.at}/solve`).send({ draft, deadlineMs: 3000 })),
    )
    expect(performance.now() - start).toBeLessThan(15_000)
    for (const { status } of answers) expect([200, 503]).toContain(status)
    expect(answers.some(({ status }) => status === 200)).toBe(true)
  })
})
