import { describe, expect, it } from 'vitest';
import {
  howManyResult,
  planHowMany,
  recommend,
  runTask,
  type NumberPoint,
  type NumberScores,
} from '../../../engine/evidence/index.ts';
import { planted, told } from './spoken.ts';

/** Made-up curves: coherence and steadiness by number of themes; floors of .1 and .5. */
function curves(
  points: readonly (readonly [themes: number, coherence: number, steadiness: number])[],
  error = 0,
): NumberPoint[] {
  return points.map(([themes, coherence, steadiness]) => ({
    themes,
    perplexity: 1000 - themes,
    coherence,
    coherenceError: error,
    steadiness,
    steadinessError: error,
    floor: { perplexity: 1200, coherence: 0.1, steadiness: 0.5 },
  }));
}

describe('recommend', () => {
  it('names one number where one is both coherent and far steadier than what lies near', () => {
    const points = curves([
      [4, 0.15, 0.95],
      [6, 0.3, 0.9],
      [8, 0.31, 0.7],
      [10, 0.3, 0.6],
    ]);
    expect(recommend(points)).toEqual({ kind: 'one', themes: 6 });
  });

  it('names a range where steadiness does not tell neighbours apart', () => {
    const points = curves([
      [6, 0.2, 0.9],
      [8, 0.3, 0.8],
      [10, 0.3, 0.82],
      [12, 0.31, 0.79],
      [14, 0.33, 0.95],
    ]);
    expect(recommend(points)).toEqual({ kind: 'range', from: 8, to: 12 });
  });

  it('looks no farther than half as many again, however steady larger numbers are', () => {
    const points = curves([
      [8, 0.3, 0.7],
      [12, 0.3, 0.6],
      [13, 0.3, 0.99],
    ]);
    expect(recommend(points)).toEqual({ kind: 'one', themes: 8 });
  });

  it('ends a range where a number between is not coherent enough', () => {
    const points = curves([
      [8, 0.3, 0.8],
      [9, 0.2, 0.8],
      [10, 0.3, 0.8],
    ]);
    expect(recommend(points)).toEqual({ kind: 'one', themes: 8 });
  });

  it('takes what cannot be told from the best for as good', () => {
    const curve = [
      [6, 0.25, 0.8],
      [8, 0.3, 0.8],
    ] as const;
    expect(recommend(curves(curve, 0.001))).toEqual({ kind: 'one', themes: 8 });
    expect(recommend(curves(curve, 0.02))).toEqual({ kind: 'range', from: 6, to: 8 });
  });

  it('weighs steadiness above its floor: few themes are steady in anything', () => {
    const points = curves([
      [4, 0.15, 0.95],
      [5, 0.15, 0.95],
      [6, 0.15, 0.95],
      [7, 0.15, 0.95],
      [8, 0.3, 0.92],
      [9, 0.3, 0.85],
      [10, 0.3, 0.85],
      [11, 0.3, 0.85],
      [12, 0.3, 0.85],
    ]).map((point) => ({
      ...point,
      floor: { ...point.floor, steadiness: point.themes <= 8 ? 0.9 : 0.5 },
    }));
    expect(recommend(points)).toEqual({ kind: 'range', from: 11, to: 12 });
  });

  it('takes the mean of neighbouring floors: one that chance left low makes no number stand out', () => {
    const points = curves([
      [8, 0.3, 0.8],
      [9, 0.3, 0.8],
      [10, 0.3, 0.8],
      [11, 0.3, 0.8],
      [12, 0.3, 0.8],
    ]).map((point) => ({
      ...point,
      floor: { ...point.floor, steadiness: point.themes === 10 ? 0.45 : 0.5 },
    }));
    expect(recommend(points)).toEqual({ kind: 'range', from: 8, to: 12 });
  });

  it('lets no dip end a range that chance explains', () => {
    const curve = [
      [8, 0.3, 0.8],
      [9, 0.26, 0.8],
      [10, 0.3, 0.8],
    ] as const;
    expect(recommend(curves(curve, 0.001))).toEqual({ kind: 'one', themes: 8 });
    expect(recommend(curves(curve, 0.014))).toEqual({ kind: 'range', from: 8, to: 10 });
  });

  it('says nothing where shuffled words are as coherent, or nothing was tried', () => {
    expect(
      recommend(
        curves([
          [4, 0.1, 0.9],
          [6, 0.05, 0.9],
        ]),
      ),
    ).toEqual({ kind: 'none' });
    expect(recommend([])).toEqual({ kind: 'none' });
  });
});

describe('numbers of themes tried on planted themes', () => {
  const material = told(planted, 10, 4);
  const numbers = [2, 3, 4, 5, 6, 7];

  it('are best coherent and steady where as many were planted, above every floor', () => {
    const plan = planHowMany(material, numbers, 1);
    if (!plan.ok) throw new Error(plan.code);
    const scores = plan.tasks.map((task) => runTask(plan.material, task, () => true));
    const result = howManyResult(plan, 1, scores as NumberScores[]);
    expect(result.points.map(({ themes }) => themes)).toEqual(numbers);
    const four = result.points[2];
    expect(four.steadiness).toBeGreaterThan(0.95);
    expect(four.steadiness).toBeGreaterThan(four.floor.steadiness);
    expect(four.coherence).toBeGreaterThan(four.floor.coherence);
    for (const point of result.points) {
      expect(point.perplexity).toBeLessThan(point.floor.perplexity);
    }
    const { recommendation } = result;
    expect(recommendation.kind).not.toBe('none');
    const range =
      recommendation.kind === 'range'
        ? [recommendation.from, recommendation.to]
        : recommendation.kind === 'one'
          ? [recommendation.themes, recommendation.themes]
          : [0, 0];
    expect(range[0]).toBeLessThanOrEqual(4);
    expect(range[1]).toBeGreaterThanOrEqual(4);
    expect(JSON.parse(JSON.stringify(result))).toEqual(result);
  });

  it('are refused with too few people, or more themes than passages', () => {
    expect(planHowMany(told(planted, 2, 4), numbers, 1)).toMatchObject({
      code: 'too few participants',
    });
    expect(planHowMany(material, [4, 193], 1)).toEqual({
      ok: false,
      code: 'too many themes',
      themes: 193,
      passages: 192,
    });
  });

  it('stop where they are told to', () => {
    const plan = planHowMany(material, [3], 1);
    if (!plan.ok) throw new Error(plan.code);
    let asked = 0;
    expect(runTask(plan.material, plan.tasks[0], () => ++asked < 400)).toBe(null);
  });
});
