import { readdirSync } from 'node:fs';
import { resolve } from 'node:path';
import { svelte } from '@sveltejs/vite-plugin-svelte';
import { defineConfig } from 'electron-vite';
import type { Plugin } from 'vite';
import { assemblyscript } from './.config/assemblyscript.ts';
import { noteLicences, writeLicences } from './.config/licences.ts';

const here = (path: string): string => resolve(import.meta.dirname, path);

/** One entry for each worker: it is started from its own file. */
const workers = Object.fromEntries(
  readdirSync(here('main/work'))
    .filter((name) => name.endsWith('.worker.ts'))
    .map((name) => [name.slice(0, -'.ts'.length), here(`main/work/${name}`)]),
);

// Everything is bundled: the packages stay development dependencies, and nothing of them that the
// app does not use ends up in it (natural's database drivers, for one).
const bundled = {
  externalizeDeps: false,
  sourcemap: false,
  reportCompressedSize: false,
  chunkSizeWarningLimit: 4000,
} as const;

// How long each plugin took is of no use to whoever starts the app.
const checks = { pluginTimings: false } as const;

/** The reader of PDFs would load a native canvas to draw with; here it only reads text. */
const withoutCanvas: Plugin = {
  name: 'without-canvas',
  transform: (code, id) =>
    /pdfjs-dist[\\/].*[\\/]pdf\.mjs$/u.test(id)
      ? code.replaceAll('require("@napi-rs/canvas")', 'undefined')
      : null,
};

export default defineConfig({
  main: {
    plugins: [assemblyscript(), withoutCanvas, noteLicences()],
    build: {
      ...bundled,
      outDir: 'out/main',
      lib: {
        entry: {
          command: here('main/shells/command.ts'),
          electron: here('main/shells/electron.ts'),
          loopback: here('main/shells/loopback.ts'),
          ...workers,
        },
        formats: ['es'],
      },
      rolldownOptions: { external: ['electron'], checks },
    },
  },
  preload: {
    plugins: [noteLicences()],
    build: {
      ...bundled,
      outDir: 'out/preload',
      // A sandboxed preload is one CommonJS file.
      lib: { entry: here('main/shells/preload.ts'), formats: ['cjs'], fileName: 'preload' },
      rolldownOptions: {
        external: ['electron'],
        output: { entryFileNames: 'preload.cjs', codeSplitting: false },
        checks,
      },
    },
  },
  renderer: {
    root: here('renderer'),
    // Opened from a folder of its own, in Electron and in a browser alike.
    base: '/',
    plugins: [svelte(), noteLicences(), writeLicences()],
    build: {
      outDir: here('out/renderer'),
      emptyOutDir: true,
      sourcemap: false,
      reportCompressedSize: false,
      minify: true,
      // Every part is a file: the window may load nothing from inside an address (data:).
      assetsInlineLimit: 0,
      modulePreload: { polyfill: false },
      rolldownOptions: { input: here('renderer/index.html'), checks },
    },
  },
});
