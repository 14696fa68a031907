import { problemSchema, type Problem } from '@maslin/shared'
import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { routes } from '../../backend/src/routes'
import type { Route } from '../../backend/src/routes/route'
import { examples, keyOf, type ExampleCall } from '../support/routeExamples'
import { makeWorld, type World } from '../support/world'

let world: World
beforeAll(async () => {
  world = await makeWorld()
})
afterAll(() => world.close())

const farmRoutes = routes.filter((route) => route.path.startsWith('/farms/:farmId'))
const named = (list: readonly Route[]) => list.map((route) => ({ route, key: keyOf(route) }))
const withBody = named(farmRoutes.filter((route) => route.body))

const deep = `${'['.repeat(50_000)}${']'.repeat(50_000)}`

/** Bodies that no route takes, as the bytes that are sent. */
const wrongBodies: { name: string; text: string; status?: number; type?: string }[] = [
  { name: 'nothing at all', text: '' },
  { name: 'half a document', text: '{"name": "x"', status: 400 },
  { name: 'a bare word', text: 'null', status: 400 },
  { name: 'a list', text: '[]', status: 400 },
  {
    name: 'a number too large for a number',
    text: '{"name":1e309,"heads":1e309,"version":-1e309}',
    status: 400,
  },
  { name: 'a prototype', text: '{"__proto__":{"admin":true},"name":"x"}', status: 400 },
  { name: 'a constructor', text: '{"constructor":{"prototype":{"admin":true}}}', status: 400 },
  {
    name: 'fields of ours that are not the caller’s to set',
    text: '{"id":"1","farmId":"2","version":9}',
    status: 400,
  },
  { name: 'many thousand entries', text: JSON.stringify({ name: Array(60_000).fill(0) }), status: 400 },
  { name: 'brackets within brackets', text: `{"name":${deep}}`, status: 400 },
  {
    name: 'text in place of things',
    text: '{"draft":"x","animal":"y","values":"z","mapping":1}',
    status: 400,
  },
  { name: 'half of a letter', text: '{"name":"a\\ud800b"}', status: 400 },
  { name: 'half of a letter in a key', text: '{"a\\udc00":1}', status: 400 },
  { name: 'another type', text: 'name=x', status: 415, type: 'application/x-www-form-urlencoded' },
  { name: 'no JSON', text: '<name/>', status: 415, type: 'text/xml' },
  { name: 'another character set', text: '{}', status: 415, type: 'application/json; charset=latin-9' },
]

const made = new Map<string, Promise<ExampleCall>>()

/** Made once per route: no call here succeeds, so that what it needs stays as it is. */
function exampleOf(key: string): Promise<ExampleCall> {
  const example = examples[key]
  if (!example) throw new Error(`no example for ${key}`)
  const call = made.get(key) ?? example(world)
  made.set(key, call)
  return call
}

const addressOf = (route: Route, values: Record<string, string>) =>
  `/api/v1${route.path.replace(/:(\w+)/g, (_, name: string) => values[name] ?? '')}`

/** Somebody whose role may call the route, and the headers it asks for. */
function start(route: Route, path: string, example: ExampleCall) {
  const { crew } = world
  const { visitor } = route.access === 'scenarios.review' ? crew.advisor : crew.owner
  const request = visitor[route.method](path)
  if (example.version !== undefined) request.set('If-Match', `"${example.version}"`)
  return request.set('Idempotency-Key', randomUUID())
}

/** Every refusal is a problem of the documented shape, and none is our own failure. */
function expectProblem(answer: { status: number; body: unknown; headers: Record<string, unknown> }): Problem {
  expect(answer.status, JSON.stringify(answer.body)).toBeGreaterThanOrEqual(400)
  expect(answer.status, JSON.stringify(answer.body)).toBeLessThan(500)
  expect(answer.headers['content-type']).toContain('application/problem+json')
  const problem = problemSchema.parse(answer.body)
  expect(problem.status).toBe(answer.status)
  expect(problem.requestId).toBe(answer.headers['x-request-id'])
  return problem
}

describe.each(withBody)('$key', ({ route, key }) => {
  it('answers every wrong body with what is wrong', async () => {
    const example = await exampleOf(key)
    const path = addressOf(route, { farmId: world.farmId, ...example.path })
    for (const { name, text, status, type = 'application/json' } of wrongBodies) {
      const optional = route.body?.safeParse({}).success && text === ''
      if (optional) continue
      const request = start(route, path, example).set('Content-Type', type)
      const problem = expectProblem(text === '' ? await request : await request.send(text))
      if (status) expect(problem.status, `${name}: ${JSON.stringify(problem)}`).toBe(status)
    }
  })

  it('refuses a field it does not know, and says which', async () => {
    const example = await exampleOf(key)
    const path = addressOf(route, { farmId: world.farmId, ...example.path })
    const problem = expectProblem(await start(route, path, example).send({ ...example.body, colour: 'blue' }))
    expect(problem.errors).toContainEqual(expect.objectContaining({ path: 'colour', code: 'unknown_field' }))
  })

  it('refuses a body that is too large', async () => {
    const example = await exampleOf(key)
    const path = addressOf(route, { farmId: world.farmId, ...example.path })
    const bytes = (route.bodyLimit ?? 1_000_000) + 1
    const answer = await start(route, path, example)
      .set('Content-Type', 'application/json')
      .send(`{"name":"${'x'.repeat(bytes)}"}`)
    expect(expectProblem(answer)).toMatchObject({ status: 413, code: 'too_large' })
  })
})

describe.each(named(farmRoutes.filter((route) => route.params)))('$key', ({ route, key }) => {
  it.each([
    '0',
    'nonsense',
    '../../users',
    "' OR 1=1 --",
    '%00',
    '01909090-0000-7000-8000-00000000000z',
    'x'.repeat(5000),
  ])('does not exist for the id %.40s', async (id) => {
    const example = await exampleOf(key)
    const names = [...route.path.matchAll(/:(\w+)/g)].map(([, name]) => name ?? '')
    const ids = Object.fromEntries(
      names.map((name) => [name, name === 'farmId' ? world.farmId : encodeURIComponent(id)]),
    )
    const request = start(route, addressOf(route, ids), example)
    expect(expectProblem(await (example.body ? request.send(example.body) : request)).code).toBe('not_found')
  })
})

describe('addresses', () => {
  it.each([
    ['/api/v1/nothing', 404],
    ['/api/v2/health', 404],
    ['/api', 404],
    ['/api/v1/farms', 404],
    ['/api/v1/farms/nonsense/feeds', 404],
    ['/api/v1/farms/%E0%A4%A/feeds', 404],
    ['/api/v1/HEALTH', 404],
  ])('%s answers %i', async (path, status) => {
    expect(expectProblem(await world.crew.owner.visitor.get(path)).status).toBe(status)
  })

  it.each(named(routes))('$key names the methods it answers', async ({ route }) => {
    const values = Object.fromEntries(
      [...route.path.matchAll(/:(\w+)/g)].map(([, name]) => [name, randomUUID()]),
    )
    const path = addressOf(route, values)
    const answer = await world.crew.owner.visitor.trace(path)
    expect(expectProblem(answer)).toMatchObject({ status: 405, code: 'method_not_allowed' })
    expect(String(answer.headers.allow)).toContain(route.method.toUpperCase())
  })
})

describe('queries', () => {
  it.each([
    ['/feeds?asOf=tomorrow', 'query.asOf'],
    ['/feeds?asOf=2026-02-30', 'query.asOf'],
    ['/feeds?asOf=2026-01-01&asOf=2026-01-02', 'query.asOf'],
    ['/offers?feedId=nonsense', 'query.feedId'],
    ['/offers?asOf[$gt]=2026-01-01&asOf=x', 'query.asOf'],
  ])('%s is refused', async (path, field) => {
    const problem = expectProblem(await world.api.get(path))
    expect(problem.errors?.map((error) => error.path)).toEqual([field])
  })
})

describe('If-Match', () => {
  it.each(['', '1', '"x"', 'W/"1"', '*', '"1", "2"', '"-1"', '"99999999999"'])(
    '%j is no version',
    async (value) => {
      const { id } = await world.api.makeFeed({ name: randomUUID() })
      const answer = await world.crew.owner.visitor
        .patch(world.api.at(`/feeds/${id}`))
        .set('If-Match', value)
        .send({ note: 'x' })
      expect(expectProblem(answer)).toMatchObject({ status: 412, code: 'version_required' })
    },
  )
})

describe('text', () => {
  it.each([
    '’; DROP TABLE feeds; --',
    "Robert'); DELETE FROM feeds",
    '<script>alert(1)</script>',
    '🐑 hay',
    '\u202Ehay',
    '%s %d \\',
  ])('%s comes back letter by letter', async (text) => {
    const name = `${text} ${randomUUID()}`.slice(0, 120)
    const created = await world.api.makeFeed({ name, note: text })
    expect(created).toMatchObject({ name, note: text })
    expect((await world.api.get(`/feeds/${created.id}`)).body).toEqual(created)
  })
})

it('left nothing of the prototypes behind', () => {
  expect(({} as { admin?: boolean }).admin).toBeUndefined()
})
