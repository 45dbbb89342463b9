import { defineConfig } from 'vitest/config'

export default defineConfig({
  resolve: {
    tsconfigPaths: true,
    alias: { 'server-only': new URL('./tests/_server-only.ts', import.meta.url).pathname },
  },
  test: {
    // Far above what a test takes: machines are shared, and a slow one is no fault of the code.
    testTimeout: 30_000,
    hookTimeout: 60_000,
    projects: [
      {
        extends: true,
        test: {
          name: 'unit',
          environment: 'node',
          include: ['{app,components,lib,db,migrations}/**/*.test.ts'],
          setupFiles: ['tests/_setup-node.ts'],
        },
      },
      {
        extends: true,
        test: {
          name: 'component',
          environment: 'jsdom',
          include: ['{app,components}/**/*.test.tsx'],
          setupFiles: ['tests/_setup-dom.ts'],
        },
      },
      {
        extends: true,
        test: {
          name: 'conformance',
          environment: 'node',
          include: ['tests/conformance/**/*.test.ts'],
          testTimeout: 120_000,
          hookTimeout: 120_000,
        },
      },
      {
        extends: true,
        test: {
          name: 'e2e',
          environment: 'node',
          include: ['tests/e2e/**/*.test.ts'],
          testTimeout: 240_000,
          hookTimeout: 240_000,
          fileParallelism: false,
        },
      },
    ],
  },
})
