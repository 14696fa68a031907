import type { LinearProgram } from '../types'
import bealeCycles from './beale-cycles.json'
import boundsAgainstRow from './bounds-against-row.json'
import emptyRowImpossible from './empty-row-impossible.json'
import emptyRowPossible from './empty-row-possible.json'
import endlessPivots from './endless-pivots.json'
import equalAndCap from './equal-and-cap.json'
import fixedByTwoRows from './fixed-by-two-rows.json'
import freeColumn from './free-column.json'
import infeasibleWithNumbers from './infeasible-with-numbers.json'
import mineralsPerKg from './minerals-per-kg.json'
import negativeRanges from './negative-ranges.json'
import noColumns from './no-columns.json'
import noColumnsImpossible from './no-columns-impossible.json'
import noRows from './no-rows.json'
import redundantEqualities from './redundant-equalities.json'
import reservedNames from './reserved-names.json'
import sodiumCap from './sodium-cap.json'
import tinyCoefficients from './tiny-coefficients.json'
import tinyLimit from './tiny-limit.json'
import twoMixes from './two-mixes.json'
import twoPrices from './two-prices.json'
import unbounded from './unbounded.json'
import unboundedButInfeasible from './unbounded-but-infeasible.json'
import zeroCoefficientRow from './zero-coefficient-row.json'

/**
 * Small programs, each kept for what it shows: a trap of one engine, a corner of the format, a mistake made once.
 * A new mistake adds a file here that fails before its fix. In the files a column's missing bounds are 0 and
 * Infinity, a row's missing limits ∓Infinity.
 */
export interface Instance {
  name: string
  shows: string
  source: string
  lp: LinearProgram
  expect: { status: 'optimal' | 'infeasible' | 'unbounded'; objective?: number }
  /** Engines that may give up on it; a wrong answer is never allowed. */
  mayStop: string[]
}

interface InstanceFile {
  name: string
  shows: string
  source: string
  columns: { id: string; cost: number; lower?: number | string; upper?: number | string }[]
  rows: { id: string; lower?: number | string; upper?: number | string; entries: number[][] }[]
  expect: { status: string; objective?: number }
  mayStop?: string[]
}

const limit = (value: number | string | undefined, missing: number): number =>
  value === undefined ? missing : Number(value)

function read(file: InstanceFile): Instance {
  const { status } = file.expect
  if (status !== 'optimal' && status !== 'infeasible' && status !== 'unbounded')
    throw new Error(`Instance ${file.name} expects the unknown status ${status}.`)
  return {
    name: file.name,
    shows: file.shows,
    source: file.source,
    lp: {
      columns: file.columns.map(({ id, cost, lower, upper }) => ({
        id,
        cost,
        lower: limit(lower, 0),
        upper: limit(upper, Infinity),
      })),
      rows: file.rows.map(({ id, lower, upper, entries }) => ({
        id,
        lower: limit(lower, -Infinity),
        upper: limit(upper, Infinity),
        entries: entries.map(([column, value]): [number, number] => [column!, value!]),
      })),
    },
    expect: { ...file.expect, status },
    mayStop: file.mayStop ?? [],
  }
}

export const instances: Instance[] = [
  read(bealeCycles),
  read(boundsAgainstRow),
  read(emptyRowImpossible),
  read(emptyRowPossible),
  read(endlessPivots),
  read(equalAndCap),
  read(fixedByTwoRows),
  read(freeColumn),
  read(infeasibleWithNumbers),
  read(mineralsPerKg),
  read(negativeRanges),
  read(noColumns),
  read(noColumnsImpossible),
  read(noRows),
  read(redundantEqualities),
  read(reservedNames),
  read(sodiumCap),
  read(tinyCoefficients),
  read(tinyLimit),
  read(twoMixes),
  read(twoPrices),
  read(unbounded),
  read(unboundedButInfeasible),
  read(zeroCoefficientRow),
]
