/**
 * Why a solve gave no answer:
 * - `busy`: the queue is full; try again shortly
 * - `deadline`: the time was up, waiting included
 * - `cancelled`: the caller went away
 * - `crashed`: the worker ended twice without an answer
 * - `refused`: what was asked for cannot be drawn; `code` says why
 * - `failed`: the solver threw, which is a fault of ours
 * - `closed`: the pool is shutting down
 */
export type SolvingFailure = 'busy' | 'deadline' | 'cancelled' | 'crashed' | 'refused' | 'failed' | 'closed'

export class SolvingError extends Error {
  constructor(
    readonly failure: SolvingFailure,
    detail = '',
    options?: ErrorOptions,
    readonly code?: string,
  ) {
    super(detail || failure, options)
    this.name = 'SolvingError'
  }
}
