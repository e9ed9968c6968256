import { defineConfig } from 'vitest/config'

export default defineConfig({
  root: new URL('..', import.meta.url).pathname,
  test: {
    include: ['tests/**/*.test.ts'],
    testTimeout: 60_000,
    hookTimeout: 120_000,
    pool: 'forks',
    reporters: process.env.CI ? ['default', ['json', { outputFile: process.env.DARKLINE_TEST_JSON ?? 'coverage/tests.json' }]] : ['default'],
  },
})
