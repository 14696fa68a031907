import type { Curve } from '@maslin/shared'
import { computed, onScopeDispose, ref, shallowRef, watch } from 'vue'
import { useBench } from './context'
import { curvePoints, feedsAlong, sameAlong, type CurvePoint } from './model/curves'
import { curveSubject } from './model/curveWords'
import * as edits from './model/edits'
import { headDayFactor } from './model/margins'
import { perKgOf } from './model/prices'

/**
 * The curve of the thing in focus, drawn anew with each answer. While the value tried stays on the axis the axis stays
 * too, so that the mark does not run away under the hand that drags it.
 */
export function useCurve() {
  const { draft, focus, optimal, curveOf, commit, nameOf, feedOf, words } = useBench()
  const curve = shallowRef<Curve>()
  const pending = ref(false)
  const failure = shallowRef<unknown>()
  let running: AbortController | undefined

  const subject = computed(() =>
    focus.value ? curveSubject(focus.value, draft.value, { nameOf, feedOf }, words) : undefined,
  )

  function range() {
    const last = curve.value
    const first = last?.points[0]?.value
    const end = last?.points.at(-1)?.value
    const now = subject.value?.now
    if (!last || !sameAlong(last.along, focus.value) || first === undefined || end === undefined) return {}
    return now !== undefined && now > first && now < end ? { from: first, to: end } : {}
  }

  async function reload() {
    running?.abort()
    const along = focus.value
    if (!along || !optimal.value || !curveOf) {
      pending.value = false
      return
    }
    const controller = new AbortController()
    running = controller
    pending.value = true
    try {
      const next = await curveOf({ along, ...range() }, controller.signal)
      if (running !== controller) return
      curve.value = next
      failure.value = undefined
    } catch (error) {
      if (running !== controller) return
      failure.value = error
    }
    pending.value = false
  }
  watch([focus, optimal], () => void reload(), { immediate: true })
  onScopeDispose(() => running?.abort())

  const fitting = computed(() =>
    curve.value && sameAlong(curve.value.along, focus.value) ? curve.value : undefined,
  )
  const points = computed<CurvePoint[]>(() =>
    fitting.value && subject.value && optimal.value
      ? curvePoints(fitting.value, subject.value, headDayFactor(optimal.value))
      : [],
  )
  /** Today's value on the shown axis. */
  const at = computed(() => {
    const now = subject.value?.now
    if (subject.value && now !== undefined) return subject.value.shown(now)
    return fitting.value && subject.value ? subject.value.shown(fitting.value.at) : undefined
  })

  /** @param shown a value on the shown axis; one that is today's already is no edit */
  function tryValue(shown: number) {
    const along = focus.value
    const about = subject.value
    if (!along || !about || shown < 0) return
    if (at.value !== undefined && Math.abs(shown - at.value) <= Math.abs(at.value) * 1e-6) return
    if (along.kind === 'price') {
      const price = String(Number(shown.toFixed(4)))
      commit(edits.tryPrice(draft.value, along.feedId, perKgOf(price, about.shown(1))))
    } else commit(edits.setBound(draft.value, along.limitId, along.side, about.stored(shown)))
  }

  return {
    subject,
    curve: fitting,
    points,
    feeds: computed(() => feedsAlong(points.value)),
    pending,
    failure,
    at,
    tryValue,
    reload: () => void reload(),
  }
}
