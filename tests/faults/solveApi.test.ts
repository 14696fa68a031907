import type { Group, Limit, MixDraft, Problem } from '@maslin/shared'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { fileURLToPath } from 'node:url'
import { SolvingPool } from '../../backend/src/solving/pool'
import { startTestApp, type TestApp } from '../support/app'
import {
  addGroup,
  bodyOf,
  ewes,
  firstDraft,
  furnishFarm,
  solve,
  startTestFarm,
  type TestFarm,
} from '../support/farm'

const workerFile = fileURLToPath(new URL('./workers/troubled.mjs', import.meta.url))

describe('solving over the API with workers in trouble', () => {
  let pool: SolvingPool
  let test: TestApp
  let farm: TestFarm

  beforeAll(async () => {
    pool = await SolvingPool.create({ workers: 1, queueLimit: 1, workerFile })
    test = await startTestApp({ solving: pool })
    farm = await furnishFarm(test, pool)
  })
  afterAll(async () => {
    await pool.close()
    await test.close()
  })

  /** A draft whose group is called what the worker shall do. */
  const draftThat = async (order: string): Promise<MixDraft> => {
    const group: Group = await addGroup(farm, ewes(farm, { name: order }))
    return firstDraft(farm, group)
  }
  const ask = async (draft: MixDraft, deadlineMs: number) => {
    const start = performance.now()
    const answer = await farm.owner.post(`${farm.at}/solve`).send({ draft, deadlineMs })
    return { ...answer, status: answer.status, body: answer.body as Problem, ms: performance.now() - start }
  }

  it('answers 503 at the deadline when the solver never returns', async () => {
    const answer = await ask(await draftThat('hang'), 500)
    expect(answer.status).toBe(503)
    expect(answer.body.code).toBe('deadline_passed')
    expect(answer.ms).toBeLessThan(2_500)
  })

  it('answers 503 and when to come back when workers die, and is ready again', async () => {
    const draft = await draftThat('exit')
    const answer = await farm.owner.post(`${farm.at}/solve`).send({ draft }).expect(503)
    expect(answer.body as Problem).toMatchObject({ code: 'not_ready' })
    expect(answer.headers['retry-after']).toBe('1')
    await farm.owner.get('/api/v1/ready').expect(200)
  })

  it('answers 503 at once when too many wait, and every one in time', async () => {
    const draft = await draftThat('hang')
    const answers = await Promise.all(Array.from({ length: 8 }, () => ask(draft, 1_000)))
    const codes = answers.map(({ body }) => body.code)
    expect(codes).toContain('busy')
    expect(new Set(codes)).toEqual(new Set(['busy', 'deadline_passed']))
    for (const { ms } of answers) expect(ms).toBeLessThan(3_500)
  })

  it('answers 500 without the engine’s words when the solver has a fault', async () => {
    const draft = await draftThat('throw')
    const answer = await farm.owner.post(`${farm.at}/solve`).send({ draft }).expect(500)
    expect(answer.body as Problem).toMatchObject({ code: 'internal_error' })
    expect(JSON.stringify(answer.body)).not.toContain('thrown inside')
  })

  it('saves no scenario when there was no answer', async () => {
    const draft = await draftThat('exit')
    await farm.owner.post(`${farm.at}/scenarios`).send({ name: 'Never', draft }).expect(503)
    const { items } = bodyOf<{ items: object[] }>(await farm.owner.get(`${farm.at}/scenarios`), 200)
    expect(items).toEqual([])
  })

  it('lets the next one through when a caller goes away', async () => {
    const hang = await draftThat('hang')
    const quick = await draftThat('wait 1')
    const leaving = farm.owner.post(`${farm.at}/solve`).send({ draft: hang })
    const left = new Promise((resolve) => leaving.end(resolve))
    await new Promise((resolve) => setTimeout(resolve, 300))
    leaving.abort()
    await Promise.race([left, new Promise((resolve) => setTimeout(resolve, 100))])
    // The worker's own answer is no answer of the contract, so it comes out as a fault; what counts is that it came.
    const answer = await ask(quick, 5_000)
    expect(answer.status).toBe(500)
    expect(answer.ms).toBeLessThan(4_000)
  })
})

describe('solving over the API whatever is sent', () => {
  let farm: TestFarm
  let draft: MixDraft

  beforeAll(async () => {
    farm = await startTestFarm()
    draft = await firstDraft(farm, await addGroup(farm))
  })
  afterAll(() => farm.close())

  const extremes: { name: string; change: (given: MixDraft) => object }[] = [
    { name: 'no feeds', change: () => ({ feeds: [] }) },
    { name: 'no limits', change: () => ({ limits: [] }) },
    {
      name: 'two hundred limits',
      change: ({ limits }) => ({
        limits: Array.from({ length: 200 }, (_, index) => ({
          ...(limits[index % limits.length] as Limit),
          id: `limit ${index}`,
        })),
      }),
    },
    {
      name: 'limits that contradict each other',
      change: () => ({
        limits: [
          { id: 'a', kind: 'intake', min: 5 },
          { id: 'b', kind: 'intake', max: 1 },
        ],
      }),
    },
    {
      name: 'a limit out of this world',
      change: () => ({ limits: [{ id: 'a', kind: 'intake', min: 1e9 }] }),
    },
    {
      name: 'a limit next to nothing',
      change: () => ({
        limits: [{ id: 'a', kind: 'nutrient', nutrient: 'selenium', measure: 'perKgDryMatter', max: 1e-12 }],
      }),
    },
    {
      name: 'free feeds',
      change: ({ feeds }) => ({ feeds: feeds.map((feed) => ({ ...feed, pricePerKg: '0' })) }),
    },
    {
      name: 'feeds beyond price',
      change: ({ feeds }) => ({ feeds: feeds.map((feed) => ({ ...feed, pricePerKg: '999999.999999' })) }),
    },
    { name: 'a tiny batch', change: () => ({ basis: 'batch', batchDryMatterKg: 0.1 }) },
    { name: 'a huge batch', change: () => ({ basis: 'batch', batchDryMatterKg: 1e6 }) },
    { name: 'prices of long ago', change: () => ({ pricesAsOf: '1970-01-01' }) },
    {
      name: 'a ratio of a thing to itself',
      change: () => ({
        limits: [{ id: 'a', kind: 'ratio', numerator: 'calcium', denominator: 'calcium', min: 2, max: 3 }],
      }),
    },
  ]

  it.each(extremes)('ends with an answer or a reason: $name', async ({ change }) => {
    const { answer } = await solve(farm, { ...draft, ...change(draft) } as MixDraft)
    expect(['optimal', 'infeasible', 'unbounded', 'stopped', 'invalid']).toContain(answer.status)
    if (answer.status === 'optimal') expect(answer.proof.certified).toBe(true)
  })

  it('ends within the shortest deadline there is', async () => {
    const start = performance.now()
    const { status } = await farm.owner.post(`${farm.at}/solve`).send({ draft, deadlineMs: 50 })
    expect([200, 503]).toContain(status)
    expect(performance.now() - start).toBeLessThan(2_000)
  })
})
