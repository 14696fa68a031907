import type { Feed, FeedCreate, Offer, OfferCreate, Supplier } from '@maslin/shared'
import type { Response } from 'supertest'
import type { Person } from './people'

/** Calls on one farm, and things made on it with as little said as a test needs. */
export function farmApi({ visitor }: Pick<Person, 'visitor'>, farmId: string) {
  const at = (path: string) => `/api/v1/farms/${farmId}${path}`
  const made = async <T>(answer: Promise<Response> | PromiseLike<Response>): Promise<T> => {
    const { status, body } = await answer
    if (status >= 300) throw new Error(`${status} ${JSON.stringify(body)}`)
    return body as T
  }
  let count = 0
  const api = {
    farmId,
    at,
    get: (path: string) => visitor.get(at(path)),
    post: (path: string, body: object) => visitor.post(at(path)).send(body),
    patch: (path: string, version: number, body: object) =>
      visitor.patch(at(path)).set('If-Match', `"${version}"`).send(body),
    put: (path: string, version: number, body: object) =>
      visitor.put(at(path)).set('If-Match', `"${version}"`).send(body),
    delete: (path: string, version: number) => visitor.delete(at(path)).set('If-Match', `"${version}"`),
    makeFeed: (fields: Partial<FeedCreate> = {}) =>
      made<Feed>(
        visitor.post(at('/feeds')).send({
          name: `Barley ${++count}`,
          class: 'grain',
          dryMatter: 0.88,
          forage: false,
          ...fields,
        }),
      ),
    makeSupplier: (name = `Tarn Mill ${++count}`) =>
      made<Supplier>(visitor.post(at('/suppliers')).send({ name })),
    /** 50 lb at 10.00 on 2026-01-01. */
    makeOffer: (fields: Pick<OfferCreate, 'feedId' | 'supplierId'> & Partial<OfferCreate>) =>
      made<Offer>(
        visitor.post(at('/offers')).send({
          packageQuantity: 50,
          packageUnit: 'lb',
          price: '10',
          date: '2026-01-01',
          ...fields,
        }),
      ),
  }
  return api
}
export type FarmApi = ReturnType<typeof farmApi>
