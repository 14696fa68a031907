import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import {
  buyInCosts,
  costWindows,
  marginalPrices,
  secondOpinion,
  solveLinearProgram,
  type LinearProgram,
  type OptimalOutcome,
} from '@maslin/solver'

/** Linear programs with published answers; each source stands in its data file or beside the figures. */

const data = (file: string) => readFileSync(new URL(`data/${file}`, import.meta.url), 'utf8')

async function optimum(lp: LinearProgram): Promise<OptimalOutcome> {
  const outcome = await solveLinearProgram(lp)
  if (outcome.status !== 'optimal') throw new Error(outcome.status)
  expect(outcome.certificate.failures).toEqual([])
  expect(await secondOpinion(lp, outcome)).toMatchObject({ agrees: true })
  return outcome
}

/** Equal to the digits printed: half a unit of the last of `digits` significant digits. */
function expectPrinted(value: number, printed: number, digits: number, name: string): void {
  const unit = printed === 0 ? 1e-9 : 10 ** (Math.floor(Math.log10(Math.abs(printed))) + 1 - digits)
  expect(Math.abs(value - printed), `${name}: ${value} for ${printed}`).toBeLessThanOrEqual(0.51 * unit)
}

describe('the minimum-cost diet of 1945', () => {
  // G. J. Stigler, The Cost of Subsistence, Journal of Farm Economics 27 (1945) 303-314, prices of August 1939. Nutrients
  // are per dollar of food, so that amounts are dollars a day. Optimum as in stigler.mod of Debian's glpk-utils 5.0.
  const [header, ...lines] = data('minimum-cost-diet-1945.csv').trim().split('\n')
  const table = lines.map((line) => line.split(','))
  const nutrients = header!.split(',').slice(3)
  const foods = table.slice(0, -1)
  const allowance = table[table.length - 1]!
  const lp: LinearProgram = {
    columns: foods.map(([id]) => ({ id: id!, cost: 1, lower: 0, upper: Infinity })),
    rows: nutrients.map((id, k) => ({
      id,
      lower: Number(allowance[k + 3]),
      upper: Infinity,
      entries: foods.map((food, j): [number, number] => [j, Number(food[k + 3])]),
    })),
  }

  it('is a program of 77 foods and 9 nutrients', () => {
    expect(lp.columns).toHaveLength(77)
    expect(lp.rows).toHaveLength(9)
    expect(allowance[0]).toBe('Daily allowance')
  })

  it('costs 0.1086622782 dollars a day, 39.66 a year', async () => {
    const { objective } = await optimum(lp)
    expectPrinted(objective, 0.1086622782, 10, 'least cost')
    expectPrinted(objective * 365, 39.66, 4, 'a year of 365 days')
    expectPrinted(objective * 365.25, 39.69, 4, 'a year of 365.25 days')
  })

  it('is flour, liver, cabbage, spinach and navy beans', async () => {
    const { columns } = await optimum(lp)
    const used = columns.flatMap(({ value }, j) =>
      value > 0 ? [[lp.columns[j]!.id, value * 365] as const] : [],
    )
    // Dollars a year of 365 days.
    const published = [
      ['flour', 10.77],
      ['liver', 0.69],
      ['cabbage', 4.09],
      ['spinach', 1.83],
      ['navy beans', 22.28],
    ] as const
    expect(used).toHaveLength(published.length)
    published.forEach(([name, dollars], k) => {
      expect(used[k]![0].toLowerCase()).toContain(name)
      expect(Math.abs(used[k]![1] - dollars)).toBeLessThanOrEqual(0.006)
    })
  })

  it('has the published prices of its nutrients, the same both ways', async () => {
    const outcome = await optimum(lp)
    const published: Record<string, number> = {
      energy_1000kcal_per_dollar: 0.00876515,
      calcium_g_per_dollar: 0.03173771,
      vitamin_a_1000iu_per_dollar: 0.00040023,
      riboflavin_mg_per_dollar: 0.01635803,
      ascorbic_acid_mg_per_dollar: 0.00014412,
    }
    /** Supplied beyond need, with the digits printed. */
    const supply: Record<string, [number, number]> = {
      protein_g_per_dollar: [147.41, 5],
      iron_mg_per_dollar: [60.47, 4],
      thiamine_mg_per_dollar: [4.12, 4],
      niacin_mg_per_dollar: [27.316, 5],
    }
    for (const price of await marginalPrices(lp, outcome)) {
      const { more, less } = price
      if (more === 'impossible' || less === 'impossible') throw new Error(price.row)
      expect(price.differs).toBe(false)
      expect(Math.abs(more.price - (published[price.row] ?? 0))).toBeLessThanOrEqual(5.1e-9)
      expect(less.price).toBeCloseTo(more.price, 12)
      const supplied = supply[price.row]
      if (supplied) {
        expectPrinted(price.activity, ...supplied, price.row)
        expect(price).toMatchObject({
          binding: false,
          more: { upTo: price.activity },
          less: { downTo: -Infinity },
        })
      }
    }
  })

  it('is 0.345 per cent dearer without liver', async () => {
    const { objective } = await optimum(lp)
    const without = { ...lp, columns: lp.columns.map((c) => (/liver/i.test(c.id) ? { ...c, upper: 0 } : c)) }
    expect(((await optimum(without)).objective / objective - 1) * 100).toBeCloseTo(0.345, 3)
  })
})

interface Published {
  title: string
  source: string
  columns: { id: string; cost: number }[]
  rows: { id: string; lower?: number; upper?: number; entries: [number, number][] }[]
  published: {
    objective: number
    tolerance: number
    amounts: Record<string, number>
    prices: Record<string, number>
    reducedCosts?: Record<string, number>
    costRanges?: Record<string, [number, number]>
    buyIn?: Record<string, number>
    limitRanges?: Record<string, [number, number]>
    slacks?: Record<string, number>
  }
}

const files = ['lp-twenty-foods-equality.json', 'lp-four-desserts.json', 'lp-four-foods-ranges.json']
const problems = files.map((file) => JSON.parse(data(file)) as Published)

function read({ columns, rows, published }: Published) {
  const lp: LinearProgram = {
    columns: columns.map((column) => ({ ...column, lower: 0, upper: Infinity })),
    rows: rows.map((row) => ({ ...row, lower: row.lower ?? -Infinity, upper: row.upper ?? Infinity })),
  }
  const { tolerance } = published
  const close = (value: number, expected: number, name: string) =>
    expect(Math.abs(value - expected), `${name}: ${value} for ${expected}`).toBeLessThanOrEqual(
      tolerance * Math.max(1, Math.abs(expected)),
    )
  return { lp, published, close }
}

describe.each(problems)('$title', (problem) => {
  const { lp, published, close } = read(problem)
  const column = (id: string) => lp.columns.findIndex((candidate) => candidate.id === id)
  const row = (id: string) => lp.rows.findIndex((candidate) => candidate.id === id)

  it('has the published least cost, amounts and slacks', async () => {
    const outcome = await optimum(lp)
    close(outcome.objective, published.objective, 'least cost')
    for (const [id, amount] of Object.entries(published.amounts))
      close(outcome.columns[column(id)]!.value, amount, id)
    for (const [id, slack] of Object.entries(published.slacks ?? {})) {
      const { lower, upper } = lp.rows[row(id)]!
      const { activity } = outcome.rows[row(id)]!
      close(Number.isFinite(upper) ? upper - activity : activity - lower, slack, id)
    }
  })

  it('has the published prices and reduced costs', async () => {
    const outcome = await optimum(lp)
    const prices = await marginalPrices(lp, outcome, { rows: Object.keys(published.prices) })
    expect(prices.length).toBeGreaterThan(0)
    for (const { row: id, more, less } of prices) {
      if (more === 'impossible' || less === 'impossible') throw new Error(id)
      close(more.price, published.prices[id]!, id)
      close(less.price, published.prices[id]!, id)
    }
    for (const [id, reduced] of Object.entries(published.reducedCosts ?? {}))
      close(outcome.columns[column(id)]!.reducedCost, reduced, id)
  })
})

describe('Peanut butter, pasta, milk and steak: the published ranges', () => {
  const { lp, published, close } = read(problems.find((problem) => problem.published.limitRanges)!)

  it('of its limits', async () => {
    const outcome = await optimum(lp)
    const ranges = Object.entries(published.limitRanges!)
    const prices = await marginalPrices(lp, outcome, { rows: ranges.map(([id]) => id) })
    ranges.forEach(([id, [down, up]], k) => {
      const { more, less, limit } = prices[k]!
      if (more === 'impossible' || less === 'impossible') throw new Error(id)
      close(less.downTo - limit, down, `${id} down`)
      close(more.upTo - limit, up, `${id} up`)
    })
  })

  it('of its costs', async () => {
    const outcome = await optimum(lp)
    const ranges = Object.entries(published.costRanges!)
    const windows = await costWindows(lp, outcome, { columns: ranges.map(([id]) => id) })
    ranges.forEach(([id, [down, up]], k) => {
      close(windows[k]!.lower - windows[k]!.cost, down, `${id} down`)
      close(windows[k]!.upper - windows[k]!.cost, up, `${id} up`)
    })
    for (const [id, change] of Object.entries(published.buyIn!)) {
      const [entry] = await buyInCosts(lp, outcome, { columns: [id] })
      close(entry!.entersBelow! - entry!.cost, change, id)
    }
  })
})

it('shows what "exactly" costs instead of "at least": twenty foods are 27 per cent dearer', async () => {
  // 0.1381709 against 0.1086623, the same foods and allowances with the rows as inequalities among all 77 foods.
  const [exact] = problems
  expect(exact!.published.objective / 0.1086622782).toBeCloseTo(1.27, 2)
  const relaxed: LinearProgram = {
    columns: exact!.columns.map((food) => ({ ...food, lower: 0, upper: Infinity })),
    rows: exact!.rows.map((row) => ({ ...row, lower: row.lower!, upper: Infinity })),
  }
  expect((await optimum(relaxed)).objective).toBeLessThan(exact!.published.objective)
})
