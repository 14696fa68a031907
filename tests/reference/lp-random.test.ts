import { beforeAll, describe, expect, it } from 'vitest'
import {
  findConflict,
  marginalPrices,
  secondOpinion,
  solveLinearProgram,
  type LinearProgram,
  type MarginalPrice,
  type OptimalOutcome,
} from '@maslin/solver'
import { bareHighs } from './lp-bare-highs'
import { requireGlpsol, solveWithGlpsol, type GlpkSolution } from './lp-glpk'
import { claimed, stepWithin, withLimit } from './lp-one-sided'
import { FAMILIES, randomMix, randomMixes } from './lp-random'

/**
 * Seeded random mix problems in six families (plain, degenerate, infeasible, badly scaled, ratios, bounded), about one
 * in six impossible. Pass lines: for every problem the least cost within 1e-6 relative of GLPK and of a bare HiGHS
 * call, every price that is the only one likewise; of the others both sides, by differences of GLPK's least cost.
 */

const PROBLEMS = 1000
const RELATIVE = 1e-6
const PRICED = 75

beforeAll(requireGlpsol)

interface Counts {
  /** One-sided differences compared. */
  checked: number
  /** Moves said to be impossible and proved so. */
  impossible: number
}

/** Both one-sided prices of a limit against GLPK's least cost with the limit moved. */
async function checkBothWays(
  lp: LinearProgram,
  least: number,
  price: MarginalPrice,
  name: string,
  counts: Counts,
): Promise<void> {
  for (const direction of [1, -1] as const) {
    const step = stepWithin(price, direction)
    if (step === null) {
      const move = direction > 0 ? price.more : price.less
      if (move !== 'impossible') continue
      // By a checked proof, not by GLPK: its tolerance is absolute, and some of these limits are 1e-6.
      const size = Math.max(Math.abs(price.limit), Math.abs(price.activity))
      const beyond = withLimit(lp, price, price.limit + direction * 1e-3 * (size || 1))
      expect((await solveLinearProgram(beyond)).status, name).toBe('infeasible')
      counts.impossible++
      continue
    }
    const { status, objective } = await solveWithGlpsol(withLimit(lp, price, price.limit + step))
    if (status !== 'optimal') throw new Error(`${name}: impossible inside the range`)
    const expected = least + claimed(price, direction) * step
    expect(Math.abs(objective - expected), name).toBeLessThanOrEqual(1e-8 * Math.abs(least))
    counts.checked++
  }
}

/** Σ|a·x|: what a row's price is measured against, also where its limit is zero. */
const sizeOf = ({ entries }: LinearProgram['rows'][number], { columns }: OptimalOutcome): number =>
  entries.reduce((sum, [j, value]) => sum + Math.abs(value * columns[j]!.value), 0)

describe(`${PROBLEMS} random mixes`, () => {
  const mixes = randomMixes(PROBLEMS)
  let references: GlpkSolution[]
  beforeAll(async () => {
    references = await Promise.all(mixes.map(({ lp }) => solveWithGlpsol(lp)))
  }, 120_000)

  it('have the least cost, or the impossibility, that GLPK and a bare HiGHS call find, and none hangs', async () => {
    const bare = await bareHighs()
    const counts = { optimal: 0, infeasible: 0, unknown: 0 }
    try {
      for (const [k, { seed, family, lp }] of mixes.entries()) {
        const name = `${family} ${seed}`
        const glpk = references[k]!
        const ours = await solveLinearProgram(lp)
        const highs = bare.solve(lp)
        expect(ours.status, name).toBe(glpk.status)
        // A bare call ends now and then as "unknown"; what we make of such a problem GLPK has judged above.
        if (highs.status === 'unknown') counts.unknown++
        else expect(ours.status, name).toBe(highs.status)
        if (ours.status === 'optimal') {
          const close = (value: number) =>
            expect(Math.abs(ours.objective - value), name).toBeLessThanOrEqual(RELATIVE * Math.abs(value))
          close(glpk.objective)
          if (highs.status === 'optimal') close(highs.objective)
          counts.optimal++
        } else counts.infeasible++
        if (!('certificate' in ours)) throw new Error(`${name} has no certificate`)
        expect(ours.certificate.failures, name).toEqual([])
      }
    } finally {
      bare.dispose()
    }
    expect(counts.optimal).toBeGreaterThan(800)
    expect(counts.infeasible).toBeGreaterThan(150)
    expect(counts.unknown).toBeLessThan(40)
  })

  it('have the prices that GLPK finds where they are unique, else those its one-sided differences show', async () => {
    const counts = { unique: 0, checked: 0, impossible: 0 }
    const differences: Promise<void>[] = []
    for (const [k, { seed, family, lp }] of mixes.entries()) {
      const ours = await solveLinearProgram(lp)
      if (ours.status !== 'optimal') continue
      const rows = new Map(lp.rows.map((row, i) => [row.id, i]))
      for (const price of await marginalPrices(lp, ours)) {
        if (!price.binding) continue
        const name = `${family} ${seed}, ${price.row} ${price.side}`
        if (price.differs) {
          differences.push(checkBothWays(lp, ours.objective, price, name, counts))
          continue
        }
        const i = rows.get(price.row)!
        const { dual } = references[k]!.rows[i]!
        // What is left of a price of nothing: rounding of the cost over the whole row.
        const rounding = (1e-12 * Math.abs(ours.objective)) / sizeOf(lp.rows[i]!, ours)
        for (const direction of [1, -1] as const)
          expect(Math.abs(claimed(price, direction) - dual), name).toBeLessThanOrEqual(
            RELATIVE * Math.abs(dual) + rounding,
          )
        counts.unique++
      }
    }
    await Promise.all(differences)
    expect(counts.unique).toBeGreaterThan(5000)
    expect(counts.checked).toBeGreaterThan(500)
    expect(counts.impossible).toBeGreaterThan(500)
  })

  it('are answered alike by javascript-lp-solver, which may give up but is never wrong', async () => {
    let gaveUp = 0
    for (const { seed, family, lp } of mixes) {
      const opinion = await secondOpinion(lp, await solveLinearProgram(lp))
      if (opinion.agrees === null) gaveUp++
      else expect(opinion.agrees, `${family} ${seed}: ${opinion.note}`).toBe(true)
    }
    expect(gaveUp).toBeLessThanOrEqual(5)
  })
})

describe.each(FAMILIES.filter((family) => family !== 'infeasible'))('prices of the family "%s"', (family) => {
  it('are those that one-sided differences of GLPK show, and hold as far as they say', async () => {
    const counts = { checked: 0, impossible: 0, ends: 0, bends: 0 }
    const checkMix = async (seed: number) => {
      const lp = randomMix(seed, family)
      const outcome = await solveLinearProgram(lp)
      if (outcome.status !== 'optimal') throw new Error(`${family} ${seed} is ${outcome.status}`)
      const least = outcome.objective
      const cost = async (program: LinearProgram) => {
        const { status, objective } = await solveWithGlpsol(program)
        return status === 'optimal' ? objective : null
      }
      const binding = (await marginalPrices(lp, outcome)).filter((price) => price.binding)
      const check = async (price: MarginalPrice) => {
        const name = `${family} ${seed}, ${price.row} ${price.side}`
        await checkBothWays(lp, least, price, name, counts)
        for (const direction of [1, -1] as const)
          if (stepWithin(price, direction) !== null && (await bendsBeyond(price, direction))) counts.bends++
        async function bendsBeyond(p: MarginalPrice, direction: 1 | -1): Promise<boolean> {
          const move = direction > 0 ? p.more : p.less
          if (move === 'impossible') return false
          const end = 'upTo' in move ? move.upTo : move.downTo
          if (!Number.isFinite(end)) return false
          counts.ends++
          // Twice as far as the price claims: by then the cost must have left the straight line.
          const far = end + (end - p.limit)
          const moved = await cost(withLimit(lp, p, far))
          if (moved === null) return true
          const straight = least + move.price * (far - p.limit)
          expect(moved, `${name} beyond ${end}`).toBeGreaterThan(straight - 1e-8 * Math.abs(straight))
          return moved > straight + 1e-9 * Math.abs(straight)
        }
      }
      await Promise.all(binding.map(check))
    }
    await Promise.all(Array.from({ length: PRICED / (FAMILIES.length - 1) }, (_, k) => checkMix(k + 1)))
    expect(counts.checked).toBeGreaterThan(100)
    expect(counts.ends).toBeGreaterThan(100)
    expect(counts.bends).toBe(counts.ends)
  })
})

describe('conflicts of impossible mixes', () => {
  it('cannot hold together, and any member dropped makes the rest possible, as GLPK confirms', async () => {
    const sizes = new Map<number, number>()
    for (let seed = 1; seed <= 60; seed++) {
      const lp = randomMix(seed, 'infeasible')
      const conflict = await findConflict(lp, { keep: ['total'] })
      expect(conflict).toMatchObject({ found: true, keptAloneInfeasible: false })
      const only = (dropped?: string): LinearProgram => {
        const holds = (row: string, side: string) =>
          conflict.members.some((member) => member.row === row && member.side === side) &&
          `${row} ${side}` !== dropped
        return {
          columns: lp.columns,
          rows: lp.rows.map((row) => {
            if (row.id === 'total') return row
            const equal = row.lower === row.upper
            return {
              ...row,
              lower: holds(row.id, equal ? 'equal' : 'lower') ? row.lower : -Infinity,
              upper: holds(row.id, equal ? 'equal' : 'upper') ? row.upper : Infinity,
            }
          }),
        }
      }
      expect((await solveWithGlpsol(only())).status, `seed ${seed}`).toBe('infeasible')
      for (const { row, side } of conflict.members)
        expect((await solveWithGlpsol(only(`${row} ${side}`))).status, `seed ${seed} without ${row}`).toBe(
          'optimal',
        )
      sizes.set(conflict.members.length, (sizes.get(conflict.members.length) ?? 0) + 1)
    }
    expect([...sizes.keys()].sort()).toEqual(expect.arrayContaining([1, 2, 3]))
  })
})
