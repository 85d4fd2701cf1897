// Builds out/ when it is older than what it is made from. Plain JavaScript, because it must run
// before anything is built.
import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { dirname, join, relative } from 'node:path';
import { fileURLToPath } from 'node:url';

export const top = join(dirname(fileURLToPath(import.meta.url)), '..', '..');
const stamp = join(top, 'out', 'made-from');

const sources = ['engine', 'main', 'renderer', 'resources', 'electron.config.ts', '.config'];
const single = ['package-lock.json'];

/** Names, sizes and times of all that goes into a build, as one hash. */
function fingerprint() {
  const hash = createHash('sha256');
  const add = (path) => {
    const stats = statSync(path);
    if (!stats.isDirectory()) {
      hash.update(`${relative(top, path)} ${stats.size} ${stats.mtimeMs}\n`);
      return;
    }
    for (const name of readdirSync(path).sort()) add(join(path, name));
  };
  for (const name of [...sources, ...single]) add(join(top, name));
  return hash.digest('hex');
}

function isFresh(print) {
  try {
    return readFileSync(stamp, 'utf8') === print;
  } catch {
    return false;
  }
}

/**
 * Makes sure that out/ holds what the sources say; returns false, after the builder's own message,
 * where it cannot be built.
 */
export function buildIfNeeded({ announce = true } = {}) {
  const print = fingerprint();
  if (isFresh(print)) return true;
  const builder = join(top, 'node_modules', 'electron-vite', 'bin', 'electron-vite.js');
  if (!existsSync(builder)) {
    process.stderr.write('What Understory is built with is not installed; run npm ci first.\n');
    return false;
  }
  if (announce) process.stderr.write('Building once; this takes a few seconds …\n');
  const { status } = spawnSync(
    process.execPath,
    [builder, 'build', '-c', 'electron.config.ts', '--logLevel', 'warn'],
    { cwd: top, stdio: ['ignore', 2, 2] },
  );
  if (status !== 0) return false;
  mkdirSync(dirname(stamp), { recursive: true });
  writeFileSync(stamp, print);
  return true;
}
