// Electron's program: whether it is there, and fetching it once. Its npm package comes without.
import { spawn } from 'node:child_process';
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { top } from './build.mjs';

const folder = join(top, 'node_modules', 'electron');
const failure = join(top, 'node_modules', '.cache', 'understory', 'electron-not-fetched');
const limit = 180_000;

/** The path of the program, or null. Never imports the package: importing it fetches. */
export function electronBinary(from = folder) {
  try {
    const name = readFileSync(join(from, 'path.txt'), 'utf8').trim();
    const path = join(from, 'dist', name);
    return name !== '' && existsSync(path) ? path : null;
  } catch {
    return null;
  }
}

const today = () => new Date().toISOString().slice(0, 10);

/** Whether fetching was tried in vain today: it is not tried again, so that a start stays quick. */
export function failedToday(note = failure) {
  try {
    return readFileSync(note, 'utf8') === today();
  } catch {
    return false;
  }
}

function rememberFailure(note = failure) {
  try {
    mkdirSync(join(note, '..'), { recursive: true });
    writeFileSync(note, today());
  } catch {
    // Then it is tried again next time.
  }
}

/** Fetches it in a child with a time limit; whether it is there afterwards. */
export async function fetchElectron({ installer = join(folder, 'install.js'), ms = limit } = {}) {
  const ended = await new Promise((resolve) => {
    const child = spawn(process.execPath, [installer], { stdio: 'ignore' });
    const stop = () => child.kill();
    const timer = setTimeout(stop, ms);
    process.once('SIGINT', stop);
    const end = (ok) => {
      clearTimeout(timer);
      process.removeListener('SIGINT', stop);
      resolve(ok);
    };
    child.once('error', () => end(false));
    child.once('exit', (code) => end(code === 0));
  });
  const there = ended && electronBinary() !== null;
  if (!there) rememberFailure();
  return there;
}
