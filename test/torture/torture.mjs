// npm run torture -- [--rounds N] [--seed S]: kills a process that works on a study at random moments.
// Plain JavaScript, because it must run before anything is built.
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { parseArgs } from 'node:util';
import { build } from 'vite';

const { values } = parseArgs({
  options: { rounds: { type: 'string', default: '200' }, seed: { type: 'string' } },
});
const rounds = Number(values.rounds);
const seed = Number(values.seed ?? Date.now() % 1_000_000_000);
if (![rounds, seed].every((number) => Number.isSafeInteger(number) && number >= 0)) {
  process.stderr.write('npm run torture -- [--rounds N] [--seed S], whole numbers both.\n');
  process.exit(2);
}

const at = (name) => fileURLToPath(new URL(`../main/project/${name}.ts`, import.meta.url));
const folder = mkdtempSync(join(tmpdir(), 'understory-torture-'));
try {
  await build({
    configFile: false,
    logLevel: 'silent',
    build: {
      ssr: true,
      outDir: folder,
      emptyOutDir: false,
      target: 'node20',
      rollupOptions: {
        input: { torture: at('torture'), child: at('children/torture-child') },
        external: ['vite'],
        output: { format: 'es', entryFileNames: '[name].mjs', chunkFileNames: '[name].mjs' },
      },
    },
  });
  const { torture } = await import(pathToFileURL(join(folder, 'torture.mjs')).href);
  process.stdout.write(`Seed ${seed}, ${rounds} rounds …\n`);
  const wrong = await torture(join(folder, 'child.mjs'), { rounds, seed });
  for (const fault of wrong) process.stdout.write(`${fault}\n`);
  process.stdout.write(
    wrong.length === 0 ? 'Nothing was lost.\n' : `Seed ${seed} lost something.\n`,
  );
  process.exitCode = wrong.length === 0 ? 0 : 1;
} finally {
  rmSync(folder, { recursive: true, force: true });
}
