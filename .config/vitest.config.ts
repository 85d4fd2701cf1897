import { defineConfig } from 'vitest/config';
import { assemblyscript } from './assemblyscript.ts';

export default defineConfig({
  plugins: [assemblyscript()],
  test: {
    include: ['test/**/*.test.ts'],
    globalSetup: ['test/build-first.ts'],
    testTimeout: 60_000,
    hookTimeout: 180_000,
  },
});
