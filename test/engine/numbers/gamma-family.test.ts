import { describe, expect, it } from 'vitest';
import { digamma, expDigamma, lgamma, trigamma } from '../../../engine/numbers/index.ts';

describe('digamma, trigamma, lgamma', () => {
  it('refuse what lies outside their domain by NaN', () => {
    expect(digamma(0)).toBeNaN();
    expect(digamma(-1)).toBeNaN();
    expect(trigamma(0)).toBeNaN();
    expect(lgamma(-0.5)).toBeNaN();
    expect(lgamma(0)).toBe(Infinity);
  });

  it('follow their recurrences across every seam between two methods', () => {
    for (let x = 0.01; x < 12; x += 0.0173) {
      expect(Math.abs(digamma(x + 1) - digamma(x) - 1 / x) * x).toBeLessThan(1e-14);
      expect(Math.abs(trigamma(x) - trigamma(x + 1) - 1 / (x * x)) * x * x).toBeLessThan(1e-13);
      expect(Math.abs(lgamma(x + 1) - lgamma(x) - Math.log(x))).toBeLessThan(5e-14);
    }
  });

  it('lgamma is exactly 0 at 1 and 2', () => {
    expect(Math.abs(lgamma(1))).toBe(0);
    expect(Math.abs(lgamma(2))).toBe(0);
  });

  it('lgamma of whole numbers is the logarithm of a factorial', () => {
    expect(lgamma(11)).toBeCloseTo(Math.log(3628800), 12);
  });
});

describe('expDigamma', () => {
  it('equals exp of digamma over the range that a fit meets', () => {
    for (let x = 0.002; x < 1e6; x *= 1.11) {
      expect(Math.abs(expDigamma(x) / Math.exp(digamma(x)) - 1)).toBeLessThan(1e-12);
    }
  });
  it('stays above 0 for the smallest parameters', () => {
    expect(expDigamma(1e-8)).toBeGreaterThan(0);
    expect(expDigamma(1e-8)).toBeLessThan(1e-290);
  });
});
