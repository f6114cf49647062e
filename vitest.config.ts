import { defineConfig } from 'vitest/config'

// astro:env reads the process; tests must never open a real data folder.
process.env.DWELLHOUR_DATA_DIR = '/nonexistent-dwellhour-test-data'
process.env.DWELLHOUR_SECRET ??= 'a signing key for tests only, forty characters'
process.env.DWELLHOUR_LOG_LEVEL ??= 'silent'

export default defineConfig({
  test: {
    include: ['tests/**/*.test.ts'],
    exclude: ['tests/e2e/**'],
    environment: 'node',
    setupFiles: ['tests/support/property-seed.ts'],
    testTimeout: 20_000,
  },
})
