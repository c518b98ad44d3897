import { fileURLToPath } from 'node:url'
import { defineConfig } from 'vitest/config'

const root = fileURLToPath(new URL('.', import.meta.url))
const resolve = { alias: { '#shared': `${root}shared`, '~': root.replace(/\/$/, ''), '@': root.replace(/\/$/, '') } }

/** api and browser run against the built server, one file at a time: two cores, one browser. */
export default defineConfig({
  test: {
    projects: [
      { resolve, test: { name: 'unit', include: ['tests/unit/**/*.test.ts'], testTimeout: 30_000 } },
      // Long enough for fast-check to shrink a counterexample.
      { resolve, test: { name: 'properties', include: ['tests/properties/**/*.test.ts'], testTimeout: 120_000 } },
      { resolve, test: { name: 'reference', include: ['tests/reference/**/*.test.ts'], globalSetup: 'tests/helpers/records.ts', testTimeout: 30_000 } },
      // After all others: it reads what the reference tests of the same run recorded.
      { resolve, test: { name: 'check-values', include: ['tests/check-values/**/*.test.ts'], sequence: { groupOrder: 1 } } },
      { resolve, test: { name: 'api', include: ['tests/api/**/*.test.ts'], testTimeout: 30_000, hookTimeout: 60_000 } },
      {
        resolve,
        test: { name: 'browser', include: ['tests/browser/**/*.test.ts'], testTimeout: 90_000, hookTimeout: 90_000, fileParallelism: false },
      },
    ],
  },
})
