import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';

export default defineConfig({
  test: {
    root: fileURLToPath(new URL('../..', import.meta.url)),
    include: ['test/journeys/*.journey.ts'],
    globalSetup: ['test/journeys/build-first.ts'],
    testTimeout: 600_000,
    expect: { poll: { timeout: 30_000, interval: 100 } },
    hookTimeout: 600_000,
    pool: 'forks',
    maxWorkers: 1,
    fileParallelism: false,
  },
});
