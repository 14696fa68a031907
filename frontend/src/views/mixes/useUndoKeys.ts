import { useEventListener } from '@vueuse/core'
import type { UndoStack } from '../../composables/useUndo'

/** Ctrl-Z and Ctrl-Shift-Z (Ctrl-Y), outside fields, where the keys undo typing. */
export function useUndoKeys(history: Pick<UndoStack<unknown>, 'undo' | 'redo'>): void {
  useEventListener(window, 'keydown', (event) => {
    if (!(event.ctrlKey || event.metaKey) || event.altKey) return
    const inField =
      event.target instanceof Element && event.target.closest('input, textarea, select, [contenteditable]')
    if (inField) return
    const key = event.key.toLowerCase()
    const step =
      key === 'z' ? (event.shiftKey ? history.redo : history.undo) : key === 'y' ? history.redo : undefined
    if (!step) return
    event.preventDefault()
    step()
  })
}
