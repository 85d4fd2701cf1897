import { describe, expect, it } from 'vitest';
import { digamma, exp, expDigamma, lgamma, log, trigamma } from '../../engine/numbers/index.ts';
import values from './values/special-functions.json' with { type: 'json' };

// Values by mpmath with 50 digits (values/special-functions.py); definitions in Abramowitz & Stegun
// 1964, 6.1, 6.3, 6.4.

/** Relative error; absolute where the value itself is 0. */
function error(found: number, value: number): number {
  return value === 0 ? Math.abs(found) : Math.abs(found - value) / Math.abs(value);
}

describe('special functions against 50-digit values, relative error below 1e-12', () => {
  for (const { x, ...row } of values.special) {
    it(`at ${x}`, () => {
      expect(error(digamma(x), row.digamma)).toBeLessThan(1e-12);
      expect(error(trigamma(x), row.trigamma)).toBeLessThan(1e-12);
      expect(error(lgamma(x), row.lgamma)).toBeLessThan(1e-12);
      expect(error(log(x), row.log)).toBeLessThan(4e-16);
      // The cap keeps exp(digamma) above 0 where the true value is below 1e-304.
      if (row.expDigamma > 1e-300) {
        expect(error(expDigamma(x), row.expDigamma)).toBeLessThan(1e-12);
      } else {
        expect(expDigamma(x)).toBeGreaterThan(0);
        expect(expDigamma(x)).toBeLessThan(1e-300);
      }
    });
  }

  for (const { x, value } of values.exp) {
    it(`exp at ${x}`, () => expect(error(exp(x), value)).toBeLessThan(x < -700 ? 1e-2 : 4e-16));
  }
});
