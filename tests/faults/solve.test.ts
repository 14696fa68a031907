import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import type { FormulationInput } from '@maslin/shared'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { SolvingPool } from '../../backend/src/solving/pool'

const workerFile = fileURLToPath(new URL('./workers/troubled.mjs', import.meta.url))
/** The troubled worker reads only what it is to do. */
const order = (name: string, more: object = {}) => ({ name, ...more }) as unknown as FormulationInput

interface Timed {
  value?: unknown
  error?: unknown
  ms: number
}

const timed = async (work: Promise<unknown>): Promise<Timed> => {
  const start = performance.now()
  try {
    const value = await work
    return { value, ms: performance.now() - start }
  } catch (error) {
    return { error, ms: performance.now() - start }
  }
}

describe('solving pool under trouble', () => {
  let pool: SolvingPool
  let crashes: Error[]
  let directory: string

  const solve = (name: string, deadlineMs = 5_000, more: object = {}, signal?: AbortSignal) =>
    pool.solveMix(order(name, more), false, { deadlineMs, signal })

  beforeEach(async () => {
    crashes = []
    directory = mkdtempSync(join(tmpdir(), 'maslin-pool-'))
    pool = await SolvingPool.create({
      workers: 1,
      queueLimit: 2,
      workerFile,
      onCrash: (error) => crashes.push(error),
    })
  })
  afterEach(async () => {
    await pool.close()
    rmSync(directory, { recursive: true, force: true })
  })

  it('ends an endless loop at its deadline and solves the next one', async () => {
    const { error, ms } = await timed(solve('hang', 400))
    expect(error).toMatchObject({ failure: 'deadline' })
    expect(ms).toBeLessThan(3_000)
    await expect(solve('next')).resolves.toMatchObject({ echo: 'next' })
  })

  it('lets one who waits behind an endless loop leave at their own deadline', async () => {
    const loop = timed(solve('hang', 2_500))
    const { error, ms } = await timed(solve('behind', 200))
    expect(error).toMatchObject({ failure: 'deadline' })
    expect(ms).toBeLessThan(2_000)
    expect((await loop).error).toMatchObject({ failure: 'deadline' })
  })

  it('serves the one behind an endless loop when there is time for both', async () => {
    const loop = timed(solve('hang', 300))
    await expect(solve('behind', 5_000)).resolves.toMatchObject({ echo: 'behind' })
    expect((await loop).error).toMatchObject({ failure: 'deadline' })
  })

  it('refuses at once when the line is full', async () => {
    const running = timed(solve('wait', 10_000, { ms: 1_500 }))
    const waiting = [timed(solve('a')), timed(solve('b'))]
    expect(pool.waiting).toBe(2)
    const { error, ms } = await timed(solve('c'))
    expect(error).toMatchObject({ failure: 'busy' })
    expect(ms).toBeLessThan(500)
    expect((await running).error).toBeUndefined()
    for (const one of await Promise.all(waiting)) expect(one.error).toBeUndefined()
    await expect(solve('later')).resolves.toMatchObject({ echo: 'later' })
  })

  it('tries once more when a worker dies, then says so', async () => {
    await expect(solve('exitOnce', 5_000, { marker: join(directory, 'died') })).resolves.toBe('second try')
    expect(crashes).toHaveLength(1)
    await expect(solve('exit')).rejects.toMatchObject({ failure: 'crashed' })
    expect(crashes).toHaveLength(3)
    await expect(solve('next')).resolves.toMatchObject({ echo: 'next' })
  })

  it('survives an error outside of any promise', async () => {
    await expect(solve('uncaught')).rejects.toMatchObject({ failure: 'crashed' })
    await expect(solve('next')).resolves.toMatchObject({ echo: 'next' })
  })

  it('survives a worker that eats all its memory', async () => {
    const { error } = await timed(solve('memory', 20_000))
    expect(['crashed', 'deadline']).toContain((error as { failure: string }).failure)
    await expect(solve('next')).resolves.toMatchObject({ echo: 'next' })
  }, 40_000)

  it('does not repeat work whose error was thrown by the solver itself', async () => {
    await expect(solve('throw')).rejects.toMatchObject({ failure: 'failed' })
    expect(crashes).toHaveLength(0)
  })

  it('lets go of one who goes away, waiting or running, and frees the worker', async () => {
    const away = new AbortController()
    const loop = timed(solve('hang', 10_000, {}, away.signal))
    const leaver = new AbortController()
    const left = timed(solve('waiting', 10_000, {}, leaver.signal))
    leaver.abort()
    expect(await left).toMatchObject({ error: { failure: 'cancelled' } })
    expect(pool.waiting).toBe(0)
    away.abort()
    expect(await loop).toMatchObject({ error: { failure: 'cancelled' } })
    const { value, ms } = await timed(solve('next', 5_000))
    expect(value).toMatchObject({ echo: 'next' })
    expect(ms).toBeLessThan(4_000)
  })

  it('gives the worker a little less than the time that is left', async () => {
    const { deadlineMs } = (await solve('echo', 2_000)) as unknown as { deadlineMs: number }
    expect(deadlineMs).toBeGreaterThan(1_000)
    expect(deadlineMs).toBeLessThan(1_900)
  })

  it('warms every worker up', async () => {
    await expect(pool.warmUp()).resolves.toBe(true)
    await pool.close()
    await expect(pool.warmUp()).resolves.toBe(false)
  })

  it('is ready after a crash, and sends everyone away on closing', async () => {
    await timed(solve('exit'))
    await expect(pool.ready()).resolves.toBe(true)
    const running = timed(solve('hang', 10_000))
    const waiting = timed(solve('a', 10_000))
    await pool.close()
    expect((await waiting).error).toMatchObject({ failure: 'closed' })
    expect((await running).error).toMatchObject({ failure: 'closed' })
    await expect(solve('late')).rejects.toMatchObject({ failure: 'closed' })
  })
})
