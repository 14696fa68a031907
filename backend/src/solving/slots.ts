import { SolvingError } from './errors'

interface Waiting {
  enter: () => void
  refuse: (reason: SolvingError) => void
}

/**
 * A fixed number of places and a bounded first-come line before them. Kept outside the thread pool because the pool does
 * not count tasks that carry an abort signal against its own queue limit.
 */
export class Slots {
  readonly #line: Waiting[] = []
  #free: number

  constructor(
    count: number,
    readonly limit: number,
  ) {
    this.#free = count
  }

  get waiting(): number {
    return this.#line.length
  }

  /**
   * Waits for a place, at most `waitMs`.
   * Throws a SolvingError `busy` at once when the line is full, `deadline` when the wait is over, `cancelled` by `signal`.
   */
  async enter(waitMs: number, signal?: AbortSignal): Promise<void> {
    if (signal?.aborted) throw new SolvingError('cancelled')
    if (this.#free > 0) {
      this.#free -= 1
      return
    }
    if (this.#line.length >= this.limit) throw new SolvingError('busy', `${this.limit} are waiting`)
    await new Promise<void>((resolve, reject) => {
      const place: Waiting = {
        enter: () => {
          stopWaiting()
          resolve()
        },
        refuse: (reason) => {
          stopWaiting()
          reject(reason)
        },
      }
      const give = (failure: 'deadline' | 'cancelled') => {
        this.#line.splice(this.#line.indexOf(place), 1)
        place.refuse(new SolvingError(failure, 'while waiting'))
      }
      const cancel = () => give('cancelled')
      const timer = setTimeout(() => give('deadline'), Math.max(0, waitMs))
      const stopWaiting = () => {
        clearTimeout(timer)
        signal?.removeEventListener('abort', cancel)
      }
      signal?.addEventListener('abort', cancel, { once: true })
      this.#line.push(place)
    })
  }

  /** Gives the place back, to the first in line if there is one. */
  leave(): void {
    const next = this.#line.shift()
    if (next) next.enter()
    else this.#free += 1
  }

  /** Sends everyone in line away. */
  close(): void {
    for (const place of this.#line.splice(0)) place.refuse(new SolvingError('closed'))
  }
}
