import '@fontsource/ibm-plex-sans/latin-400.css'
import '@fontsource/ibm-plex-sans/latin-500.css'
import '@fontsource/ibm-plex-sans/latin-600.css'
import '@fontsource/ibm-plex-sans/latin-ext-400.css'
import '@fontsource/ibm-plex-sans/latin-ext-600.css'
import 'vuetify/styles/core'
import 'vuetify/styles/utilities'
import './theme/base.css'

import { VueQueryPlugin } from '@tanstack/vue-query'
import { createPinia } from 'pinia'
import { createApp } from 'vue'
import { z } from 'zod'
import App from './App.vue'
import { i18n } from './i18n'
import { queryClient } from './queries'
import { createAppRouter } from './router'
import { vuetify } from './theme/vuetify'

// Compiled validators need `new Function`, which the content security policy forbids.
z.config({ jitless: true })

createApp(App)
  .use(createPinia())
  .use(i18n)
  .use(vuetify)
  .use(VueQueryPlugin, { queryClient })
  .use(createAppRouter())
  .mount('#app')
