// npm run fuzz -- [--seconds 60] [--seed 1]: files with things wrong in them, by chance.
import { spawnSync } from 'node:child_process';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { parseArgs } from 'node:util';

const { values } = parseArgs({
  options: {
    seconds: { type: 'string', default: '60' },
    seed: { type: 'string', default: String(Date.now() % 1_000_000) },
  },
});
const top = join(dirname(fileURLToPath(import.meta.url)), '..', '..');
const vitest = join(top, 'node_modules', 'vitest', 'vitest.mjs');
const { status } = spawnSync(
  process.execPath,
  [vitest, 'run', '-c', '.config/vitest.config.ts', '--root', '.', 'test/fuzz'],
  {
    cwd: top,
    stdio: 'inherit',
    env: { ...process.env, FUZZ_SECONDS: values.seconds, FUZZ_SEED: values.seed },
  },
);
process.exitCode = status ?? 1;
