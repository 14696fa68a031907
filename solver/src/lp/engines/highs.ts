import type { ScaledProgram } from '../scaled'
import type { Engine, Verdict } from './engine'
import { DUAL_SIMPLEX, HighsModel, PRIMAL_SIMPLEX } from './highsModel'
import { forgetHighs, highsIfLoaded, loadHighs, shortReason } from './highsRuntime'

/** One model serves every cold solve of this thread: building and disposing one costs as much as a small solve. */
let shared: HighsModel | undefined

/** Frees the model kept for cold solves. The next solve makes a new one. */
export function releaseHighs(): void {
  shared?.dispose()
  shared = undefined
}

function dropEverything(): void {
  try {
    releaseHighs()
  } catch {
    shared = undefined
  }
  forgetHighs()
}

/** HiGHS by arrays: dual simplex, then primal simplex from a cold start. */
export const highsEngine: Engine = {
  name: 'highs',
  attempts: 2,
  async prepare() {
    await loadHighs()
  },
  solve(program: ScaledProgram, until: number, attempt: number): Verdict {
    const highs = highsIfLoaded()
    if (!highs) return { status: 'stopped', reason: 'numerical', detail: 'the HiGHS runtime is not loaded' }
    try {
      shared ??= new HighsModel(highs)
      shared.setStrategy(attempt === 0 ? DUAL_SIMPLEX : PRIMAL_SIMPLEX)
      shared.load(program)
      if (attempt > 0) shared.clearSolver()
      return shared.run(until)
    } catch (error) {
      // A runtime that threw may be dead (out of memory, aborted): the next solve starts a fresh one.
      dropEverything()
      return { status: 'stopped', reason: 'numerical', detail: shortReason(error) }
    }
  },
}
