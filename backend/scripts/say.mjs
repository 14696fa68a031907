/** A failure the reader can act on: printed without a stack trace, with what to do next. */
export class SetupError extends Error {
  /**
   * @param {string} problem what went wrong, one sentence
   * @param {string} [remedy] what to do about it, ready to be copied
   */
  constructor(problem, remedy) {
    super(remedy ? `${problem}\n\n${remedy}` : problem)
    this.name = 'SetupError'
  }
}

/**
 * Prints one line of progress.
 * @param {string} line
 */
export function say(line) {
  process.stdout.write(`${line}\n`)
}

/**
 * Prints why the set-up cannot go on; the stack only where the failure is not one we foresaw.
 * @param {unknown} error
 */
export function sayFailure(error) {
  const text =
    error instanceof SetupError ? error.message : error instanceof Error ? error.stack : String(error)
  process.stderr.write(`\n${text}\n`)
}

/**
 * Seconds since a moment of `performance.now()`, for progress lines.
 * @param {number} start
 */
export function secondsSince(start) {
  return `${((performance.now() - start) / 1000).toFixed(1)} s`
}
