import { spawn, type ChildProcess } from 'node:child_process';
import * as fs from 'node:fs';
import { tmpdir } from 'node:os';
import * as path from 'node:path';
import { fileURLToPath } from 'node:url';

/** Builds a program of children/ into a folder of its own; the built file. */
export async function buildChild(name = 'study-child'): Promise<{
  readonly script: string;
  readonly remove: () => void;
}> {
  const folder = fs.mkdtempSync(path.join(tmpdir(), 'understory-child-'));
  const { build } = await import('vite');
  await build({
    configFile: false,
    logLevel: 'silent',
    build: {
      ssr: fileURLToPath(new URL(`./children/${name}.ts`, import.meta.url)),
      outDir: folder,
      emptyOutDir: false,
      target: 'node20',
      rollupOptions: { output: { format: 'es', entryFileNames: 'child.mjs' } },
    },
  });
  return {
    script: path.join(folder, 'child.mjs'),
    remove: () => fs.rmSync(folder, { recursive: true, force: true }),
  };
}

export interface Child {
  /** The next line that it says; null once it has ended. */
  line(): Promise<string | null>;
  /** All lines that it says until it ends. */
  rest(): Promise<string[]>;
  /** Asks it to close the study and end. */
  finish(): Promise<void>;
  kill(signal: NodeJS.Signals): Promise<void>;
}

export function startChild(script: string, ...args: string[]): Child {
  const process_: ChildProcess = spawn(process.execPath, [script, ...args], {
    stdio: ['pipe', 'pipe', 'inherit'],
  });
  const lines: string[] = [];
  const waiting: ((line: string | null) => void)[] = [];
  let unfinished = '';
  let ended = false;
  const end = new Promise<void>((resolve) => {
    process_.on('close', () => {
      ended = true;
      for (const tell of waiting.splice(0)) tell(null);
      resolve();
    });
  });
  process_.stdout?.setEncoding('utf8').on('data', (text: string) => {
    const parts = (unfinished + text).split('\n');
    unfinished = parts.pop() ?? '';
    for (const line of parts) {
      const tell = waiting.shift();
      if (tell === undefined) lines.push(line);
      else tell(line);
    }
  });
  const child: Child = {
    line() {
      const next = lines.shift();
      if (next !== undefined || ended) return Promise.resolve(next ?? null);
      return new Promise((resolve) => waiting.push(resolve));
    },
    async rest() {
      await end;
      return lines.splice(0);
    },
    async finish() {
      process_.stdin?.end();
      await end;
    },
    async kill(signal) {
      process_.kill(signal);
      await end;
    },
  };
  return child;
}
