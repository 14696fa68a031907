import { defineStore } from 'pinia'
import { ref, watch } from 'vue'

export const appearances = ['system', 'light', 'dark'] as const
export type Appearance = (typeof appearances)[number]

const KEY = 'maslin.appearance'

/** What a person prefers on this device. Units and currency are the farm's, not the person's. */
export const usePreferencesStore = defineStore('preferences', () => {
  const saved = localStorage.getItem(KEY)
  const appearance = ref<Appearance>(appearances.find((one) => one === saved) ?? 'system')
  watch(appearance, (next) => localStorage.setItem(KEY, next))
  return { appearance }
})
