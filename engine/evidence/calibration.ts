import { wilson, type Interval } from './interval.ts';

/** A suggestion in a random draw, and what a person said to it. */
export interface Judged {
  /** When it was judged, 0 to 1. */
  readonly strength: number;
  readonly confirmed: boolean;
}

export interface CalibrationBin extends Interval {
  /** Strengths from here … */
  readonly from: number;
  /** … to below here; 1 belongs to the last bin. */
  readonly to: number;
  readonly confirmed: number;
  readonly judged: number;
}

export interface Calibration {
  readonly judged: number;
  readonly confirmed: number;
  /** By tenths of strength, weakest first; empty ones are left out; none below `fewestJudged`. */
  readonly bins: readonly CalibrationBin[];
}

/** Below so many nothing is said about how good suggestions are. */
export const fewestJudged = 10;

const parts = 10;

/**
 * Strength set against decisions: of suggestions about as strong, how many a person confirmed, with
 * the interval of Wilson 1927. Holds for what was drawn at random only: lists that put strong or
 * doubtful suggestions first show another mixture.
 */
export function calibration(all: readonly Judged[]): Calibration {
  const confirmed = new Array<number>(parts).fill(0);
  const judged = new Array<number>(parts).fill(0);
  for (const one of all) {
    const bin = binOf(one.strength);
    judged[bin]++;
    if (one.confirmed) confirmed[bin]++;
  }
  const bins =
    all.length < fewestJudged
      ? []
      : judged.flatMap((of, bin) =>
          of === 0
            ? []
            : [
                {
                  from: bin / parts,
                  to: (bin + 1) / parts,
                  confirmed: confirmed[bin],
                  judged: of,
                  ...wilson(confirmed[bin], of),
                },
              ],
        );
  return {
    judged: all.length,
    confirmed: confirmed.reduce((sum, count) => sum + count, 0),
    bins,
  };
}

/** The bin that suggestions of a strength fall into; undefined where none was judged there. */
export function alike(
  { bins }: Pick<Calibration, 'bins'>,
  strength: number,
): CalibrationBin | undefined {
  const from = binOf(strength) / parts;
  return bins.find((bin) => bin.from === from);
}

function binOf(strength: number): number {
  if (!(strength >= 0 && strength <= 1)) {
    throw new Error(`calibration: strength is ${strength}; must be from 0 to 1`);
  }
  return Math.min(parts - 1, Math.floor(strength * parts));
}
