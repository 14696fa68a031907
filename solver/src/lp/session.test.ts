import { describe, expect, it } from 'vitest'
import { loadHighs, LpSession, solveLinearProgram } from '.'
import { instances } from './instances'
import type { LinearProgram } from './types'

const mix = instances.find(({ name }) => name === 'minerals-per-kg')!.lp
const soon = () => performance.now() + 5_000

async function withSession<Result>(
  lp: LinearProgram,
  use: (session: LpSession) => Promise<Result>,
): Promise<Result> {
  const session = await LpSession.open(lp)
  try {
    return await use(session)
  } finally {
    session.dispose()
  }
}

describe('a warm session', () => {
  it('answers every change as a cold solve does', () =>
    withSession(mix, async (session) => {
      for (let k = 0; k < 40; k++) {
        session.setCost(1, 0.05 + 0.02 * k)
        session.setRowBounds(4, 8.5 + 0.05 * k, Infinity)
        session.setColumnBounds(0, 0, 1 - 0.01 * k)
        const warm = session.solve(soon())
        const cold = await solveLinearProgram(session.lp)
        expect(warm.status).toBe(cold.status)
        if (warm.status !== 'optimal' || cold.status !== 'optimal') continue
        expect(warm.certificate.valid).toBe(true)
        expect(warm.objective).toBeCloseTo(cold.objective, 12)
      }
    }))

  it('goes from possible to impossible, with a proof, and back', () =>
    withSession(mix, async (session) => {
      const first = session.solve(soon())
      session.setRowBounds(4, 20, Infinity)
      expect(session.solve(soon())).toMatchObject({ status: 'infeasible', certificate: { valid: true } })
      session.setRowBounds(4, mix.rows[4]!.lower, Infinity)
      const back = session.solve(soon())
      if (first.status !== 'optimal' || back.status !== 'optimal') throw new Error(back.status)
      expect(back.objective).toBeCloseTo(first.objective, 12)
    }))

  it('takes all costs at once and leaves the caller’s program alone', () =>
    withSession(mix, async (session) => {
      session.setCosts(mix.columns.map((_, j) => (j === 2 ? -1e-4 : 0)))
      const outcome = session.solve(soon())
      if (outcome.status !== 'optimal') throw new Error(outcome.status)
      expect(outcome.objective).toBeCloseTo(-1e-4 * outcome.columns[2]!.value, 15)
      expect(mix.columns[2]!.cost).toBe(2.4)
    }))

  it('says when no time is left', () =>
    withSession(mix, async (session) => {
      expect(session.solve(performance.now())).toMatchObject({ status: 'stopped', reason: 'deadline' })
    }))

  it('refuses what is not a linear program', async () => {
    const broken = { ...mix, rows: [...mix.rows, mix.rows[0]!] }
    await expect(LpSession.open(broken)).rejects.toThrow('Two rows are called total')
  })
})

it('keeps the memory of the runtime flat over thousands of sessions and solves', async () => {
  const highs = await loadHighs()
  const use = async (times: number) => {
    for (let k = 0; k < times; k++) {
      await withSession(mix, async (session) => session.solve(soon()))
      await solveLinearProgram(mix)
    }
    return highs.memoryBytes
  }
  // Undisposed models cost 0.9 MB each and kill the runtime after about 2,000.
  const before = await use(200)
  expect(await use(2_500)).toBe(before)
}, 60_000)
