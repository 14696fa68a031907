import { existsSync, mkdtempSync, readFileSync, rmSync, statSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import type {
  Group,
  Mix,
  MixSummary,
  Scenario,
  ScenarioSummary,
  Session,
  WaitingReview,
} from '@maslin/shared'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { loadDemo, type DemoServices, type DemoSignIn } from '../../backend/src/demo/loadDemo'
import { loadBookFeeds } from '../../backend/src/services/bookFeeds'
import { loadRequirementLibrary } from '../../backend/src/services/requirementLibrary'
import { SolvingPool } from '../../backend/src/solving/pool'
import { startTestApp, visit, type TestApp, type Visitor } from '../support/app'
import { bodyOf, draftOf, solve, type TestFarm } from '../support/farm'
import { signUp } from '../support/people'

const noSolver = () => Promise.reject(new Error('no solver'))

describe('the demo farm', () => {
  let test: TestApp
  let pool: SolvingPool
  let services: DemoServices
  let directory: string
  let signIns: DemoSignIn[]

  const at = (session: Session, name: string) => {
    const found = session.memberships.find(({ farm }) => farm.name === name)
    return `/api/v1/farms/${found?.farm.id ?? 'none'}`
  }
  const enter = async (email: string): Promise<{ visitor: Visitor; session: Session }> => {
    const { password } = signIns.find((one) => one.email === email) ?? { password: '' }
    const visitor = visit(test)
    const session = bodyOf<Session>(await visitor.post('/api/v1/auth/sign-in').send({ email, password }), 200)
    return { visitor, session }
  }

  beforeAll(async () => {
    directory = mkdtempSync(join(tmpdir(), 'maslin-demo-'))
    pool = await SolvingPool.create({ workers: 1, queueLimit: 10 })
    test = await startTestApp({ config: { demo: true, dataDirectory: directory }, solving: pool })
    const { config, database } = test
    await loadBookFeeds(database, config.libraryDirectory)
    const requirements = await loadRequirementLibrary(database, config.libraryDirectory)
    services = { config, database, solving: pool, requirements }
    signIns = (await loadDemo(services)) ?? []
  })
  afterAll(async () => {
    await pool.close()
    await test.close()
    rmSync(directory, { recursive: true, force: true })
  })

  it('writes the sign-ins for its owner alone, each with a password of its own', () => {
    const file = join(directory, 'demo-sign-ins.json')
    expect(statSync(file).mode & 0o777).toBe(0o600)
    expect(JSON.parse(readFileSync(file, 'utf8'))).toEqual(signIns)
    const passwords = new Map(signIns.map(({ email, password }) => [email, password]))
    expect(new Set(passwords.values()).size).toBe(passwords.size)
    expect(signIns.map(({ role }) => role)).toEqual(
      expect.arrayContaining(['owner', 'manager', 'hand', 'advisor']) as string[],
    )
  })

  it('lets everyone in, the advisor to two farms', async () => {
    for (const { email, farm, role } of signIns) {
      const { session } = await enter(email)
      expect(session.memberships).toContainEqual(
        expect.objectContaining({ role, farm: expect.objectContaining({ name: farm }) as object }),
      )
    }
    const { session } = await enter('advisor@example.test')
    expect(session.memberships).toHaveLength(2)
  })

  it('has groups with a requirement, and prices over more than a year', async () => {
    const { visitor, session } = await enter('owner@example.test')
    const farm = at(session, 'Harrowgill Farm')
    const { items: groups } = bodyOf<{ items: Group[] }>(await visitor.get(`${farm}/groups`), 200)
    expect(groups.length).toBeGreaterThanOrEqual(5)
    for (const { name, requirement } of groups) expect(requirement, name).toBeDefined()
    const { items: offers } = bodyOf<{ items: { id: string }[] }>(await visitor.get(`${farm}/offers`), 200)
    const prices = await visitor.get(`${farm}/offers/${offers[0]?.id ?? ''}/prices`)
    const dates = bodyOf<{ items: { date: string }[] }>(prices, 200).items.map(({ date }) => date)
    const days = (Date.parse(dates[0] ?? '') - Date.parse(dates.at(-1) ?? '')) / 86_400_000
    expect(days).toBeGreaterThan(365)
  })

  it('solves every mix it has saved', async () => {
    for (const [email, name] of [
      ['owner@example.test', 'Harrowgill Farm'],
      ['neighbour@example.test', 'Skelderbeck Croft'],
    ] as const) {
      const { visitor, session } = await enter(email)
      const farm = { owner: visitor, at: at(session, name) } as TestFarm
      const { items } = bodyOf<{ items: MixSummary[] }>(await visitor.get(`${farm.at}/mixes`), 200)
      for (const { id, name: mix } of items) {
        const draft = draftOf(bodyOf<Mix>(await visitor.get(`${farm.at}/mixes/${id}`), 200))
        const { answer } = await solve(farm, draft)
        expect(answer.status, `${mix}: ${JSON.stringify(answer)}`).toBe('optimal')
      }
    }
  })

  it('has scenarios in every state of their life', async () => {
    const { visitor, session } = await enter('manager@example.test')
    const farm = at(session, 'Harrowgill Farm')
    const { items } = bodyOf<{ items: ScenarioSummary[] }>(await visitor.get(`${farm}/scenarios`), 200)
    expect(new Set(items.map(({ latest }) => latest.state))).toEqual(
      new Set(['draft', 'submitted', 'approved', 'returned']),
    )
    const revised = items.find(({ revisionCount }) => revisionCount > 1)
    const scenario = bodyOf<Scenario>(await visitor.get(`${farm}/scenarios/${revised?.id ?? ''}`), 200)
    expect(scenario.revisions.map(({ state }) => state)).toEqual(['returned', 'approved'])
    expect(scenario.comments.map(({ kind }) => kind)).toEqual([
      'submitted',
      'returned',
      'submitted',
      'approved',
    ])
  })

  it('has reviews waiting for the advisor on both farms', async () => {
    const { visitor } = await enter('advisor@example.test')
    const { items } = bodyOf<{ items: WaitingReview[] }>(await visitor.get('/api/v1/reviews'), 200)
    expect(new Set(items.map(({ farm }) => farm.name))).toEqual(
      new Set(['Harrowgill Farm', 'Skelderbeck Croft']),
    )
  })

  it('is loaded once: a second start changes nothing, nor does one with accounts of its own', async () => {
    const before = readFileSync(join(directory, 'demo-sign-ins.json'), 'utf8')
    const users = await test.database.models.users.count()
    expect(await loadDemo(services)).toBeUndefined()
    expect(await test.database.models.users.count()).toBe(users)
    expect(readFileSync(join(directory, 'demo-sign-ins.json'), 'utf8')).toBe(before)
  })

  it('is loaded once where two servers start together', async () => {
    const other = await startTestApp({
      config: { demo: true, dataDirectory: join(directory, 'two') },
      solving: pool,
    })
    try {
      await loadBookFeeds(other.database, other.config.libraryDirectory)
      const given = { ...services, config: other.config, database: other.database }
      const loaded = await Promise.all([loadDemo(given), loadDemo(given)])
      expect(loaded.filter(Boolean)).toHaveLength(1)
      expect(await other.database.models.users.count()).toBe(new Set(signIns.map(({ email }) => email)).size)
    } finally {
      await other.close()
    }
  })

  it('leaves nothing behind where it fails midway, so that the next start begins anew', async () => {
    const dataDirectory = join(directory, 'half')
    const other = await startTestApp({ config: { demo: true, dataDirectory } })
    try {
      await loadBookFeeds(other.database, other.config.libraryDirectory)
      const solving = { ready: () => Promise.resolve(true), traceCurve: noSolver, solveMix: noSolver }
      const given = { ...services, config: other.config, database: other.database, solving }
      await expect(loadDemo(given)).rejects.toThrow('no solver')
      expect(await other.database.models.users.count()).toBe(0)
      expect(existsSync(join(dataDirectory, 'demo-sign-ins.json'))).toBe(false)
    } finally {
      await other.close()
    }
  })

  it('stays away where it is turned off or somebody is there already', async () => {
    const other = await startTestApp({ solving: pool })
    try {
      const { requirements } = services
      const given = {
        ...services,
        config: { ...other.config, demo: false },
        database: other.database,
        requirements,
      }
      expect(await loadDemo(given)).toBeUndefined()
      await signUp(other, 'first')
      expect(await loadDemo({ ...given, config: { ...other.config, demo: true } })).toBeUndefined()
    } finally {
      await other.close()
    }
  })

  it('names the farm in every statement', () => {
    expect(test.scopeViolations).toEqual([])
  })
})
