import vue from '@vitejs/plugin-vue'
import vuetify from 'vite-plugin-vuetify'
import { defineConfig } from 'vitest/config'

/** Tests against a running MariaDB: a server is started for them unless the test run has brought one. */
const withDatabase = { environment: 'node' as const, globalSetup: ['tests/support/globalSetup.ts'] }

/** Projects of one group run side by side; the groups one after another, so that browsers have the machine to themselves. */
const group = (groupOrder: number, maxWorkers: number) => ({ sequence: { groupOrder }, maxWorkers })

export default defineConfig({
  test: {
    projects: [
      {
        test: {
          name: 'unit',
          environment: 'node',
          include: ['{shared,solver,backend}/{src,scripts}/**/*.test.ts', 'tests/support/**/*.test.ts'],
          ...group(0, 2),
        },
      },
      {
        plugins: [vue(), vuetify({ autoImport: true })],
        test: {
          name: 'frontend',
          environment: 'happy-dom',
          include: ['frontend/src/**/*.test.ts'],
          setupFiles: ['tests/support/frontendSetup.ts'],
          server: { deps: { inline: ['vuetify'] } },
          ...group(0, 2),
        },
      },
      {
        test: {
          name: 'reference',
          environment: 'node',
          include: ['tests/reference/**/*.test.ts'],
          testTimeout: 120_000,
          ...group(0, 2),
        },
      },
      {
        test: {
          name: 'api',
          ...withDatabase,
          include: ['tests/api/**/*.test.ts'],
          testTimeout: 30_000,
          hookTimeout: 60_000,
          ...group(1, 2),
        },
      },
      {
        test: {
          name: 'security',
          ...withDatabase,
          include: ['tests/security/**/*.test.ts'],
          testTimeout: 30_000,
          hookTimeout: 60_000,
          ...group(1, 2),
        },
      },
      {
        test: {
          name: 'faults',
          ...withDatabase,
          include: ['tests/faults/**/*.test.ts'],
          testTimeout: 120_000,
          hookTimeout: 120_000,
          ...group(2, 1),
        },
      },
      {
        test: {
          name: 'e2e',
          ...withDatabase,
          include: ['tests/e2e/**/*.test.ts'],
          testTimeout: 120_000,
          hookTimeout: 120_000,
          ...group(3, 1),
        },
      },
    ],
  },
})
