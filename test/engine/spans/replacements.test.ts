import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  invertReplacements,
  mapOffset,
  mapSpan,
  type Replacement,
} from '../../../engine/spans/index.ts';
import { offsetAmong, reworded, rewordedTexts, spanAmong } from './marked-text.ts';

const textAndPlaces = rewordedTexts.chain(({ text, rewordings }) =>
  fc
    .tuple(fc.nat(text.length), fc.nat(text.length))
    .map(([a, b]) => ({ text, rewordings, start: Math.min(a, b), end: Math.max(a, b) })),
);

const sides = fc.constantFrom('before' as const, 'after' as const);

describe('an offset in a text that changed', () => {
  it('stands after every unit that comes from what lay before it', () => {
    fc.assert(
      fc.property(textAndPlaces, sides, ({ text, rewordings, start }, side) => {
        const expected = offsetAmong(reworded(text, rewordings), start, side);
        expect(mapOffset(start, rewordings, side)).toBe(expected);
      }),
      { numRuns: 2000 },
    );
  });

  it('stays where it is when nothing was replaced', () => {
    expect(mapOffset(7, [], 'before')).toBe(7);
    expect(mapOffset(7, [], 'after')).toBe(7);
  });

  it('stays with the neighbour asked for when words are put in where it stands', () => {
    const insertion: Replacement = { start: 4, end: 4, inserted: 3 };
    expect(mapOffset(4, [insertion], 'before')).toBe(4);
    expect(mapOffset(4, [insertion], 'after')).toBe(7);
  });

  it('leaves a replaced stretch by the side asked for', () => {
    const name: Replacement = { start: 2, end: 6, inserted: 10 };
    expect(mapOffset(3, [name], 'before')).toBe(2);
    expect(mapOffset(3, [name], 'after')).toBe(12);
  });

  it('never overtakes a later offset', () => {
    fc.assert(
      fc.property(textAndPlaces, sides, ({ rewordings, start, end }, side) => {
        const first = mapOffset(start, rewordings, side);
        expect(first).toBeLessThanOrEqual(mapOffset(end, rewordings, side));
      }),
    );
  });
});

describe('a span of a text that changed', () => {
  it('holds what is left of its words, what replaced them, and what was put in between', () => {
    fc.assert(
      fc.property(textAndPlaces, ({ text, rewordings, start, end }) => {
        const mapped = mapSpan({ start, end }, rewordings);
        const expected = spanAmong(reworded(text, rewordings), { start, end });
        if (expected === null) expect(mapped.end).toBe(mapped.start);
        else expect(mapped).toEqual(expected);
      }),
      { numRuns: 4000 },
    );
  });

  it('stays inside the new text', () => {
    fc.assert(
      fc.property(textAndPlaces, ({ text, rewordings, start, end }) => {
        const length = reworded(text, rewordings).length;
        const mapped = mapSpan({ start, end }, rewordings);
        expect(mapped.start).toBeGreaterThanOrEqual(0);
        expect(mapped.end).toBeGreaterThanOrEqual(mapped.start);
        expect(mapped.end).toBeLessThanOrEqual(length);
      }),
    );
  });

  it('leaves words put in at either edge outside', () => {
    const span = { start: 3, end: 6 };
    expect(mapSpan(span, [{ start: 3, end: 3, inserted: 2 }])).toEqual({ start: 5, end: 8 });
    expect(mapSpan(span, [{ start: 6, end: 6, inserted: 2 }])).toEqual({ start: 3, end: 6 });
  });

  it('takes a word in whole that was replaced across its edge', () => {
    const span = { start: 3, end: 8 };
    expect(mapSpan(span, [{ start: 1, end: 5, inserted: 6 }])).toEqual({ start: 1, end: 10 });
    expect(mapSpan(span, [{ start: 6, end: 12, inserted: 2 }])).toEqual({ start: 3, end: 8 });
  });

  it('is empty once all its words are gone, and stays empty when the place is reworded', () => {
    const gone = mapSpan({ start: 3, end: 6 }, [{ start: 2, end: 7, inserted: 0 }]);
    expect(gone).toEqual({ start: 2, end: 2 });
    const around = mapSpan(gone, [{ start: 1, end: 4, inserted: 5 }]);
    expect(around.end).toBe(around.start);
  });

  it('keeps whatever else is written on it', () => {
    const turn = { start: 1, end: 4, speaker: 'Ada', startTime: 12 };
    expect(mapSpan(turn, [{ start: 0, end: 0, inserted: 2 }])).toEqual({
      start: 3,
      end: 6,
      speaker: 'Ada',
      startTime: 12,
    });
  });
});

describe('inverted replacements', () => {
  it('lead from the new text back to the old one', () => {
    fc.assert(
      fc.property(rewordedTexts, ({ text, rewordings }) => {
        const now = reworded(text, rewordings)
          .map(({ unit }) => unit)
          .join('');
        const back = invertReplacements(rewordings).map((replacement, index) => {
          const { start, end } = rewordings[index]!;
          return { ...replacement, words: text.slice(start, end) };
        });
        const again = reworded(now, back)
          .map(({ unit }) => unit)
          .join('');
        expect(again).toBe(text);
      }),
    );
  });

  it('inverted again are the ones they came from', () => {
    fc.assert(
      fc.property(rewordedTexts, ({ rewordings }) => {
        const plain = rewordings.map(({ start, end, inserted }) => ({ start, end, inserted }));
        expect(invertReplacements(invertReplacements(plain))).toEqual(plain);
      }),
    );
  });

  it('bring back every span that no replacement touches', () => {
    fc.assert(
      fc.property(textAndPlaces, ({ rewordings, start, end }) => {
        fc.pre(start < end && rewordings.every((r) => r.end < start || r.start > end));
        const there = mapSpan({ start, end }, rewordings);
        expect(mapSpan(there, invertReplacements(rewordings))).toEqual({ start, end });
      }),
    );
  });
});
