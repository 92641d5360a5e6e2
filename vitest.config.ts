import { defineConfig } from 'vitest/config';

const setupFiles = ['tests/setup/console.ts'];

export default defineConfig({
  esbuild: { jsx: 'automatic' },
  test: {
    reporters: ['default', './tests/setup/totals.ts'],
    testTimeout: 20_000,
    hookTimeout: 60_000,
    projects: [
      {
        extends: true,
        test: {
          name: 'unit',
          include: ['tests/casting/**/*.test.ts', 'tests/commission/**/*.test.ts'],
          setupFiles,
        },
      },
      {
        extends: true,
        test: {
          name: 'server',
          include: ['tests/server/**/*.test.ts', 'tests/demo/**/*.test.ts'],
          globalSetup: ['tests/setup/template-database.ts'],
          setupFiles,
        },
      },
      {
        extends: true,
        test: { name: 'fakes', include: ['tests/fakes/**/*.test.ts'], setupFiles },
      },
      {
        extends: true,
        test: {
          name: 'component',
          include: ['tests/components/**/*.test.tsx'],
          environment: 'happy-dom',
          setupFiles: [...setupFiles, 'tests/setup/components.ts'],
        },
      },
      {
        extends: true,
        test: {
          name: 'launch',
          include: ['tests/launch/**/*.test.ts'],
          testTimeout: 180_000,
          hookTimeout: 180_000,
          setupFiles,
          fileParallelism: false,
          sequence: { groupOrder: 1 },
        },
      },
      {
        extends: true,
        test: {
          name: 'journeys',
          include: ['tests/journeys/**/*.test.ts'],
          globalSetup: ['tests/setup/running-studio.ts'],
          testTimeout: 240_000,
          hookTimeout: 240_000,
          setupFiles,
          fileParallelism: false,
          sequence: { groupOrder: 2 },
        },
      },
    ],
  },
});
