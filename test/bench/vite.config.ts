import { join } from 'node:path';
import { defineConfig } from 'vite';
import { assemblyscript } from '../../.config/assemblyscript.ts';

const top = join(import.meta.dirname, '..', '..');
const workers = ['read.worker', 'search.worker', 'fit.worker', 'pool.worker', 'evidence.worker', 'prepare.worker'];

/** Benches are bundled as the app is, so that the same code is measured. */
export default defineConfig({
  root: top,
  logLevel: 'warn',
  plugins: [assemblyscript()],
  ssr: { noExternal: true },
  build: {
    ssr: true,
    outDir: join(top, 'out', 'bench'),
    rolldownOptions: {
      input: {
        gather: join(top, 'test', 'bench', 'gather.ts'),
        engine: join(top, 'test', 'bench', 'engine.ts'),
        decisions: join(top, 'test', 'bench', 'decisions.ts'),
        file: join(top, 'test', 'bench', 'file.ts'),
        search: join(top, 'test', 'bench', 'search.ts'),
        large: join(top, 'test', 'bench', 'large.ts'),
        ...Object.fromEntries(
          workers.map((name) => [name, join(top, 'main', 'work', `${name}.ts`)]),
        ),
      },
      output: { entryFileNames: '[name].js', chunkFileNames: 'chunks/[name]-[hash].js' },
    },
  },
});
