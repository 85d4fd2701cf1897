import { spawn } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

const top = join(import.meta.dirname, '..', '..');

export interface RunningApp {
  /** A fresh address; each works once. */
  readonly address: () => Promise<string>;
  /** The person's home folder, made for this run. */
  readonly home: string;
  /** Ctrl-C; the exit code. */
  readonly stop: () => Promise<number | null>;
  /** Ends the process as a crash would. */
  readonly kill: () => Promise<void>;
  /** Everything it printed so far. */
  readonly printed: () => string;
}

/** The app behind its loopback shell, with a home folder of its own, as `npm start` runs it. */
export async function startApp({
  home = mkdtempSync(join(tmpdir(), 'understory-test-')),
  words = [],
}: { readonly home?: string; readonly words?: readonly string[] } = {}): Promise<RunningApp> {
  const child = spawn(
    process.execPath,
    [join(top, 'main', 'shells', 'start.mjs'), '--no-open', ...words],
    {
      cwd: top,
      env: {
        ...process.env,
        HOME: home,
        XDG_CONFIG_HOME: join(home, '.config'),
        XDG_DATA_HOME: join(home, '.local', 'share'),
        INIT_CWD: home,
      },
      stdio: ['pipe', 'pipe', 'pipe'],
    },
  );
  let text = '';
  const ended = new Promise<number | null>((resolve) => child.once('exit', resolve));
  child.stdout.on('data', (piece: Buffer) => (text += piece.toString()));
  child.stderr.on('data', (piece: Buffer) => (text += piece.toString()));

  const addresses = (): string[] => text.match(/http:\/\/127\.0\.0\.1:\d+\/\S*/gu) ?? [];
  const more = async (known: number): Promise<string> => {
    for (let tries = 0; tries < 600; tries++) {
      const found = addresses();
      if (found.length > known) return found[known];
      if (child.exitCode !== null) break;
      await new Promise((resolve) => setTimeout(resolve, 100));
    }
    throw new Error(`startApp: no address came; it printed: ${text}`);
  };
  let used = 0;
  await more(0);
  return {
    home,
    printed: () => text,
    address: async () => {
      if (used > 0) child.stdin.write('\n');
      return more(used++);
    },
    stop: async () => {
      child.kill('SIGINT');
      const code = await ended;
      rmSync(home, { recursive: true, force: true });
      return code;
    },
    kill: async () => {
      child.kill('SIGKILL');
      await ended;
    },
  };
}
