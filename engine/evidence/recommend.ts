import type { NumberScores } from './how-many.ts';
import { mean } from './quantile.ts';

/** One number of themes, and what it reaches on shuffled words. */
export type NumberPoint = NumberScores & {
  readonly floor: {
    readonly perplexity: number;
    readonly coherence: number;
    readonly steadiness: number;
  };
};

/** Coherence within this share of the best is as good. */
const coherenceShare = 0.1;
/** "Near" the smallest good number: up to half as many again. */
const nearness = 1.5;
/** So many numbers on either side smooth a coherence … */
const coherenceReach = 1;
/** … and a floor, which is one chance among many. */
const floorReach = 2;
/** A difference of up to so many of its standard errors is none. */
const errors = 2;
/**
 * The least standard error of a steadiness above its floor: what another seed changes was measured,
 * and the spread over groups of one seed alone says too little of it.
 */
const leastError = 0.02;

export type Recommendation =
  /** These numbers of themes (two or more, `from` to `to`) cannot be told apart. */
  | { readonly kind: 'range'; readonly from: number; readonly to: number }
  /** One number stands out. */
  | { readonly kind: 'one'; readonly themes: number }
  /** No number reaches a coherence above what shuffled words reach. */
  | { readonly kind: 'none' };

/**
 * Which numbers of themes are worth reading; never which one to take. The rule:
 *
 * 1. Numbers count whose coherence lies above its floor. Where there is none, nothing is said.
 * 2. A number is good where its coherence is within 10 % of the best, or cannot be told from it. The
 *    smallest good number is taken, and the good ones near it: up to half as many again.
 * 3. Among these the one whose steadiness lies highest above its floor is taken, and its neighbours
 *    on both sides as long as they cannot be told from it.
 *
 * Two numbers cannot be told apart where they differ by no more than two standard errors of their
 * difference. Chance is smoothed away first: a coherence that cannot be told from the mean of itself
 * and its two neighbours is taken for that mean, and a floor of steadiness is the mean over two
 * numbers on either side. Takes points in ascending order of themes.
 */
export function recommend(points: readonly NumberPoint[]): Recommendation {
  const coherent = points.filter((point) => point.coherence > point.floor.coherence);
  if (coherent.length === 0) return { kind: 'none' };
  const around = (point: NumberPoint, reach: number): readonly NumberPoint[] => {
    const at = points.indexOf(point);
    return points.slice(Math.max(0, at - reach), at + reach + 1);
  };
  const coherenceOf = (point: NumberPoint): number => {
    const smooth = mean(around(point, coherenceReach).map(({ coherence }) => coherence));
    const apart = Math.abs(smooth - point.coherence) > errors * point.coherenceError;
    return apart ? point.coherence : smooth;
  };
  const above = (point: NumberPoint): number =>
    point.steadiness - mean(around(point, floorReach).map(({ floor }) => floor.steadiness));

  const best = largest(coherent, coherenceOf);
  const good = coherent.filter((point) => {
    const short = coherenceOf(best) - coherenceOf(point);
    return (
      short <= coherenceShare * Math.abs(coherenceOf(best)) ||
      short <= errors * ofDifference(best.coherenceError, point.coherenceError)
    );
  });
  const near = good.filter(({ themes }) => themes <= Math.ceil(nearness * good[0].themes));
  const steadiest = largest(near, above);
  const alike = (point: NumberPoint | undefined): boolean =>
    point !== undefined &&
    near.includes(point) &&
    above(steadiest) - above(point) <= errors * ofDifference(errorOf(steadiest), errorOf(point));
  let from = points.indexOf(steadiest);
  let to = from;
  while (alike(points[from - 1])) from--;
  while (alike(points[to + 1])) to++;
  return from === to
    ? { kind: 'one', themes: points[from].themes }
    : { kind: 'range', from: points[from].themes, to: points[to].themes };
}

function errorOf({ steadinessError }: NumberPoint): number {
  return Math.max(leastError, steadinessError);
}

function ofDifference(a: number, b: number): number {
  return Math.sqrt(a * a + b * b);
}

/** The first of equals. */
function largest(
  points: readonly NumberPoint[],
  score: (point: NumberPoint) => number,
): NumberPoint {
  return points.reduce((best, point) => (score(point) > score(best) ? point : best));
}
