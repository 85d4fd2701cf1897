// npm run bench -- NAME [--quick]: builds the benches and runs one. Plain JavaScript, because it must
// run before anything is built.
import { spawnSync } from 'node:child_process';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { build } from 'vite';

const benches = {
  gather: 'reading and preparing a million words beside a plain tokenizer and stemmer',
  engine: 'speed and quality of fits beside scikit-learn, and fits of a million words',
  decisions: 'what each kind of decision does on top of a fit, and what it leaves alone',
  file: 'the study file beside reading its bytes, a bare fdatasync, and the text and fits in it',
  search: 'keyword in context over a generated study of a million words',
};

const here = dirname(fileURLToPath(import.meta.url));
const top = join(here, '..', '..');
const [name, ...options] = process.argv.slice(2);

if (name === undefined) {
  const lines = Object.entries(benches).map(([key, what]) => `  ${key.padEnd(12)}${what}\n`);
  process.stdout.write(`npm run bench -- NAME [--quick]\n\n${lines.join('')}`);
} else if (!Object.hasOwn(benches, name) || options.some((option) => option !== '--quick')) {
  process.stderr.write('There is no such bench. Without a name, npm run bench lists them.\n');
  process.exitCode = 2;
} else {
  await build({ configFile: join(here, 'vite.config.ts') });
  const { status } = spawnSync(
    process.execPath,
    ['--max-old-space-size=8192', join(top, 'out', 'bench', `${name}.js`), ...options],
    { cwd: top, stdio: 'inherit' },
  );
  process.exitCode = status ?? 1;
}
