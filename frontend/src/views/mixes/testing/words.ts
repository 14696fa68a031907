import { mount } from '@vue/test-utils'
import { createPinia } from 'pinia'
import { defineComponent, h } from 'vue'
import { i18n } from '../../../i18n'
import { useWords, type Words } from '../model/words'

/** The words of a farm in pounds and dollars, as the pages have them. */
export function wordsForTests(): Words {
  let words: Words | undefined
  const Probe = defineComponent({
    setup() {
      words = useWords()
      return () => h('i')
    },
  })
  mount(Probe, { global: { plugins: [createPinia(), i18n] } })
  if (!words) throw new Error('the probe was not set up')
  return words
}
