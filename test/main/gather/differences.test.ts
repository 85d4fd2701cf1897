import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { differences } from '../../../main/gather/differences.ts';

/** The newer text, made from the older one and what was put in. */
function rebuilt(before: string, after: string): string {
  let text = '';
  let from = 0;
  for (const { start, end, inserted } of differences(before, after)) {
    text += before.slice(from, start);
    text += after.slice(text.length, text.length + inserted);
    from = end;
  }
  return text + before.slice(from);
}

describe('the differences of two texts', () => {
  test('are none where they are the same', () => {
    expect(differences('one\ntwo\n', 'one\ntwo\n')).toEqual([]);
  });

  test('are the words that differ, not the lines around them', () => {
    expect(differences('A: the pire was long\nB: so\n', 'A: the pier was long\nB: so\n')).toEqual([
      { start: 7, end: 11, inserted: 4 },
    ]);
  });

  test('lead from any text to any other, in order and apart', () => {
    const words = fc.array(fc.constantFrom('a ', 'bb ', '\n', 'c. ', 'é'), { maxLength: 30 });
    fc.assert(
      fc.property(words, words, (a, b) => {
        const before = a.join('');
        const after = b.join('');
        expect(rebuilt(before, after)).toBe(after);
        let reached = -1;
        for (const { start, end } of differences(before, after)) {
          expect(start).toBeGreaterThan(reached);
          reached = end;
        }
      }),
      { seed: 6, numRuns: 200 },
    );
  });
});
