import type { MixDraft, SolveResponse } from '@maslin/shared'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { effectScope, nextTick, shallowRef } from 'vue'
import { useMixSolve, type MixSolver } from './useMixSolve'

const draftNamed = (name: string): MixDraft => ({
  name,
  groupId: '0190a0a0-0000-7000-8000-000000000001',
  basis: 'perHead',
  batchDryMatterKg: 1000,
  feeds: [],
  limits: [],
})

/** A solver whose answers arrive when the test says so. */
function slowSolver() {
  const asked: {
    draft: MixDraft
    signal: AbortSignal
    answer: (detail?: string) => void
    fail: (error: unknown) => void
  }[] = []
  const solver: MixSolver = {
    solve: (draft, signal) =>
      new Promise((resolve, reject) => {
        asked.push({
          draft,
          signal,
          answer: (detail = draft.name) => resolve(answerSaying(detail)),
          fail: reject,
        })
      }),
  }
  return { asked, solver }
}

function answerSaying(detail: string): SolveResponse {
  const answer = { version: 1, status: 'stopped', leftOut: [], cautions: [], reasons: [], detail } as const
  // Nothing here reads the input.
  return {
    input: {} as SolveResponse['input'],
    answer: { ...answer, leftOut: [], cautions: [], reasons: [] },
  }
}

const settle = async () => {
  await vi.advanceTimersByTimeAsync(0)
  await nextTick()
}

function setUp(first: MixDraft | undefined) {
  const { asked, solver } = slowSolver()
  const draft = shallowRef(first)
  const scope = effectScope()
  const solve = scope.run(() => useMixSolve(draft, solver, 120))
  if (!solve) throw new Error('the scope is closed')
  const detail = () => {
    const answer = solve.response.value?.answer
    return answer && 'detail' in answer ? answer.detail : undefined
  }
  return { asked, draft, scope, solve, detail }
}

describe('solving while editing', () => {
  beforeEach(() => vi.useFakeTimers())
  afterEach(() => vi.useRealTimers())

  it('solves the first draft at once and nothing before it is there', async () => {
    const { asked, draft, solve, detail } = setUp(undefined)
    expect(asked).toHaveLength(0)
    expect(solve.pending.value).toBe(false)
    draft.value = draftNamed('first')
    await nextTick()
    expect(asked).toHaveLength(1)
    expect(solve.pending.value).toBe(true)
    asked[0]?.answer()
    await settle()
    expect(detail()).toBe('first')
    expect(solve.pending.value).toBe(false)
  })

  it('gathers edits that follow each other closely into one request', async () => {
    const { asked, draft } = setUp(draftNamed('first'))
    for (const name of ['a', 'b', 'c']) {
      draft.value = draftNamed(name)
      await vi.advanceTimersByTimeAsync(50)
    }
    await vi.advanceTimersByTimeAsync(200)
    expect(asked.map((request) => request.draft.name)).toEqual(['first', 'c'])
  })

  it('cancels the request of an older draft, and a late answer to it changes nothing', async () => {
    const { asked, draft, detail } = setUp(draftNamed('old'))
    draft.value = draftNamed('new')
    await nextTick()
    expect(asked[0]?.signal.aborted).toBe(true)
    await vi.advanceTimersByTimeAsync(120)
    asked[1]?.answer()
    await settle()
    asked[0]?.answer()
    await settle()
    expect(detail()).toBe('new')
  })

  it('keeps the last answer on screen while the next one comes', async () => {
    const { asked, draft, solve, detail } = setUp(draftNamed('first'))
    asked[0]?.answer()
    await settle()
    draft.value = draftNamed('second')
    await vi.advanceTimersByTimeAsync(120)
    expect(detail()).toBe('first')
    expect(solve.answered.value?.name).toBe('first')
    expect(solve.pending.value).toBe(true)
  })

  it('says a failure, keeps the answer before it, and tries again when asked', async () => {
    const { asked, draft, solve, detail } = setUp(draftNamed('first'))
    asked[0]?.answer()
    await settle()
    draft.value = draftNamed('second')
    await vi.advanceTimersByTimeAsync(120)
    asked[1]?.fail(new Error('no connection'))
    await settle()
    expect(solve.failure.value).toEqual(new Error('no connection'))
    expect(detail()).toBe('first')
    solve.solveNow()
    asked[2]?.answer()
    await settle()
    expect(solve.failure.value).toBeUndefined()
    expect(detail()).toBe('second')
  })

  it('does not report the cancellation of an older request as a failure', async () => {
    const { asked, draft, solve } = setUp(draftNamed('old'))
    draft.value = draftNamed('new')
    await nextTick()
    asked[0]?.fail(new DOMException('aborted', 'AbortError'))
    await settle()
    expect(solve.failure.value).toBeUndefined()
    expect(solve.pending.value).toBe(true)
  })

  it('cancels what is running when the page is left', async () => {
    const { asked, draft, scope } = setUp(draftNamed('first'))
    draft.value = draftNamed('second')
    await nextTick()
    scope.stop()
    await vi.advanceTimersByTimeAsync(500)
    expect(asked).toHaveLength(1)
    expect(asked[0]?.signal.aborted).toBe(true)
  })
})
