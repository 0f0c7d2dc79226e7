import { defineConfig } from 'vitest/config';

export default defineConfig({
  test: {
    include: ['test/**/*.test.ts'],
    testTimeout: 60_000,
    hookTimeout: 120_000,
    // The tests fit two cores: the default would leave one idle there.
    maxWorkers: 2,
    reporters: ['default'],
  },
});
