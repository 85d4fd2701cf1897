// Electron's program: whether it is there, and fetching it once. Its npm package comes without.
import { spawn } from 'node:child_process';
import { accessSync, constants, existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
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

function rememberFailure(note) {
  try {
    mkdirSync(join(note, '..'), { recursive: true });
    writeFileSync(note, today());
  } catch {
    // Then it is tried again next time.
  }
}

/** Whether it could be put where it belongs: a folder of somebody else's is left alone. */
export function canBeFetched(into = folder) {
  try {
    accessSync(into, constants.W_OK);
    return existsSync(join(into, 'install.js'));
  } catch {
    return false;
  }
}

/**
 * Fetches it in a child with a time limit: 'there', 'not there', or 'stopped' by Ctrl-C. What the
 * child has to say is for its makers.
 */
export async function fetchElectron({ from = folder, note = failure, ms = limit } = {}) {
  const ended = await new Promise((resolve) => {
    const child = spawn(process.execPath, [join(from, 'install.js')], { stdio: 'ignore' });
    let end = 'not there';
    const stop = (reason) => {
      end = reason;
      child.kill();
    };
    const interrupted = () => stop('stopped');
    const timer = setTimeout(() => stop('not there'), ms);
    process.once('SIGINT', interrupted);
    const finish = (result) => {
      clearTimeout(timer);
      process.removeListener('SIGINT', interrupted);
      resolve(result);
    };
    child.once('error', () => finish('not there'));
    child.once('exit', (code) => finish(code === 0 ? 'there' : end));
  });
  if (ended === 'stopped') return ended;
  if (ended === 'there' && electronBinary(from) !== null) return ended;
  rememberFailure(note);
  return 'not there';
}
