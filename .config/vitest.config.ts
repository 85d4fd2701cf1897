import { svelte } from '@sveltejs/vite-plugin-svelte';
import { defineConfig } from 'vitest/config';
import { assemblyscript } from './assemblyscript.ts';

const shared = { testTimeout: 60_000, hookTimeout: 180_000 };

export default defineConfig({
  test: {
    globalSetup: ['test/build-first.ts'],
    projects: [
      {
        plugins: [assemblyscript()],
        test: {
          ...shared,
          name: 'engine and main',
          include: ['test/**/*.test.ts'],
          exclude: ['test/renderer/**'],
        },
      },
      {
        // State classes hold runes; they run in Node as they would in a window.
        plugins: [svelte({ configFile: false })],
        resolve: { conditions: ['browser'] },
        test: { ...shared, name: 'renderer', include: ['test/renderer/**/*.test.ts'] },
      },
    ],
  },
});
