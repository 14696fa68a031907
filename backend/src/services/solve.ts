import type { Answer, Curve, CurveAlong, FormulationInput, MixDraft, SolveResponse } from '@maslin/shared'
import { AppError, invalidField } from '../errors'
import type { FarmRepositories } from '../repositories/inFarm'
import { SolvingError } from '../solving/errors'
import type { SolvingPool } from '../solving/pool'
import { gatherInput } from './gatherInput'
import type { RequirementLibrary } from './requirementLibrary'

/** What a solve needs beside the request: a way to the farm's rows, the library, and the workers. */
export interface SolveContext {
  /** Runs work in one transaction on the farm. */
  run: <T>(work: (farm: FarmRepositories) => Promise<T>) => Promise<T>
  library: RequirementLibrary
  pool: Pick<SolvingPool, 'solveMix' | 'traceCurve'>
  /** Aborted when the caller goes away. */
  signal?: AbortSignal | undefined
  /** Whose solves these are; one farm does not fill the line of all. */
  owner?: string | undefined
}

/**
 * Solves a draft with the farm's feeds and prices; nothing is saved. An answer that says why there is no mix is an answer.
 * Throws AppError `invalid_input`, `busy`, `deadline_passed`, `not_ready`; always within `deadlineMs`.
 */
export async function solveDraft(
  context: SolveContext,
  request: { draft: MixDraft; secondOpinion: boolean; deadlineMs: number },
  within = 'draft.',
): Promise<SolveResponse> {
  return inTime(request.deadlineMs, async (left) => {
    const input = await context.run((farm) => gatherInput(farm, context.library, request.draft, within))
    const answer = await solved<Answer>(
      context.pool.solveMix(input, request.secondOpinion, { deadlineMs: left(), ...waitingAs(context) }),
    )
    return { input, answer }
  })
}

const waitingAs = ({ signal, owner }: SolveContext) => ({ signal, owner })

/** Least cost along a price or one side of a limit. Throws like `solveDraft`. */
export async function traceDraftCurve(
  context: SolveContext,
  request: Axis & { draft: MixDraft; deadlineMs: number },
): Promise<Curve> {
  const { draft, along, deadlineMs } = request
  return inTime(deadlineMs, async (left) => {
    const input = await context.run((farm) => gatherInput(farm, context.library, draft, 'draft.'))
    const ends = endsOf(input, request)
    return solved<Curve>(
      context.pool.traceCurve(input, { along, ...ends }, { deadlineMs: left(), ...waitingAs(context) }),
    )
  })
}

interface Axis {
  along: CurveAlong
  from?: number | undefined
  to?: number | undefined
}

/** Ends of the axis: as given, else from half to one and a half times today's value, in its own unit. */
function endsOf(input: FormulationInput, { along, from, to }: Axis): { from: number; to: number } {
  const at = todaysValue(input, along)
  const ends = { from: from ?? at * 0.5, to: to ?? (at > 0 ? at * 1.5 : 1) }
  if (ends.from >= ends.to)
    throw invalidField('to', 'to_not_above_from', 'The axis must end above where it begins.')
  return ends
}

function todaysValue(input: FormulationInput, along: CurveAlong): number {
  if (along.kind === 'price') {
    const feed = input.feeds.find(({ id }) => id === along.feedId)
    if (!feed) throw invalidField('along.feedId', 'unknown_feed', 'The mix has no such feed.')
    if (feed.pricePerKg === undefined)
      throw invalidField('along.feedId', 'no_price', 'This feed has no price on that day.')
    return feed.pricePerKg
  }
  const limit = input.limits.find(({ id }) => id === along.limitId)
  if (!limit) throw invalidField('along.limitId', 'unknown_limit', 'The mix has no such limit.')
  const bound = limit[along.side]
  if (bound === undefined)
    throw invalidField('along.side', 'no_bound', 'The limit has no figure on that side.')
  return bound
}

/** Ends at the deadline whatever holds the work up, the database included. */
async function inTime<T>(deadlineMs: number, work: (left: () => number) => Promise<T>): Promise<T> {
  const endsAt = performance.now() + deadlineMs
  let timer: NodeJS.Timeout | undefined
  const late = new Promise<never>((_resolve, reject) => {
    timer = setTimeout(() => reject(deadlinePassed()), deadlineMs)
  })
  try {
    return await Promise.race([work(() => Math.max(1, endsAt - performance.now())), late])
  } finally {
    clearTimeout(timer)
  }
}

const deadlinePassed = (cause?: unknown) =>
  new AppError('deadline_passed', {
    detail: 'There was no answer in the time allowed. Fewer feeds or limits solve faster.',
    headers: { 'Retry-After': '1' },
    cause,
  })

async function solved<T>(work: Promise<T>): Promise<T> {
  try {
    return await work
  } catch (error) {
    throw error instanceof SolvingError ? toAppError(error) : error
  }
}

function toAppError(error: SolvingError): AppError {
  const soon = { headers: { 'Retry-After': '1' }, cause: error }
  switch (error.failure) {
    case 'busy':
      return new AppError('busy', { detail: 'Many mixes are being solved just now.', ...soon })
    case 'deadline':
    case 'cancelled':
      return deadlinePassed(error)
    case 'crashed':
    case 'closed':
      return new AppError('not_ready', { detail: 'The solver is starting again.', ...soon })
    case 'refused':
      return error.code === 'stopped'
        ? deadlinePassed(error)
        : invalidField('along', error.code ?? 'unavailable', error.message)
    case 'failed':
      return new AppError('internal_error', { cause: error })
  }
}
