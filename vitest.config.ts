import { defineConfig } from 'vitest/config'

export default defineConfig({
  test: {
    projects: [
      {
        test: {
          name: 'core',
          include: ['test/**/*.test.ts'],
          exclude: ['test/cli/**', 'test/browser/**'],
          environment: 'node',
          // The allocation budgets call gc(); they fail where it is missing.
          execArgv: ['--expose-gc'],
          testTimeout: 60_000
        }
      },
      {
        test: {
          name: 'program',
          include: ['test/cli/**/*.test.ts', 'test/browser/**/*.test.ts'],
          environment: 'node',
          // Builds the app and the command once, as a user would have them.
          globalSetup: ['test/build.ts'],
          testTimeout: 120_000,
          hookTimeout: 120_000,
          fileParallelism: false
        }
      }
    ]
  }
})
