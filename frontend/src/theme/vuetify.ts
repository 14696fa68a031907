import { createVuetify, type ThemeDefinition } from 'vuetify'
import { aliases, mdi } from 'vuetify/iconsets/mdi-svg'
import { dark, light } from './tokens'

function themeOf(tokens: Record<keyof typeof light, string>, isDark: boolean): ThemeDefinition {
  const onStrong = isDark ? tokens.sunken : tokens.surface
  return {
    dark: isDark,
    colors: {
      ...tokens,
      background: tokens.paper,
      'on-background': tokens.ink,
      'on-surface': tokens.ink,
      'on-sunken': tokens.ink,
      primary: tokens.pasture,
      'on-primary': onStrong,
      secondary: tokens.slate,
      'on-secondary': onStrong,
      error: tokens.clay,
      'on-error': onStrong,
      warning: tokens.clay,
      info: tokens.slate,
      success: tokens.pasture,
      'on-beet': onStrong,
      'on-clay': onStrong,
    },
    variables: {
      'border-color': tokens.line,
      'border-opacity': 1,
      'high-emphasis-opacity': 1,
      // Vuetify's own 0.6 is too faint for words on paper.
      'medium-emphasis-opacity': 0.76,
      'hover-opacity': 0.06,
      'focus-opacity': 0.1,
    },
  }
}

const field = { variant: 'outlined', density: 'compact', hideDetails: 'auto' } as const

/** Vuetify with our own colours, density and shapes as defaults of its components. */
/** The content security policy lets the theme's style element in by this word, new with every page. */
const cspNonce = document.querySelector<HTMLMetaElement>('meta[name="style-nonce"]')?.content

export const vuetify = createVuetify({
  theme: {
    ...(cspNonce ? { cspNonce } : {}),
    defaultTheme: 'system',
    themes: { light: themeOf(light, false), dark: themeOf(dark, true) },
  },
  icons: { defaultSet: 'mdi', aliases, sets: { mdi } },
  defaults: {
    VBtn: { variant: 'outlined', rounded: 'md', ripple: false },
    VTextField: field,
    VTextarea: { ...field, autoGrow: true, rows: 2 },
    VSelect: field,
    VAutocomplete: { ...field, autoSelectFirst: true },
    VCombobox: field,
    VFileInput: field,
    VCheckbox: { density: 'compact', hideDetails: 'auto', color: 'primary' },
    VSwitch: { density: 'compact', hideDetails: 'auto', color: 'primary', inset: true },
    VRadioGroup: { density: 'compact', hideDetails: 'auto', color: 'primary' },
    VCard: { variant: 'flat', rounded: 'lg', border: true },
    VDialog: { maxWidth: 640 },
    VChip: { size: 'small', variant: 'tonal', rounded: 'md' },
    VTable: { density: 'compact' },
    VAlert: { variant: 'tonal', density: 'compact', rounded: 'md' },
    VTooltip: { location: 'top' },
    VMenu: { offset: 6 },
    VList: { density: 'compact' },
    VProgressLinear: { color: 'primary', rounded: true },
  },
})
