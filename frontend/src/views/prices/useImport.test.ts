import type { ImportPreview, PriceImport } from '@maslin/shared'
import { flushPromises } from '@vue/test-utils'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { effectScope, ref, shallowRef, type EffectScope } from 'vue'
import { applyImport, previewImport } from '../../api/priceImports'
import { newDraft, type ImportDraft } from './importDraft'
import { useImport } from './useImport'

vi.mock('../../api/priceImports')

const preview = (fileName: string): ImportPreview => ({
  mapping: { header: true, delimiter: ',', decimal: '.', dateOrder: 'ymd', columns: { feed: 0 } },
  header: [fileName],
  rows: [],
  counts: { new: 1, changed: 0, same: 0, error: 0, leftOut: 0 },
  unusedColumns: [],
  unknownFeeds: [],
  missingFields: [],
})
const applied = { id: 'i' } as PriceImport
let scope: EffectScope

function start() {
  const draft = shallowRef<ImportDraft>()
  scope = effectScope()
  const state = scope.run(() => useImport(ref('farm'), draft))
  if (!state) throw new Error('no scope')
  return { draft, ...state }
}
beforeEach(() => {
  vi.resetAllMocks()
  vi.useFakeTimers()
})
afterEach(() => {
  scope.stop()
  vi.useRealTimers()
})

describe('the preview', () => {
  it('is read at once for a new list and after a pause for a correction', async () => {
    vi.mocked(previewImport).mockResolvedValue(preview('a'))
    const { draft, preview: shown } = start()
    draft.value = newDraft('text', 'a', 'UTF-8', '')
    await flushPromises()
    expect(shown.value?.header).toEqual(['a'])
    draft.value = { ...draft.value, supplierName: 'R' }
    draft.value = { ...draft.value, supplierName: 'Ridge' }
    await vi.advanceTimersByTimeAsync(400)
    expect(previewImport).toHaveBeenCalledTimes(2)
    expect(vi.mocked(previewImport).mock.calls[1]?.[1]).toMatchObject({ supplierName: 'Ridge' })
  })

  it('drops an answer that a later list has overtaken', async () => {
    let answerFirst: (answer: ImportPreview) => void = () => undefined
    vi.mocked(previewImport)
      .mockReturnValueOnce(new Promise((resolve) => (answerFirst = resolve)))
      .mockResolvedValueOnce(preview('second'))
    const { draft, preview: shown } = start()
    draft.value = newDraft('one', 'first', 'UTF-8', '')
    await flushPromises()
    draft.value = newDraft('two', 'second', 'UTF-8', '')
    await flushPromises()
    answerFirst(preview('first'))
    await flushPromises()
    expect(shown.value?.header).toEqual(['second'])
  })
})

describe('applying', () => {
  it('sends the same key for a second try, another one for another content', async () => {
    vi.mocked(previewImport).mockResolvedValue(preview('a'))
    vi.mocked(applyImport).mockRejectedValueOnce(new Error('lost')).mockResolvedValue(applied)
    const { draft, apply, problem, result } = start()
    draft.value = newDraft('text', 'a', 'UTF-8', '')
    await flushPromises()
    expect(await apply()).toBeUndefined()
    expect(problem.value).toEqual(new Error('lost'))
    expect(await apply()).toBe(applied)
    expect(result.value).toBe(applied)
    draft.value = { ...draft.value, supplierName: 'Ridge' }
    await vi.advanceTimersByTimeAsync(400)
    await apply()
    const [first, second, third] = vi.mocked(applyImport).mock.calls.map((call) => call[2])
    expect(first).toBe(second)
    expect(third).not.toBe(first)
  })

  it('waits until the preview has caught up with the last correction', async () => {
    vi.mocked(previewImport).mockResolvedValue(preview('a'))
    const { draft, apply } = start()
    draft.value = newDraft('text', 'a', 'UTF-8', '')
    await flushPromises()
    draft.value = { ...draft.value, supplierName: 'Ridge' }
    await flushPromises()
    await apply()
    expect(applyImport).not.toHaveBeenCalled()
  })
})
