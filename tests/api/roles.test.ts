import { actions, may, roles, type Action } from '@maslin/shared'
import { QueryTypes } from 'sequelize'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { routes } from '../../backend/src/routes'
import type { Route } from '../../backend/src/routes/route'
import { visit, type Visitor } from '../support/app'
import { examples, keyOf, type ExampleCall } from '../support/routeExamples'
import { makeWorld, type World } from '../support/world'

const isAction = (access: string): access is Action => (actions as readonly string[]).includes(access)
const farmRoutes = routes
  .filter((route) => isAction(route.access))
  .map((route) => ({ route, key: keyOf(route) }))

/** These answer a question without changing anything, though they are posted. */
const questions = new Set([
  'POST /farms/:farmId/price-imports/preview',
  'POST /farms/:farmId/groups/requirement',
  'POST /farms/:farmId/solve',
  'POST /farms/:farmId/solve/curve',
])
const changesSomething = ({ route, key }: { route: Route; key: string }) =>
  route.method !== 'get' && !questions.has(key)

let world: World
beforeAll(async () => {
  world = await makeWorld()
})
afterAll(() => world.close())

/** Calls the route with its example. */
async function call(visitor: Visitor, route: Route, example: ExampleCall, farmId = world.farmId) {
  const values: Record<string, string> = { farmId, ...example.path }
  const path = route.path.replace(/:(\w+)/g, (_, name: string) => values[name] ?? `missing-${name}`)
  const request = visitor[route.method](`/api/v1${path}`).query(example.query ?? {})
  if (example.version !== undefined) request.set('If-Match', `"${example.version}"`)
  for (const [name, value] of Object.entries(example.headers ?? {})) request.set(name, value)
  return example.body ? request.send(example.body) : request
}

async function exampleOf(key: string): Promise<ExampleCall> {
  const example = examples[key]
  if (!example) throw new Error(`no example for ${key}: add one to tests/support/routeExamples.ts`)
  return example(world)
}

async function auditCount(): Promise<number> {
  const [row] = await world.test.database.sequelize.query<{ count: number }>(
    'SELECT COUNT(*) AS count FROM audit_events WHERE farm_id = :farmId',
    { replacements: { farmId: world.farmId }, type: QueryTypes.SELECT },
  )
  return row?.count ?? 0
}

describe.each(farmRoutes)('$key', ({ route, key }) => {
  it.each(roles)('answers the %s as the permission table says', async (role) => {
    const example = await exampleOf(key)
    const before = await auditCount()
    const answer = await call(world.crew[role].visitor, route, example)
    if (may(role, route.access as Action)) {
      expect(answer.status, JSON.stringify(answer.body)).toBeLessThan(300)
      if (changesSomething({ route, key })) expect(await auditCount()).toBeGreaterThan(before)
    } else {
      expect(answer.status).toBe(403)
      expect(answer.body).toMatchObject({ code: 'not_allowed' })
      expect(await auditCount()).toBe(before)
    }
  })

  it('does not exist for a stranger, and asks who is calling first', async () => {
    const example = await exampleOf(key)
    const before = await auditCount()
    const stranger = await call(world.crew.stranger.visitor, route, example)
    expect(stranger.status).toBe(404)
    expect(stranger.body).toMatchObject({ code: 'not_found' })
    expect((await call(visit(world.test), route, example)).status).toBe(401)
    expect(await auditCount()).toBe(before)
  })
})

describe.each(farmRoutes.filter(({ route }) => route.params))('$key', ({ route, key }) => {
  it('does not know the ids of another farm', async () => {
    const example = await exampleOf(key)
    const { stranger } = world.crew
    const visitor = await visitorWhoMay(route.access as Action)
    const before = await auditCount()
    const answer = await call(visitor, route, example, stranger.farmId)
    expect(answer.status, JSON.stringify(answer.body)).toBe(404)
    expect(await auditCount()).toBe(before)
  })
})

describe.each(farmRoutes.filter(({ route }) => route.current))('$key', ({ route, key }) => {
  it('asks for the version, and refuses one that is not the latest', async () => {
    const example = await exampleOf(key)
    const role = roles.find((it) => may(it, route.access as Action)) ?? 'owner'
    const { visitor } = world.crew[role]
    const { version, ...without } = example
    expect((await call(visitor, route, without)).body).toMatchObject({
      status: 412,
      code: 'version_required',
    })
    const stale = await call(visitor, route, { ...example, version: (version ?? 0) + 7 })
    expect(stale.body).toMatchObject({ status: 409, code: 'stale_version', current: { version } })
  })
})

/** The stranger on their own farm, or somebody who advises it, where only an advisor may. */
async function visitorWhoMay(action: Action): Promise<Visitor> {
  const { stranger, advisor } = world.crew
  if (may('owner', action)) return stranger.visitor
  await stranger.visitor
    .post(`/api/v1/farms/${stranger.farmId}/members`)
    .send({ email: advisor.email, role: 'advisor' })
  return advisor.visitor
}

describe('all routes', () => {
  it('have an example, and every example a route', () => {
    expect(Object.keys(examples).sort()).toEqual(farmRoutes.map(({ key }) => key).sort())
  })

  it('about a farm stand under it, and the others do not', () => {
    for (const { path, access } of routes) {
      expect(path.startsWith('/farms/:farmId'), `${path} is ${access}`).toBe(isAction(access))
    }
  })

  it.each(
    routes.filter((route) => route.access === 'signedIn').map((route) => ({ route, key: keyOf(route) })),
  )('$key asks who is calling', async ({ route }) => {
    expect((await call(visit(world.test), route, {})).status).toBe(401)
    expect((await call(world.crew.hand.visitor, route, {})).status).toBe(200)
  })

  it('never touched a farm’s table without naming the farm', () =>
    expect(world.test.scopeViolations).toEqual([]))
})
