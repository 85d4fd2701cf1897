import { expect, it } from 'vitest';
import { compareCodeUnits, sum } from '../../../engine/numbers/index.ts';

it('sum keeps what plain addition loses', () => {
  expect(sum([])).toBe(0);
  expect(sum([1, 1e100, 1, -1e100])).toBe(2);
  expect(sum(new Float64Array(10).fill(0.1))).toBe(1);
});

it('compareCodeUnits orders by code units, where a locale would not', () => {
  expect(['é', 'z', 'Z', 'a', 'ab', ''].sort(compareCodeUnits)).toEqual([
    '',
    'Z',
    'a',
    'ab',
    'z',
    'é',
  ]);
  expect(compareCodeUnits('a', 'a')).toBe(0);
  // A surrogate pair (U+1F600) comes before U+FFFD by code unit, after it by code point.
  expect(compareCodeUnits('\u{1f600}', '\ufffd')).toBe(-1);
});
