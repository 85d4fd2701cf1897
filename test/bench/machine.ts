import { mkdirSync, writeFileSync } from 'node:fs';
import { availableParallelism, cpus, loadavg, release, totalmem, type as system } from 'node:os';

/** One line on where the figures were measured, and how busy it was. */
export function machine(): string {
  const model = cpus()[0]?.model.trim() ?? 'unknown processor';
  const memory = Math.round(totalmem() / 2 ** 30);
  const load = loadavg()[0].toFixed(1);
  return `${model}, ${availableParallelism()} cores, ${memory} GB, ${system()} ${release()}, Node ${process.version}, load ${load} at the start`;
}

export const say = (text: string): void => void process.stdout.write(`${text}\n`);

/** Rows under their heads, aligned. */
export function table(heads: readonly string[], rows: readonly (readonly string[])[]): string {
  const widths = heads.map((head, i) => Math.max(head.length, ...rows.map((row) => row[i].length)));
  return [heads, ...rows]
    .map((row) =>
      row
        .map((cell, i) => (i === 0 ? cell.padEnd(widths[i]) : cell.padStart(widths[i])))
        .join('  ')
        .trimEnd(),
    )
    .join('\n');
}

export function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2;
}

export const mean = (values: ArrayLike<number>): number =>
  Array.from(values).reduce((a, b) => a + b, 0) / values.length;

/** Seconds that something took, and what it gave. */
export function timed<Value>(work: () => Value): { seconds: number; value: Value } {
  const began = performance.now();
  const value = work();
  return { seconds: (performance.now() - began) / 1000, value };
}

/** Writes what was measured to bench/, for whoever wants to compare. */
export function keep(name: string, what: unknown): void {
  mkdirSync('bench', { recursive: true });
  const file = `bench/${name}.json`;
  writeFileSync(file, `${JSON.stringify(what, null, 2)}\n`);
  say(`\nWritten to ${file}.`);
}
