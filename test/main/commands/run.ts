import { spawn } from 'node:child_process';
import { mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join, relative } from 'node:path';
import { fileURLToPath } from 'node:url';
import { parse } from 'csv-parse/sync';
import { afterAll } from 'vitest';
import { runIn } from '../../../main/shells/command.ts';
import type { Terminal } from '../../../main/commands/terminal.ts';

/** The project's top folder. */
export const top = join(dirname(fileURLToPath(import.meta.url)), '..', '..', '..');

export interface Ended {
  readonly code: number | null;
  readonly out: string;
  readonly err: string;
}

/** A folder that is taken away after the file's tests. */
export function temporaryFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), 'understory-test-'));
  afterAll(() => rmSync(folder, { recursive: true, force: true }));
  return folder;
}

/** Runs a command in this process, at a fixed time. */
export async function run(
  folder: string,
  words: readonly string[],
  changes: Partial<Terminal> = {},
): Promise<Ended> {
  let out = '';
  let err = '';
  const code = await runIn(words, {
    folder,
    out: (text) => void (out += text),
    err: (text) => void (err += text),
    rewrites: false,
    now: () => '2026-02-03T04:05:06.000Z',
    signal: new AbortController().signal,
    ...changes,
  });
  return { code, out, err };
}

/** Runs it as a person does: `npm run -s understory -- …`, from any folder. */
export function runThroughNpm(
  folder: string,
  words: readonly string[],
  onErr: (text: string, interrupt: () => void) => void = () => {},
): Promise<Ended> {
  return new Promise((resolve, reject) => {
    const child = spawn('npm', ['--prefix', top, 'run', '-s', 'understory', '--', ...words], {
      cwd: folder,
      // A group of its own, so that an interrupt reaches all of it, as a terminal's does.
      detached: true,
      env: { ...process.env, INIT_CWD: folder },
    });
    let out = '';
    let err = '';
    child.stdout.on('data', (data: Buffer) => (out += data.toString('utf8')));
    child.stderr.on('data', (data: Buffer) => {
      err += data.toString('utf8');
      onErr(err, () => process.kill(-(child.pid as number), 'SIGINT'));
    });
    child.on('error', reject);
    child.on('close', (code) => resolve({ code, out, err }));
  });
}

export type Row = Readonly<Record<string, string>>;

/** The rows of a table by their headings. */
export function table(path: string): Row[] {
  return parse(readFileSync(path), { columns: true });
}

/** The first line of a table. */
export function heading(path: string): string[] {
  return (parse(readFileSync(path), { to_line: 1 }) as string[][])[0];
}

/** Every file below a folder, by its place in it, with its bytes as hex. */
export function contents(folder: string): Record<string, string> {
  const found: Record<string, string> = {};
  for (const item of readdirSync(folder, { withFileTypes: true, recursive: true })) {
    if (!item.isFile()) continue;
    const path = join(item.parentPath, item.name);
    found[relative(folder, path)] = readFileSync(path).toString('hex');
  }
  return found;
}

/** What a command says besides its progress. */
export function said({ err }: Ended): string[] {
  return err
    .split('\n')
    .filter((line) => line !== '' && !/^(Reading|Fitting):/u.test(line) && !/^Usage: /u.test(line));
}

/** One sentence that ends in a full stop; no second one begins. */
export const oneSentence = /^(?!.*[.!?] [“\p{Lu}]).*\.$/u;
