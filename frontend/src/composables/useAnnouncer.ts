import { nextTick, readonly, ref } from 'vue'

const message = ref('')

/** Says something to people who listen to the page instead of seeing it. App.vue holds the live region. */
export function useAnnouncer() {
  async function announce(text: string): Promise<void> {
    // An unchanged text would not be spoken a second time.
    message.value = ''
    await nextTick()
    message.value = text
  }
  return { message: readonly(message), announce }
}
