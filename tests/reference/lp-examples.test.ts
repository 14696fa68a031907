import { existsSync } from 'node:fs'
import { beforeAll, describe, expect, it } from 'vitest'
import { marginalPrices, solveLinearProgram, type MarginalPrice } from '@maslin/solver'
import { bareHighs } from './lp-bare-highs'
import { readProblem, requireGlpsol, solveFile, solveWithGlpsol } from './lp-glpk'
import { claimed, stepWithin, withLimit } from './lp-one-sided'

/**
 * The example problems of Debian's package glpk-utils 5.0, read by glpsol itself: least cost and prices against GLPK
 * and against a bare HiGHS call.
 */

const EXAMPLES = '/usr/share/doc/glpk-utils/examples'
const RELATIVE = 1e-6
/** At most this many limits of a problem are differenced: the largest has hundreds. */
const DIFFERENCED = 80

interface Example {
  file: string
  /** The objective printed in the file or by glpsol 5.0, where known beforehand. */
  published?: number
}

const examples: Example[] = [
  { file: 'stigler.mod', published: 0.1086622782 },
  { file: 'diet.mod', published: 0.1381709355 },
  { file: 'food.mod' },
  { file: 'plan.mod', published: 296.2166065 },
  { file: 'plan.mps', published: 296.2166065 },
  { file: 'alloy.mps', published: 2149.247891 },
  { file: 'icecream.mps', published: 962.8214691 },
  { file: 'furnace.mps', published: 2141.923551 },
  { file: 'transp.mod', published: 153.675 },
  { file: 'egypt.mod' },
  { file: 'prod.mod' },
  { file: 'dist.mod' },
]

beforeAll(async () => {
  await requireGlpsol()
  if (!existsSync(`${EXAMPLES}/stigler.mod`))
    throw new Error(
      `The example problems of glpk-utils are not in ${EXAMPLES}. Install them: apt-get install -y --reinstall ` +
        'glpk-utils (an image that leaves out documentation must allow /usr/share/doc/glpk-utils).',
    )
})

describe.each(examples)('$file', ({ file, published }) => {
  const args = [file.endsWith('.mps') ? '--mps' : '-m', `${EXAMPLES}/${file}`]

  it('has the least cost that GLPK and a bare HiGHS call find', async () => {
    const { lp, maximises, constant } = await readProblem(args)
    const sign = maximises ? -1 : 1
    const ours = await solveLinearProgram(lp)
    if (ours.status !== 'optimal') throw new Error(ours.status)
    expect(ours.engine).toBe('highs')
    expect(ours.certificate.failures).toEqual([])
    const objective = sign * ours.objective + constant
    const glpk = await solveFile(args)
    expect(glpk.status).toBe('optimal')
    const close = (value: number) =>
      expect(Math.abs(objective - value)).toBeLessThanOrEqual(RELATIVE * Math.abs(value))
    close(glpk.objective)
    if (published !== undefined) close(published)
    const bare = await bareHighs()
    try {
      const answer = bare.solve(lp)
      expect(answer.status).toBe('optimal')
      close(sign * answer.objective + constant)
    } finally {
      bare.dispose()
    }
  })

  it('has the prices of GLPK where they are unique, else both sides that one-sided differences show', async () => {
    const { lp } = await readProblem(args)
    const ours = await solveLinearProgram(lp)
    if (ours.status !== 'optimal') throw new Error(ours.status)
    const glpk = await solveWithGlpsol(lp)
    const prices = await marginalPrices(lp, ours, { deadlineMs: 60_000 })
    const position = new Map(lp.rows.map((row, i) => [row.id, i]))
    let unique = 0
    for (const price of prices) {
      if (price.differs || !price.binding) continue
      const i = position.get(price.row)!
      const { dual } = glpk.rows[i]!
      const size = lp.rows[i]!.entries.reduce((sum, [j, a]) => sum + Math.abs(a * ours.columns[j]!.value), 0)
      // What is left of a price of nothing: rounding of the cost over the whole row.
      const rounding = (1e-12 * Math.abs(ours.objective)) / size
      for (const direction of [1, -1] as const)
        expect(Math.abs(claimed(price, direction) - dual), price.row).toBeLessThanOrEqual(
          RELATIVE * Math.abs(dual) + rounding,
        )
      unique++
    }
    const doubtful = prices.filter((price) => price.differs).slice(0, DIFFERENCED)
    let differenced = 0
    const difference = async (price: MarginalPrice, direction: 1 | -1) => {
      const step = stepWithin(price, direction)
      if (step === null) return
      const moved = await solveWithGlpsol(withLimit(lp, price, price.limit + step))
      expect(moved.status, `${price.row} ${direction}`).toBe('optimal')
      const slope = (moved.objective - glpk.objective) / step
      const noise = (1e-8 * Math.abs(glpk.objective)) / Math.abs(step)
      expect(Math.abs(slope - claimed(price, direction)), `${price.row} ${direction}`).toBeLessThanOrEqual(
        1e-6 * Math.abs(slope) + noise,
      )
      differenced++
    }
    await Promise.all(doubtful.flatMap((price) => [difference(price, 1), difference(price, -1)]))
    expect(unique + differenced).toBeGreaterThan(0)
  })
})
