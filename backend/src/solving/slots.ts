import { SolvingError } from './errors'

interface Waiting {
  /** Whom the place is for; each gets a turn before anybody gets a second one. */
  owner: string
  enter: () => void
  refuse: (reason: SolvingError) => void
}

export interface EnterOptions {
  signal?: AbortSignal | undefined
  /** Whose work it is; left out for our own. */
  owner?: string | undefined
}

/**
 * A fixed number of places and a bounded line before them. Those in line take turns by owner, and no owner takes more
 * than half of it, so that one cannot keep the others out. Kept outside the thread pool because the pool does
 * not count tasks that carry an abort signal against its own queue limit.
 */
export class Slots {
  readonly #line: Waiting[] = []
  /** When each owner in line was last let in, as a count. */
  readonly #lastTurn = new Map<string, number>()
  #turns = 0
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
   * Throws a SolvingError `busy` at once when the line is full or the owner's half of it, `deadline` when the wait is over, `cancelled` by `signal`.
   */
  async enter(waitMs: number, { signal, owner = '' }: EnterOptions = {}): Promise<void> {
    if (signal?.aborted) throw new SolvingError('cancelled')
    if (this.#free > 0) {
      this.#free -= 1
      return
    }
    if (this.#line.length >= this.limit) throw new SolvingError('busy', `${this.limit} are waiting`)
    const own = this.#line.filter((place) => place.owner === owner).length
    if (owner && own >= Math.ceil(this.limit / 2))
      throw new SolvingError('busy', `${own} of theirs are waiting`)
    await new Promise<void>((resolve, reject) => {
      const place: Waiting = {
        owner,
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

  /** Gives the place back, to whose turn it is if anybody waits. */
  leave(): void {
    const next = this.#takeNext()
    if (next) next.enter()
    else this.#free += 1
  }

  /** The first in line of those whose owner had no turn for the longest time. */
  #takeNext(): Waiting | undefined {
    const turnOf = ({ owner }: Waiting) => this.#lastTurn.get(owner) ?? 0
    const next = this.#line.reduce<Waiting | undefined>(
      (best, place) => (best && turnOf(best) <= turnOf(place) ? best : place),
      undefined,
    )
    if (!next) {
      this.#lastTurn.clear()
      return undefined
    }
    this.#line.splice(this.#line.indexOf(next), 1)
    this.#lastTurn.set(next.owner, ++this.#turns)
    return next
  }

  /** Sends everyone in line away. */
  close(): void {
    for (const place of this.#line.splice(0)) place.refuse(new SolvingError('closed'))
  }
}
