import type { Directive } from 'vue'

/** Lets a table that is wider than its place be scrolled by key: Vuetify's wrapper cannot take the focus by itself. */
export const vScrollable: Directive<HTMLElement> = {
  mounted: (element) => element.querySelector('.v-table__wrapper')?.setAttribute('tabindex', '0'),
}
