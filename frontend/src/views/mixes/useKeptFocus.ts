import { onBeforeUpdate, onUpdated } from 'vue'

/**
 * Keeps the focus where it is while the rows of a component change their order with a new answer: an element that is
 * moved in the document loses it.
 */
export function useKeptFocus(): void {
  let held: Element | null = null
  onBeforeUpdate(() => {
    held = document.activeElement
  })
  onUpdated(() => {
    const lost = document.activeElement === document.body
    if (lost && held instanceof HTMLElement && held.isConnected) held.focus({ preventScroll: true })
    held = null
  })
}
