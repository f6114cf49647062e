import { defineConfig } from 'vitest/config'

// Browser tests run against the production build in `dist`, one file at a time: each starts its own server.
export default defineConfig({
  test: {
    include: ['tests/e2e/**/*.e2e.test.ts'],
    environment: 'node',
    testTimeout: 120_000,
    hookTimeout: 120_000,
    fileParallelism: false,
    sequence: { concurrent: false },
  },
})
