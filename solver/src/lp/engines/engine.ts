import type { ScaledOptimum } from '../answer'
import type { ScaledProgram } from '../scaled'
import type { EngineName } from '../types'

/** What an engine claims, still scaled and unchecked. */
export type Verdict =
  | ({ status: 'optimal'; gap?: number } & ScaledOptimum)
  /** `ray` is null where the engine gives no evidence. */
  | { status: 'infeasible'; ray: Float64Array | null }
  | { status: 'unbounded' }
  | { status: 'stopped'; reason: 'deadline' | 'numerical'; detail: string }

export interface Engine {
  name: EngineName
  /** Gets ready (loads what it needs); rejects where the engine cannot run here. */
  prepare(): Promise<void>
  /**
   * Solves from scratch. `until` is a time of `performance.now()`. `attempt` counts from 0: a later attempt takes
   * another way through the same problem.
   */
  solve(program: ScaledProgram, until: number, attempt: number): Verdict
  /** How many different ways it has. */
  attempts: number
}
