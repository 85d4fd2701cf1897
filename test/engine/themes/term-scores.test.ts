import { describe, expect, test } from 'vitest';
import { termScores } from '../../../engine/themes/index.ts';

// Blei & Lafferty 2009, equation 3, worked out by hand: p log(p / geometric mean over the themes).
describe('term scores', () => {
  test('weigh a probability by how far it lies above the geometric mean of all themes', () => {
    const scores = termScores([0.5, 0.25, 0.25, 0.125, 0.25, 0.625], 3);
    // Geometric mean of .5 and .125 is .25: .5 ln 2 and .125 ln ½.
    expect(scores[0]).toBeCloseTo(0.5 * 0.6931471805599453, 14);
    expect(scores[3]).toBeCloseTo(-0.125 * 0.6931471805599453, 14);
  });

  test('are 0 for a word that every theme uses alike, however probable', () => {
    const scores = termScores([0.75, 0.25, 0, 0.75, 0, 0.25], 3);
    expect(scores[0]).toBe(0);
    expect(scores[3]).toBe(0);
  });

  test('are finite where a word is shut out of a theme, which then does not count for it', () => {
    // Out of the second theme; the others have it alike.
    const scores = termScores([0.5, 0.5, 0, 1, 0.5, 0.5], 2);
    expect([...scores].every(Number.isFinite)).toBe(true);
    expect([scores[0], scores[2], scores[4]]).toEqual([0, 0, 0]);
  });

  test('are 0 with one theme, and none without words', () => {
    expect([...termScores([0.5, 0.5], 2)]).toEqual([0, 0]);
    expect(termScores([], 0)).toHaveLength(0);
  });
});
