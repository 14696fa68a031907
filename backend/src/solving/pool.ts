import type { Answer, Curve, CurveAlong, FormulationInput } from '@maslin/shared'
import { Piscina } from 'piscina'
import { SolvingError } from './errors'
import type { SolveJob, SolveReply, SolveResult } from './jobs'
import { Slots } from './slots'
import { findWorkerFile } from './workerFile'

export interface SolvingPoolOptions {
  /** Worker threads; each keeps an engine of its own warm. */
  workers: number
  /** How many solves may wait for a worker before further ones are refused. */
  queueLimit: number
  /** A worker script other than the solver's own. */
  workerFile?: string
  /** Told when a worker ended by itself. */
  onCrash?: (error: Error) => void
}

export interface SolveLimits {
  /** Milliseconds until the caller must have an answer or a refusal, waiting included. */
  deadlineMs: number
  /** Aborted when the caller goes away. */
  signal?: AbortSignal | undefined
  /** Whose solve it is (a farm): owners take turns, and none fills the line for all. */
  owner?: string | undefined
}

/** How long a solve that nobody waits for any more may run on: most end sooner than a new worker takes to start. */
const GRACE_MS = 500
const PROBE_MS = 5_000
const WARM_UP_MS = 30_000
const PROOF_OF_LIFE_MS = 10_000

/**
 * Solves in worker threads. Every call settles within its deadline, whatever the solver does: an endless loop is ended
 * with its thread, a thread that dies is replaced and its work tried once more.
 */
export class SolvingPool {
  readonly #piscina: Piscina
  readonly #slots: Slots
  readonly #onCrash: (error: Error) => void
  readonly #workers: number
  #lastAnswer = -Infinity
  #probing: Promise<boolean> | undefined
  #closed = false

  private constructor(options: SolvingPoolOptions, workerFile: string) {
    this.#piscina = new Piscina({
      filename: workerFile,
      minThreads: options.workers,
      maxThreads: options.workers,
      idleTimeout: Infinity,
      // A worker needs no secrets and none of the loaders the server was started with.
      env: {},
      argv: [],
      execArgv: [],
      resourceLimits: { maxOldGenerationSizeMb: 512 },
    })
    this.#onCrash = options.onCrash ?? (() => undefined)
    this.#piscina.on('error', (error: Error) => this.#onCrash(error))
    this.#workers = options.workers
    this.#slots = new Slots(options.workers, options.queueLimit)
  }

  static async create(options: SolvingPoolOptions): Promise<SolvingPool> {
    return new SolvingPool(options, options.workerFile ?? (await findWorkerFile()))
  }

  /** Solves of callers that wait for a worker. */
  get waiting(): number {
    return this.#slots.waiting
  }

  /** The cheapest mix, or why there is none. Throws a SolvingError when no answer came. */
  async solveMix(input: FormulationInput, secondOpinion: boolean, limits: SolveLimits): Promise<Answer> {
    return (await this.#perform(
      (deadlineMs) => ({ kind: 'mix', input, secondOpinion, deadlineMs }),
      limits,
    )) as Answer
  }

  /** Least cost along a price or a limit. Throws a SolvingError when no answer came. */
  async traceCurve(
    input: FormulationInput,
    axis: { along: CurveAlong; from: number; to: number },
    limits: SolveLimits,
  ): Promise<Curve> {
    return (await this.#perform(
      (deadlineMs) => ({ kind: 'curve', input, ...axis, deadlineMs }),
      limits,
    )) as Curve
  }

  /** True when a worker answers: by a recent solve, else by solving a tiny problem now. */
  async ready(): Promise<boolean> {
    if (performance.now() - this.#lastAnswer < PROOF_OF_LIFE_MS) return true
    this.#probing ??= this.#probe().finally(() => (this.#probing = undefined))
    return this.#probing
  }

  /** One for all who ask meanwhile: anybody may ask, and the places are for the keepers. */
  async #probe(): Promise<boolean> {
    try {
      return (await this.#perform((deadlineMs) => ({ kind: 'probe', deadlineMs }), {
        deadlineMs: PROBE_MS,
      })) as boolean
    } catch (error) {
      if (error instanceof SolvingError) return false
      throw error
    }
  }

  /** Lets every worker load its engine, so that the first keeper does not wait for it. False where one did not answer. */
  async warmUp(): Promise<boolean> {
    const probes = Array.from({ length: this.#workers }, () =>
      this.#perform((deadlineMs) => ({ kind: 'probe', deadlineMs }), { deadlineMs: WARM_UP_MS }),
    )
    return (await Promise.allSettled(probes)).every(({ status }) => status === 'fulfilled')
  }

  async close(): Promise<void> {
    this.#closed = true
    this.#slots.close()
    await this.#piscina.destroy()
  }

  async #perform(job: (deadlineMs: number) => SolveJob, limits: SolveLimits): Promise<SolveResult> {
    if (this.#closed) throw new SolvingError('closed')
    const endsAt = performance.now() + limits.deadlineMs
    await this.#slots.enter(limits.deadlineMs, limits)
    return this.#inSlot(job, endsAt, limits.signal)
  }

  /** Runs one job in the place already taken, and gives the place back when the worker is free again. */
  #inSlot(job: (deadlineMs: number) => SolveJob, endsAt: number, signal?: AbortSignal): Promise<SolveResult> {
    return new Promise((resolve, reject) => {
      const stop = new AbortController()
      const deadline = setTimeout(() => {
        reject(new SolvingError('deadline'))
        stop.abort()
      }, endsAt - performance.now())
      let grace: NodeJS.Timeout | undefined
      const cancel = () => {
        reject(new SolvingError('cancelled'))
        grace = setTimeout(() => stop.abort(), GRACE_MS)
      }
      signal?.addEventListener('abort', cancel, { once: true })
      this.#runTwice(job, endsAt, stop.signal)
        .then(resolve, reject)
        .finally(() => {
          clearTimeout(deadline)
          clearTimeout(grace)
          signal?.removeEventListener('abort', cancel)
          this.#slots.leave()
        })
    })
  }

  async #runTwice(
    job: (deadlineMs: number) => SolveJob,
    endsAt: number,
    signal: AbortSignal,
  ): Promise<SolveResult> {
    for (let attempt = 1; ; attempt += 1) {
      try {
        const left = endsAt - performance.now()
        const reply = (await this.#piscina.run(job(inTimeToAnswer(left)), { signal })) as SolveReply
        if (!reply.ok) {
          const failure = reply.refused === undefined ? 'failed' : 'refused'
          throw new SolvingError(failure, reply.message, undefined, reply.refused)
        }
        this.#lastAnswer = performance.now()
        return reply.value
      } catch (error) {
        if (error instanceof SolvingError) throw error
        if (signal.aborted) throw new SolvingError('deadline', '', { cause: error })
        if (this.#closed) throw new SolvingError('closed', '', { cause: error })
        this.#onCrash(error as Error)
        if (attempt === 2) throw new SolvingError('crashed', '', { cause: error })
      }
    }
  }
}

/** The worker is given a little less than is left, so that it can still say itself that it ran out of time. */
function inTimeToAnswer(leftMs: number): number {
  return Math.max(1, leftMs - Math.min(300, Math.max(10, leftMs * 0.1)))
}
