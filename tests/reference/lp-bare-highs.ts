import loadHighs from 'highs'
import type { LinearProgram } from '@maslin/solver'

export interface BareAnswer {
  status: 'optimal' | 'infeasible' | 'unbounded' | 'unknown'
  objective: number
}

/** HiGHS with nothing of ours around it: arrays as they are, no scaling, no certificate, its own tolerances. */
export async function bareHighs(): Promise<{ solve(lp: LinearProgram): BareAnswer; dispose(): void }> {
  const highs = await loadHighs()
  const model = highs.createModel()
  model.options.set({ output_flag: false, presolve: 'off' })
  const { modelStatus } = highs.constants
  return {
    solve(lp) {
      const starts = [0]
      for (const row of lp.rows) starts.push(starts[starts.length - 1]! + row.entries.length)
      model.passModel({
        numCols: lp.columns.length,
        numRows: lp.rows.length,
        colCost: lp.columns.map((column) => column.cost),
        colLower: lp.columns.map((column) => column.lower),
        colUpper: lp.columns.map((column) => column.upper),
        rowLower: lp.rows.map((row) => row.lower),
        rowUpper: lp.rows.map((row) => row.upper),
        matrix: {
          format: 'csr',
          numCols: lp.columns.length,
          numRows: lp.rows.length,
          starts,
          indices: lp.rows.flatMap((row) => row.entries.map(([column]) => column)),
          values: lp.rows.flatMap((row) => row.entries.map(([, value]) => value)),
        },
      })
      const result = model.run()
      const status =
        result.modelStatus === modelStatus.optimal
          ? 'optimal'
          : result.modelStatus === modelStatus.infeasible
            ? 'infeasible'
            : result.modelStatus === modelStatus.unbounded
              ? 'unbounded'
              : 'unknown'
      return { status, objective: status === 'optimal' ? model.getObjectiveValue() : NaN }
    },
    dispose: () => model.dispose(),
  }
}
