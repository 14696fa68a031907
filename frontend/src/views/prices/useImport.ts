import type { ImportPreview, PriceImport } from '@maslin/shared'
import { onScopeDispose, ref, shallowRef, watch, type Ref } from 'vue'
import { applyImport, previewImport } from '../../api/priceImports'
import { applyRequest, previewRequest, type ImportDraft } from './importDraft'

const PAUSE = 300

/**
 * Keeps a preview in step with the draft: a change is sent after a short pause, and an answer that a later change has
 * overtaken is dropped. Applying sends the same key for the same content, so that a second click or a lost answer
 * applies nothing twice.
 */
export function useImport(farmId: Ref<string>, draft: Ref<ImportDraft | undefined>) {
  const preview = shallowRef<ImportPreview>()
  const problem = shallowRef<unknown>()
  const reading = ref(false)
  const applying = ref(false)
  const result = shallowRef<PriceImport>()
  let underway: AbortController | undefined
  let timer: ReturnType<typeof setTimeout> | undefined
  let sent: { content: string; key: string } | undefined

  async function read(): Promise<void> {
    const now = draft.value
    underway?.abort()
    if (!now) return
    const mine = (underway = new AbortController())
    reading.value = true
    problem.value = undefined
    try {
      const answer = await previewImport(
        farmId.value,
        previewRequest(now, preview.value?.mapping),
        mine.signal,
      )
      if (!mine.signal.aborted) preview.value = answer
    } catch (error) {
      if (mine.signal.aborted) return
      problem.value = error
    } finally {
      if (underway === mine) reading.value = false
    }
  }

  watch(draft, (now, before) => {
    clearTimeout(timer)
    if (now?.text !== before?.text) {
      preview.value = undefined
      problem.value = undefined
      void read()
    } else timer = setTimeout(() => void read(), PAUSE)
    if (now) reading.value = true
  })
  onScopeDispose(() => {
    clearTimeout(timer)
    underway?.abort()
  })

  async function apply(): Promise<PriceImport | undefined> {
    if (!draft.value || !preview.value || reading.value) return undefined
    const body = applyRequest(draft.value, preview.value)
    const content = JSON.stringify(body)
    if (sent?.content !== content) sent = { content, key: crypto.randomUUID() }
    applying.value = true
    problem.value = undefined
    try {
      result.value = await applyImport(farmId.value, body, sent.key)
      return result.value
    } catch (error) {
      problem.value = error
      return undefined
    } finally {
      applying.value = false
    }
  }

  return { preview, problem, reading, applying, result, read, apply }
}
