import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Counts } from '../../engine/model/index.ts';

export interface Outside {
  readonly version: string;
  readonly seconds: number;
  /** Dirichlet parameters of the distributions, K x V by rows. */
  readonly lambda: Float64Array;
}

/** The interpreter that has the library: Debian's own, where python3 on the path is another. */
const pythons = ['/usr/bin/python3', 'python3', 'python'];

/** Variables that pick an arithmetic library's code for another processor than this one. */
const misleading = ['OPENBLAS_CORETYPE', 'OPENBLAS_L2_SIZE'];

/** scikit-learn's batch LDA on the same counts, on one core; null where it is not installed. */
export function scikitLearn(
  counts: Counts,
  themes: number,
  prior: number,
  steps: number,
  seed: number,
): Outside | null {
  const folder = mkdtempSync(join(tmpdir(), 'understory-bench-'));
  try {
    const head = {
      passages: counts.passages,
      words: counts.words,
      entries: counts.indices.length,
      themes,
      alpha: prior,
      eta: prior,
      steps,
      seed,
    };
    const bytes = [counts.offsets, counts.indices, counts.counts].map(
      ({ buffer, byteOffset, byteLength }) => Buffer.from(buffer, byteOffset, byteLength),
    );
    const [into, from] = [join(folder, 'counts'), join(folder, 'themes')];
    writeFileSync(into, Buffer.concat([Buffer.from(`${JSON.stringify(head)}\n`), ...bytes]));
    const env = { ...process.env };
    for (const name of misleading) delete env[name];
    for (const python of pythons) {
      const { status, stderr } = spawnSync(
        python,
        ['-B', join('test', 'outside', 'sklearn_lda.py'), into, from],
        { env, encoding: 'utf8' },
      );
      if (status === 0) return read(from, themes * counts.words);
      if (status !== null && status !== 3) throw new Error(`scikitLearn: ${stderr}`);
    }
    return null;
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

function read(path: string, size: number): Outside {
  const bytes = readFileSync(path);
  const line = bytes.indexOf(10);
  const said = JSON.parse(bytes.subarray(0, line).toString()) as Pick<
    Outside,
    'version' | 'seconds'
  >;
  const numbers = bytes.subarray(line + 1, line + 1 + 8 * size);
  const lambda = Float64Array.from({ length: size }, (_, i) => numbers.readDoubleLE(8 * i));
  return { ...said, lambda };
}
