import { defineConfig } from 'vitest/config';

export default defineConfig({
  test: {
    projects: [
      {
        test: {
          name: 'unit',
          environment: 'node',
          include: ['tests/casting/**/*.test.ts', 'tests/commission/**/*.test.ts'],
        },
      },
    ],
  },
});
