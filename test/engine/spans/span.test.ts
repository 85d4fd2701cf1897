import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { belongsTo, overlap, sameSpan, type Span } from '../../../engine/spans/index.ts';

const spans = fc
  .tuple(fc.nat(12), fc.nat(12))
  .map(([a, b]): Span => ({ start: Math.min(a, b), end: Math.max(a, b) }));

const units = ({ start, end }: Span) => Array.from({ length: end - start }, (_, i) => start + i);
const shared = (a: Span, b: Span) => units(a).filter((unit) => units(b).includes(unit)).length;

describe('two spans', () => {
  it('are the same where both ends are', () => {
    expect(sameSpan({ start: 1, end: 2 }, { start: 1, end: 2 })).toBe(true);
    expect(sameSpan({ start: 1, end: 2 }, { start: 1, end: 3 })).toBe(false);
    expect(sameSpan({ start: 1, end: 2 }, { start: 0, end: 2 })).toBe(false);
  });

  it('overlap by the units that both hold, whichever comes first', () => {
    fc.assert(
      fc.property(spans, spans, (a, b) => {
        expect(overlap(a, b)).toBe(shared(a, b));
        expect(overlap(b, a)).toBe(overlap(a, b));
      }),
    );
  });

  it('do not overlap where they only touch', () => {
    expect(overlap({ start: 0, end: 4 }, { start: 4, end: 9 })).toBe(0);
  });
});

describe('a coding belongs to a passage', () => {
  it('when they share half or more of the shorter one', () => {
    fc.assert(
      fc.property(spans, spans, (coding, passage) => {
        const half = Math.min(units(coding).length, units(passage).length) / 2;
        expect(belongsTo(coding, passage)).toBe(half > 0 && shared(coding, passage) >= half);
      }),
    );
  });

  it('when it is a phrase inside, or runs over the whole passage', () => {
    expect(belongsTo({ start: 40, end: 44 }, { start: 0, end: 100 })).toBe(true);
    expect(belongsTo({ start: 0, end: 500 }, { start: 100, end: 200 })).toBe(true);
  });

  it('when exactly half of it lies there, so that one coding can belong to two', () => {
    const coding = { start: 90, end: 110 };
    expect(belongsTo(coding, { start: 0, end: 100 })).toBe(true);
    expect(belongsTo(coding, { start: 100, end: 200 })).toBe(true);
    expect(belongsTo(coding, { start: 101, end: 200 })).toBe(false);
  });

  it('never when it is empty', () => {
    expect(belongsTo({ start: 5, end: 5 }, { start: 0, end: 10 })).toBe(false);
  });
});
