import { resolve } from 'node:path';
import { defineConfig } from 'electron-vite';

const here = (path: string): string => resolve(import.meta.dirname, path);

// Everything is bundled: the packages stay development dependencies, and nothing of them that the
// app does not use ends up in it (natural's database drivers, for one).
const bundled = { externalizeDeps: false, sourcemap: false, reportCompressedSize: false } as const;

export default defineConfig({
  main: {
    build: {
      ...bundled,
      outDir: 'out/main',
      lib: {
        entry: {
          command: here('main/shells/command.ts'),
          'fit.worker': here('main/work/fit.worker.ts'),
        },
        formats: ['es'],
      },
      rolldownOptions: { external: ['electron'] },
    },
  },
});
