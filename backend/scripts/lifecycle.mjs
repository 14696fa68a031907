import { closeSync, openSync } from 'node:fs'
import { join } from 'node:path'
import { forgetPid, notePid, pidFrom } from './processes.mjs'
import { say, sayFailure, SetupError } from './say.mjs'

/**
 * What a start has running, ended in the reverse order of its starting: on Ctrl-C, SIGTERM, a closed terminal, a
 * failure, or when npm, which does not always pass signals on, has gone.
 */
export class Lifecycle {
  /** @type {(() => void | Promise<void>)[]} */
  #stops = []
  #stopping = false

  constructor() {
    for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) {
      process.on(signal, () => {
        // Asked twice: whoever asks does not want to wait. Children are told to end as we exit.
        if (this.#stopping) process.exit(1)
        say('\nStopping …')
        void this.end(0)
      })
    }
    if (process.env.npm_lifecycle_event) this.#endWithParent()
  }

  /** Whether the end has begun, so that a child's ending is no surprise. */
  get stopping() {
    return this.#stopping
  }

  /**
   * Notes how to end something that has just been started.
   * @param {() => void | Promise<void>} stop
   */
  onEnd(stop) {
    this.#stops.push(stop)
  }

  /**
   * Ends everything and this process.
   * @param {number} exitCode
   */
  async end(exitCode) {
    if (this.#stopping) return
    this.#stopping = true
    for (const stop of this.#stops.reverse()) {
      try {
        await stop()
      } catch (error) {
        sayFailure(error)
        exitCode = 1
      }
    }
    if (exitCode === 0) say('Stopped.')
    process.exit(exitCode)
  }

  /**
   * Says why it cannot go on, and ends everything.
   * @param {unknown} error
   */
  async fail(error) {
    // What fails because we are ending is no news.
    if (this.#stopping) return
    sayFailure(error)
    await this.end(1)
  }

  #endWithParent() {
    const parent = process.ppid
    const timer = setInterval(() => {
      if (process.ppid !== parent) void this.end(0)
    }, 1000)
    timer.unref()
  }
}

/**
 * Makes sure that one start only uses a data directory at a time; the note of a start that was killed is passed
 * over.
 * @param {string} directory
 * @param {Lifecycle} lifecycle
 * @throws {SetupError} when another one runs
 */
export function takeDirectory(directory, lifecycle) {
  const file = join(directory, 'start.pid')
  const other = pidFrom(file, 'backend/scripts/')
  if (other) {
    throw new SetupError(
      `Maslin is already running on ${directory} (process ${other}).`,
      `Stop it with Ctrl-C where it runs, or with "kill ${other}". To run another one beside it, give it a data\n` +
        'directory and a port of its own:\n  MASLIN_DATA_DIR=.maslin-second PORT=8090 npm start',
    )
  }
  forgetPid(file)
  try {
    closeSync(openSync(file, 'wx', 0o600))
  } catch (error) {
    throw new SetupError(`Another start of Maslin on ${directory} came in between (${String(error)}).`)
  }
  notePid(file, process.pid)
  lifecycle.onEnd(() => forgetPid(file))
}
