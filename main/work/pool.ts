import {
  poolRun,
  type Counts,
  type FitSettings,
  type FreshStart,
  type Prepared,
  type Priors,
  type Run,
  type TracePoint,
} from '../../engine/model/index.ts';

/** A pool of runs as every worker that takes part in it sees it; its large arrays are shared. */
export interface SharedPool {
  readonly counts: Counts;
  readonly priors: Priors;
  readonly start: FreshStart;
  readonly settings: FitSettings;
  readonly runs: number;
  /** One Int32: the number of the next run that nobody has taken. */
  readonly next: SharedArrayBuffer;
  /** One Int32: anything but 0 asks everybody to stop. */
  readonly stop: SharedArrayBuffer;
}

/** How far run number `run` of `runs` is, 0 to 1. */
export interface RunProgress {
  readonly kind: 'progress';
  readonly run: number;
  readonly runs: number;
  readonly point: TracePoint;
  readonly fraction: number;
}

/** Takes run after run until none is left; who takes which changes nothing in any of them. */
export function makeRuns(
  prepared: Prepared,
  { start, settings, runs, next, stop }: SharedPool,
  report: (progress: RunProgress) => void,
  done: (number: number, run: Run) => void,
): void {
  const taken = new Int32Array(next);
  const stopped = new Int32Array(stop);
  const isStopped = (): boolean => Atomics.load(stopped, 0) !== 0;
  // Also one that was stopped before it began makes a run: a fit that is stopped keeps what it has.
  do {
    const number = Atomics.add(taken, 0, 1);
    if (number >= runs) return;
    const run = poolRun(prepared, start, settings, number, {
      progress: (point, fraction) => {
        report({ kind: 'progress', run: number, runs, point, fraction });
        return !isStopped();
      },
    });
    done(number, run);
  } while (!isStopped());
}

/** The same counts in memory that all workers read, so that none of them gets a copy. */
export function sharedCounts(counts: Counts): Counts {
  return {
    ...counts,
    offsets: shared(Int32Array, counts.offsets),
    indices: shared(Int32Array, counts.indices),
    counts: shared(Float32Array, counts.counts),
  };
}

function shared<Numbers extends Int32Array | Float32Array>(
  Type: new (buffer: SharedArrayBuffer) => Numbers,
  values: Numbers,
): Numbers {
  const copy = new Type(new SharedArrayBuffer(values.byteLength));
  copy.set(values);
  return copy;
}
