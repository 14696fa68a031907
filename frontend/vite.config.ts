import vue from '@vitejs/plugin-vue'
import { defineConfig } from 'vite'
import vuetify from 'vite-plugin-vuetify'

/** Where the API answers while developing; the development start sets both ports. */
const apiOrigin = `http://127.0.0.1:${process.env.API_PORT ?? '8081'}`

export default defineConfig({
  plugins: [vue(), vuetify({ autoImport: true })],
  server: {
    host: '127.0.0.1',
    port: Number(process.env.PORT ?? 8080),
    strictPort: true,
    proxy: { '/api': { target: apiOrigin, changeOrigin: false } },
  },
  build: {
    outDir: 'dist',
    emptyOutDir: true,
    // Which page loads which chunks: read by the benchmark of bundle sizes.
    manifest: true,
    target: 'es2022',
    // Fonts and pictures stay files, so that the content security policy needs no data: sources.
    assetsInlineLimit: 0,
    // The sign-in page is measured by `npm run bench`; the default warning speaks of uncompressed sizes.
    chunkSizeWarningLimit: 1000,
  },
})
