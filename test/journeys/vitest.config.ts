import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';

export default defineConfig({
  test: {
    root: fileURLToPath(new URL('../..', import.meta.url)),
    // figures are told, not judged: they run when asked for (SPEED=1)
    include: [process.env['SPEED'] ? 'test/journeys/speed.figures.ts' : 'test/journeys/*.journey.ts'],
    globalSetup: ['test/journeys/build-first.ts'],
    testTimeout: 600_000,
    expect: { poll: { timeout: 30_000, interval: 100 } },
    hookTimeout: 600_000,
    pool: 'forks',
    maxWorkers: 1,
    fileParallelism: false,
  },
});
