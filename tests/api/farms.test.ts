import type { Farm, Offer } from '@maslin/shared'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { startTestApp, type TestApp } from '../support/app'
import { addGroup, bodyOf, firstDraft, ifMatch, startTestFarm } from '../support/farm'
import { farmApi } from '../support/farmApi'
import { signUp } from '../support/people'

let t: TestApp
beforeAll(async () => {
  t = await startTestApp()
})
afterAll(() => t.close())

describe('the farm', () => {
  it('is renamed and told other units by its owner', async () => {
    const owner = await signUp(t)
    const api = farmApi(owner, owner.farmId)
    const read = await api.get('')
    expect(read.headers.etag).toBe('"1"')
    const changed = await api.patch('', 1, { name: 'High Croft', units: 'metric' })
    expect(changed.body).toMatchObject({ name: 'High Croft', units: 'metric', currency: 'USD', version: 2 })
    expect(changed.headers.etag).toBe('"2"')
  })

  it('keeps what the faster of two editors wrote, and shows it to the slower one', async () => {
    const owner = await signUp(t)
    const api = farmApi(owner, owner.farmId)
    const answers = await Promise.all([api.patch('', 1, { name: 'One' }), api.patch('', 1, { name: 'Two' })])
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 409])
    const kept = answers.find(({ status }) => status === 200)?.body as Farm
    expect(answers.find(({ status }) => status === 409)?.body).toMatchObject({
      code: 'stale_version',
      current: kept,
    })
    expect((await api.get('')).body).toEqual(kept)
  })

  it('changes its currency only while it has no prices', async () => {
    const owner = await signUp(t)
    const api = farmApi(owner, owner.farmId)
    expect((await api.patch('', 1, { currency: 'CAD' })).body).toMatchObject({ currency: 'CAD', version: 2 })
    const [feed, supplier] = [await api.makeFeed(), await api.makeSupplier()]
    await api.makeOffer({ feedId: feed.id, supplierId: supplier.id })
    const refused = await api.patch('', 2, { currency: 'USD', name: 'Other' })
    expect(refused.body).toMatchObject({ status: 409, code: 'wrong_state', errors: [{ path: 'currency' }] })
    expect((await api.patch('', 2, { currency: 'CAD', name: 'Same' })).body).toMatchObject({ name: 'Same' })
  })

  it('keeps its currency while a mix holds a price tried out', async () => {
    const farm = await startTestFarm()
    try {
      const draft = await firstDraft(farm, await addGroup(farm))
      const feeds = draft.feeds.map((feed) => ({ ...feed, pricePerKg: '0.3' }))
      bodyOf(await farm.owner.post(`${farm.at}/mixes`).send({ ...draft, feeds }))
      const { items } = bodyOf<{ items: Offer[] }>(await farm.owner.get(`${farm.at}/offers`), 200)
      for (const offer of items)
        await farm.owner.delete(`${farm.at}/offers/${offer.id}`).set(ifMatch(offer)).expect(204)
      const refused = await farm.owner.patch(farm.at).set('If-Match', '"1"').send({ currency: 'CAD' })
      expect(refused.body).toMatchObject({ status: 409, code: 'wrong_state', errors: [{ path: 'currency' }] })
    } finally {
      await farm.close()
    }
  })
})
