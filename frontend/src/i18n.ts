import { createI18n } from 'vue-i18n'
import en from './locales/en'

/** Every word on the pages. A second language is a second folder beside `locales/en`. */
export const i18n = createI18n({
  legacy: false,
  locale: 'en',
  fallbackLocale: 'en',
  messages: { en },
})

/** For code outside components, where `useI18n` is not at hand. */
export const translate = i18n.global.t
