import { defineConfig } from 'vitest/config';

export default defineConfig({
  test: {
    include: ['test/browser/screenshots.ts'],
    globalSetup: ['test/build-first.ts'],
    testTimeout: 600_000,
    fileParallelism: false,
  },
});
