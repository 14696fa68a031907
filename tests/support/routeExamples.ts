import type { BookFeed, Feed, Mix, Scenario, Supplier } from '@maslin/shared'
import { randomUUID } from 'node:crypto'
import type { Route } from '../../backend/src/routes/route'
import { bodyOf, ewes, saveScenario } from './farm'
import { signUp, type Person } from './people'
import type { World } from './world'

/** A call of a route that succeeds for somebody who may make it. */
export interface ExampleCall {
  /** Values of the path besides `farmId`. */
  path?: Record<string, string>
  query?: Record<string, string>
  body?: object
  /** For `If-Match`. */
  version?: number
  headers?: Record<string, string>
}

/** Makes what the call needs, as the owner, anew each time. */
type Example = (world: World) => Promise<ExampleCall>

export const keyOf = ({ method, path }: Pick<Route, 'method' | 'path'>): string =>
  `${method.toUpperCase()} ${path}`

/** One example per route of a farm. A new route gets a line here, or the walk through all routes fails. */
export const examples: Readonly<Record<string, Example>> = {
  'GET /farms/:farmId': nothing,
  'PATCH /farms/:farmId': async ({ api }) => {
    const { version } = bodyOf<{ version: number }>(await api.get(''), 200)
    return { body: { name: `Farm ${randomUUID()}` }, version }
  },
  'GET /farms/:farmId/members': nothing,
  'POST /farms/:farmId/members': async (world) => ({
    body: { email: (await signUp(world.test)).email, role: 'hand' },
  }),
  'PATCH /farms/:farmId/members/:memberId': async (world) => ({
    ...(await newMember(world)),
    body: { role: 'manager' },
  }),
  'DELETE /farms/:farmId/members/:memberId': newMember,

  'GET /farms/:farmId/feeds': nothing,
  'POST /farms/:farmId/feeds': () =>
    Promise.resolve({ body: { name: randomUUID(), class: 'grain', dryMatter: 0.9, forage: false } }),
  'POST /farms/:farmId/feeds/copies': async ({ api, crew }) => {
    const book = bodyOf<{ items: BookFeed[] }>(await crew.owner.visitor.get('/api/v1/book/feeds'), 200).items
    const kept = bodyOf<{ items: Feed[] }>(await api.get('/feeds'), 200).items.map((feed) => feed.bookKey)
    return { body: { bookKeys: [book.find((feed) => !kept.includes(feed.key))?.key] } }
  },
  'GET /farms/:farmId/feeds/:feedId': newFeed,
  'PATCH /farms/:farmId/feeds/:feedId': async (world) => ({
    ...(await newFeed(world)),
    body: { archived: true },
  }),
  'DELETE /farms/:farmId/feeds/:feedId': newFeed,

  'GET /farms/:farmId/suppliers': nothing,
  'POST /farms/:farmId/suppliers': () => Promise.resolve({ body: { name: randomUUID() } }),
  'PATCH /farms/:farmId/suppliers/:supplierId': async (world) => ({
    ...(await newSupplier(world)),
    body: { note: 'delivers on Fridays' },
  }),
  'DELETE /farms/:farmId/suppliers/:supplierId': newSupplier,

  'GET /farms/:farmId/offers': nothing,
  'POST /farms/:farmId/offers': async ({ api }) => {
    const [feed, supplier] = [
      await api.makeFeed({ name: randomUUID() }),
      await api.makeSupplier(randomUUID()),
    ]
    return {
      body: {
        feedId: feed.id,
        supplierId: supplier.id,
        packageQuantity: 1,
        packageUnit: 'tonne',
        price: '240',
      },
    }
  },
  'PATCH /farms/:farmId/offers/:offerId': async (world) => ({
    ...(await newOffer(world)),
    body: { freight: '1.50' },
  }),
  'DELETE /farms/:farmId/offers/:offerId': newOffer,
  'GET /farms/:farmId/offers/:offerId/prices': newOffer,
  'POST /farms/:farmId/offers/:offerId/prices': async (world) => ({
    ...(await newOffer(world)),
    body: { date: '2026-03-01', price: '11.25' },
  }),

  'GET /farms/:farmId/price-imports': nothing,
  'POST /farms/:farmId/price-imports/preview': async (world) => ({ body: await newList(world) }),
  'POST /farms/:farmId/price-imports': async (world) => ({
    body: {
      ...(await newList(world)),
      mapping: {
        header: true,
        delimiter: ',',
        decimal: '.',
        dateOrder: 'ymd',
        columns: { feed: 0, supplier: 1, package: 2, price: 3, date: 4 },
      },
    },
    headers: { 'Idempotency-Key': randomUUID() },
  }),

  'GET /farms/:farmId/groups': nothing,
  'POST /farms/:farmId/groups': ({ farm }) => Promise.resolve({ body: ewes(farm, { name: randomUUID() }) }),
  'POST /farms/:farmId/groups/requirement': ({ farm }) =>
    Promise.resolve({ body: { animal: ewes(farm).animal } }),
  'GET /farms/:farmId/groups/:groupId': newGroup,
  'PATCH /farms/:farmId/groups/:groupId': async (world) => ({
    ...(await newGroup(world)),
    body: { heads: 41 },
  }),
  'DELETE /farms/:farmId/groups/:groupId': newGroup,
  'GET /farms/:farmId/groups/:groupId/first-mix': newGroup,

  'GET /farms/:farmId/mixes': nothing,
  'POST /farms/:farmId/mixes': ({ draft }) => Promise.resolve({ body: { ...draft, name: randomUUID() } }),
  'GET /farms/:farmId/mixes/:mixId': newMix,
  'PUT /farms/:farmId/mixes/:mixId': async (world) => ({
    ...(await newMix(world)),
    body: { ...world.draft, name: randomUUID() },
  }),
  'DELETE /farms/:farmId/mixes/:mixId': newMix,

  'POST /farms/:farmId/solve': ({ draft }) => Promise.resolve({ body: { draft } }),
  'POST /farms/:farmId/solve/curve': ({ draft }) =>
    Promise.resolve({ body: { draft, along: { kind: 'price', feedId: draft.feeds[0]?.feedId } } }),

  'GET /farms/:farmId/scenarios': nothing,
  'POST /farms/:farmId/scenarios': ({ draft }) => Promise.resolve({ body: { name: randomUUID(), draft } }),
  'GET /farms/:farmId/scenarios/:scenarioId': newScenario,
  'PATCH /farms/:farmId/scenarios/:scenarioId': async (world) => ({
    ...(await newScenario(world)),
    body: { name: randomUUID() },
  }),
  'DELETE /farms/:farmId/scenarios/:scenarioId': newScenario,
  'GET /farms/:farmId/scenarios/:scenarioId/revisions/:revision': async (world) => {
    const call = await newScenario(world)
    return { ...call, path: { ...call.path, revision: '1' } }
  },
  'POST /farms/:farmId/scenarios/:scenarioId/revisions': async (world) => ({
    ...(await newScenario(world)),
    body: { draft: world.draft },
  }),
  'POST /farms/:farmId/scenarios/:scenarioId/submit': async (world) => ({
    ...(await newScenario(world)),
    body: { revision: 1 },
  }),
  'POST /farms/:farmId/scenarios/:scenarioId/comments': async (world) => ({
    ...(await newScenario(world)),
    body: { revision: 1, text: 'Is the hay analysed?' },
  }),
  'POST /farms/:farmId/scenarios/:scenarioId/reviews': async (world) => {
    const call = await newScenario(world)
    const scenario = bodyOf<Scenario>(
      await world.api
        .post(`/scenarios/${call.path?.scenarioId}/submit`, { revision: 1 })
        .set('If-Match', `"${call.version}"`),
      200,
    )
    return {
      ...call,
      version: scenario.version,
      body: { revision: 1, decision: 'returned', text: 'Not yet.' },
    }
  },
}

function nothing(): Promise<ExampleCall> {
  return Promise.resolve({})
}

async function newMember(world: World): Promise<ExampleCall> {
  const person: Person = await signUp(world.test)
  const { id, version } = bodyOf<{ id: string; version: number }>(
    await world.api.post('/members', { email: person.email, role: 'hand' }),
  )
  return { path: { memberId: id }, version }
}

async function newFeed({ api }: World): Promise<ExampleCall> {
  const { id, version } = await api.makeFeed({ name: randomUUID() })
  return { path: { feedId: id }, version }
}

async function newSupplier({ api }: World): Promise<ExampleCall> {
  const { id, version }: Supplier = await api.makeSupplier(randomUUID())
  return { path: { supplierId: id }, version }
}

async function newOffer({ api }: World): Promise<ExampleCall> {
  const [feed, supplier] = [await api.makeFeed({ name: randomUUID() }), await api.makeSupplier(randomUUID())]
  const { id, version } = await api.makeOffer({ feedId: feed.id, supplierId: supplier.id })
  return { path: { offerId: id }, version }
}

async function newList({ api }: World): Promise<{ text: string }> {
  const feed = await api.makeFeed({ name: randomUUID() })
  return { text: `feed,supplier,package,price,date\n${feed.name},Fell Foot Stores,50 lb,9.90,2026-02-03\n` }
}

async function newGroup({ farm, api }: World): Promise<ExampleCall> {
  const { id, version } = bodyOf<{ id: string; version: number }>(
    await api.post('/groups', ewes(farm, { name: randomUUID() })),
  )
  return { path: { groupId: id }, version }
}

async function newMix({ api, draft }: World): Promise<ExampleCall> {
  const { id, version } = bodyOf<Mix>(await api.post('/mixes', { ...draft, name: randomUUID() }))
  return { path: { mixId: id }, version }
}

async function newScenario({ farm, draft }: World): Promise<ExampleCall> {
  const { id, version } = await saveScenario(farm, draft, randomUUID())
  return { path: { scenarioId: id }, version }
}
