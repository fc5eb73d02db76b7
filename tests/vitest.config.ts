import vue from '@vitejs/plugin-vue'
import { quasar } from '@quasar/vite-plugin'
import { defineConfig } from 'vitest/config'

/** API tests share one database server, each file with a schema of its own, two files at a time; browser tests share one program. */
export default defineConfig({
  root: new URL('..', import.meta.url).pathname,
  plugins: [vue(), quasar()],
  test: {
    projects: [
      {
        extends: true,
        test: {
          name: 'unit',
          include: ['tests/unit/**/*.test.ts', 'tests/reference/**/*.test.ts'],
          environment: 'node',
          // Many seeded hours of sea take seconds where the other lane is at work too.
          testTimeout: 30_000,
        },
      },
      {
        extends: true,
        test: {
          name: 'api',
          include: ['tests/api/**/*.test.ts'],
          environment: 'node',
          globalSetup: ['tests/support/databaseServer.ts'],
          fileParallelism: true,
          maxWorkers: 2,
          testTimeout: 20_000,
          hookTimeout: 60_000,
        },
      },
      {
        extends: true,
        test: {
          name: 'client',
          include: ['tests/client/**/*.test.ts'],
          environment: 'happy-dom',
          setupFiles: ['tests/client/setup.ts'],
          testTimeout: 30_000,
        },
      },
      {
        extends: true,
        test: {
          name: 'e2e',
          include: ['tests/e2e/**/*.test.ts'],
          environment: 'node',
          globalSetup: ['tests/support/runningProgram.ts'],
          fileParallelism: false,
          testTimeout: 90_000,
          hookTimeout: 120_000,
        },
      },
    ],
  },
})
