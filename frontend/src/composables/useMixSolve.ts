import type { MixDraft, OptimalAnswer, SolveResponse } from '@maslin/shared'
import { onScopeDispose, readonly, ref, shallowRef, watch, type Ref, type ShallowRef } from 'vue'

/** Whatever turns a draft into an answer: the server today; a worker in the browser can take its place. */
export interface MixSolver {
  /** Rejects when aborted, or with the failure of the way to the solver (an answer such as "not possible" resolves). */
  solve: (draft: MixDraft, signal: AbortSignal) => Promise<SolveResponse>
}

export interface MixSolve {
  /** The newest answer, of whatever status; it stays while the next one is on its way. */
  response: Readonly<ShallowRef<SolveResponse | undefined>>
  /** The draft that `response` answers. */
  answered: Readonly<ShallowRef<MixDraft | undefined>>
  /** The newest answer that holds a mix, with its input. */
  lastMix: Readonly<ShallowRef<(SolveResponse & { answer: OptimalAnswer }) | undefined>>
  /** True from an edit until its answer or its failure is there. */
  pending: Readonly<Ref<boolean>>
  /** Why the newest draft has no answer; the older answer is kept. */
  failure: Readonly<ShallowRef<unknown>>
  /** When the newest answer came. */
  answeredAt: Readonly<ShallowRef<Date | undefined>>
  /** Solves the draft as it stands at once, for example after a failure. */
  solveNow: () => void
}

/**
 * Keeps an answer to a draft that is being edited. Edits are gathered for `delayMs`, a newer draft cancels the solve of an
 * older one, and an older answer can never replace a newer one.
 * @param draft undefined while it is being loaded: nothing is solved then
 */
export function useMixSolve(
  draft: Readonly<Ref<MixDraft | undefined>>,
  solver: MixSolver,
  delayMs = 120,
): MixSolve {
  const response = shallowRef<SolveResponse>()
  const answered = shallowRef<MixDraft>()
  const lastMix = shallowRef<SolveResponse & { answer: OptimalAnswer }>()
  const pending = ref(false)
  const failure = shallowRef<unknown>()
  const answeredAt = shallowRef<Date>()
  let timer: ReturnType<typeof setTimeout> | undefined
  let running: AbortController | undefined

  function cancel() {
    clearTimeout(timer)
    running?.abort()
    running = undefined
  }

  async function start() {
    cancel()
    const asked = draft.value
    if (!asked) {
      pending.value = false
      return
    }
    const controller = new AbortController()
    running = controller
    pending.value = true
    try {
      const answer = await solver.solve(asked, controller.signal)
      if (running !== controller) return
      response.value = answer
      answered.value = asked
      answeredAt.value = new Date()
      failure.value = undefined
      if (answer.answer.status === 'optimal') lastMix.value = { input: answer.input, answer: answer.answer }
    } catch (error) {
      if (running !== controller) return
      failure.value = error
    }
    running = undefined
    pending.value = false
  }

  watch(
    draft,
    (now, before) => {
      cancel()
      pending.value = now !== undefined
      // The first draft has nothing to be gathered with.
      if (before === undefined) void start()
      else timer = setTimeout(() => void start(), delayMs)
    },
    { immediate: true },
  )
  onScopeDispose(cancel)

  return {
    response,
    answered,
    lastMix,
    pending: readonly(pending),
    failure,
    answeredAt,
    solveNow: () => void start(),
  }
}
