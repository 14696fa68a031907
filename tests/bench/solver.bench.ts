import loadHighs from 'highs'
import {
  buyInCosts,
  costWindows,
  findConflict,
  marginalPrices,
  openAnalysis,
  solveLinearProgram,
  type LinearProgram,
  type OptimalOutcome,
} from '@maslin/solver'
import { seeded } from '../reference/lp-random'
import { report, timed } from './measure'

const FEEDS = 60
const NUTRIENTS = 40
const PROBLEMS = 60
const ROUNDS = 8
const WARM_UP = 2
/** Full answer (scaling, solve, certificate, prices both ways with ranges) against the bare solve. */
const TARGET = 2.5

/**
 * A mix of 60 invented feeds under 40 limits drawn around a hidden mix that meets them. With `degenerate` the last ten
 * limits say the same as ten before them in another unit, so that wherever one binds two limits meet.
 */
function mix(seed: number, degenerate = false): LinearProgram {
  const random = seeded(seed)
  const share = Array.from({ length: FEEDS }, () => (random() < 0.3 ? random() : 0))
  const sum = share.reduce((a, b) => a + b, 0)
  const columns = share.map((_, j) => ({
    id: `feed ${j}`,
    cost: 0.05 + 2 * random(),
    lower: 0,
    upper: Infinity,
  }))
  const rows: LinearProgram['rows'] = [
    { id: 'total', lower: 1000, upper: 1000, entries: share.map((_, j): [number, number] => [j, 1]) },
  ]
  for (let i = 1; i < NUTRIENTS; i++) {
    const twin = rows[i - 30]
    if (degenerate && twin && i > 30) {
      const entries = twin.entries.map(([j, value]): [number, number] => [j, value * 4.184])
      rows.push({ id: `again ${i}`, lower: twin.lower * 4.184, upper: twin.upper * 4.184, entries })
      continue
    }
    const unit = 10 ** (1 - 4 * random())
    const content = share.map(() => (random() < 0.9 ? unit * random() : 0))
    const supply = content.reduce((whole, value, j) => whole + (value * share[j]! * 1000) / sum, 0)
    const entries = content.flatMap((value, j): [number, number][] => (value === 0 ? [] : [[j, value]]))
    if (random() < 0.6)
      rows.push({
        id: `least ${i}`,
        lower: supply * (0.9 + 0.08 * random()),
        upper: Infinity,
        entries,
      })
    else
      rows.push({
        id: `most ${i}`,
        lower: -Infinity,
        upper: supply * (1.02 + 0.1 * random()),
        entries,
      })
  }
  return { columns, rows }
}

/** The same program with one limit too many, for the time to explain a conflict. */
function impossible(lp: LinearProgram): LinearProgram {
  const [total] = lp.rows
  return {
    columns: lp.columns,
    rows: [...lp.rows, { ...total!, id: 'too little', lower: -Infinity, upper: 900 }],
  }
}

/** No basic amount or row rests on a limit, and nothing at rest is free of charge. */
function isNondegenerate(lp: LinearProgram, { columns, rows }: OptimalOutcome): boolean {
  const near = (value: number, limit: number) =>
    Number.isFinite(limit) && Math.abs(value - limit) <= 1e-7 * (1 + Math.abs(limit))
  return (
    columns.every(({ value, reducedCost, basis }) =>
      basis === 'basic' ? !near(value, 0) : Math.abs(reducedCost) > 1e-7,
    ) &&
    rows.every(({ activity, dual, basis }, i) => {
      const { lower, upper } = lp.rows[i]!
      return basis === 'basic'
        ? !near(activity, lower) && !near(activity, upper)
        : lower === upper || dual !== 0
    })
  )
}

/** What a caller would hand to HiGHS with nothing around it: the arrays ready, one model used again and again. */
async function bareHighs(): Promise<(lp: LinearProgram) => () => void> {
  const highs = await loadHighs()
  const model = highs.createModel()
  model.options.set({ output_flag: false, presolve: 'off', solver: 'simplex', simplex_strategy: 1 })
  return (lp) => {
    const starts = [0]
    for (const row of lp.rows) starts.push(starts[starts.length - 1]! + row.entries.length)
    const data = {
      numCols: lp.columns.length,
      numRows: lp.rows.length,
      colCost: Float64Array.from(lp.columns, (column) => column.cost),
      colLower: Float64Array.from(lp.columns, (column) => column.lower),
      colUpper: Float64Array.from(lp.columns, (column) => column.upper),
      rowLower: Float64Array.from(lp.rows, (row) => row.lower),
      rowUpper: Float64Array.from(lp.rows, (row) => row.upper),
      matrix: {
        format: 'csr' as const,
        numCols: lp.columns.length,
        numRows: lp.rows.length,
        starts: Int32Array.from(starts),
        indices: Int32Array.from(lp.rows.flatMap((row) => row.entries.map(([column]) => column))),
        values: Float64Array.from(lp.rows.flatMap((row) => row.entries.map(([, value]) => value))),
      },
    }
    return () => {
      model.passModel(data)
      model.run()
      model.getSolution()
    }
  }
}

async function optimum(lp: LinearProgram): Promise<OptimalOutcome> {
  const outcome = await solveLinearProgram(lp)
  if (outcome.status !== 'optimal') throw new Error(`The benchmark's problem is ${outcome.status}.`)
  return outcome
}

export default async function run(): Promise<number> {
  const prepare = await bareHighs()
  const problems: { lp: LinearProgram; bare: () => void }[] = []
  for (let seed = 1; problems.length < PROBLEMS; seed++) {
    const lp = mix(seed)
    const outcome = await solveLinearProgram(lp)
    if (outcome.status === 'optimal' && isNondegenerate(lp, outcome)) problems.push({ lp, bare: prepare(lp) })
  }
  const degenerate: typeof problems = []
  for (let seed = 1; degenerate.length < PROBLEMS / 6; seed++) {
    const lp = mix(seed, true)
    const outcome = await solveLinearProgram(lp)
    if (outcome.status === 'optimal' && !isNondegenerate(lp, outcome))
      degenerate.push({ lp, bare: prepare(lp) })
  }
  const times: Record<
    'bare' | 'solve' | 'full' | 'windows' | 'buyIn' | 'amounts' | 'conflict' | 'small' | 'bareTied' | 'tied',
    number[]
  > = {
    bare: [],
    solve: [],
    full: [],
    windows: [],
    buyIn: [],
    amounts: [],
    conflict: [],
    small: [],
    bareTied: [],
    tied: [],
  }
  for (let round = 0; round < ROUNDS + WARM_UP; round++) {
    const keep = (name: keyof typeof times, ms: number) => round >= WARM_UP && times[name].push(ms)
    for (const { lp, bare } of degenerate) {
      keep('bareTied', await timed(bare))
      keep('tied', await timed(async () => marginalPrices(lp, await optimum(lp))))
    }
    for (const { lp, bare } of problems) {
      // In another order each round: the first to touch a problem pays for bringing it into the cache.
      const compared = [
        ['bare', bare],
        ['solve', () => solveLinearProgram(lp)],
        ['full', async () => marginalPrices(lp, await optimum(lp))],
        ['small', () => solveLinearProgram(lp, { engine: 'javascript-lp-solver' })],
      ] as const
      for (let k = 0; k < compared.length; k++) {
        const [name, work] = compared[(round + k) % compared.length]!
        keep(name, await timed(work))
      }
      const outcome = await optimum(lp)
      const session = openAnalysis(lp, outcome)
      try {
        keep('windows', await timed(() => costWindows(lp, outcome, { session })))
        keep('buyIn', await timed(() => buyInCosts(lp, outcome, { session })))
        keep('amounts', await timed(() => buyInCosts(lp, outcome, { session, amounts: true })))
      } finally {
        session.dispose()
      }
      if (round % 4 === 0)
        keep('conflict', await timed(() => findConflict(impossible(lp), { keep: ['total'] })))
    }
  }
  console.log(
    `${PROBLEMS} mixes of ${FEEDS} feeds × ${NUTRIENTS} limits with nondegenerate optima, medians against`,
  )
  console.log('one bare HiGHS solve (arrays, presolve off, reused instance)')
  const missed = report(
    'full answer: scale, solve, certify, prices both ways, ranges',
    times.full,
    times.bare,
    TARGET,
  )
  report('  of this: scale, solve, certify', times.solve, times.bare)
  report('full answer at degenerate optima, against their bare solve', times.tied, times.bareTied)
  report('cost windows of the feeds used', times.windows, times.bare)
  report('buy-in costs of the feeds not used', times.buyIn, times.bare)
  report('buy-in costs with the amounts just past them', times.amounts, times.bare)
  report('conflict explained (prove, narrow, verify)', times.conflict, times.bare)
  report('javascript-lp-solver: scale, solve, certify', times.small, times.bare)
  return missed
}
