import { describe, expect, it } from 'vitest';
import { exp, log } from '../../../engine/numbers/index.ts';
import { powerOfTwo } from '../../../engine/numbers/exp.ts';

describe('exp', () => {
  it('is exactly 1 at 0', () => expect(exp(0)).toBe(1));
  it('goes to 0 and to Infinity at the ends of the range', () => {
    expect(exp(-800)).toBe(0);
    expect(exp(-Infinity)).toBe(0);
    expect(exp(800)).toBe(Infinity);
    expect(exp(Infinity)).toBe(Infinity);
    expect(exp(NaN)).toBeNaN();
  });
  it('is within an ulp or two of the machine over the range', () => {
    for (let x = -700; x < 700; x += 0.37) {
      expect(Math.abs(exp(x) / Math.exp(x) - 1)).toBeLessThan(5e-16);
    }
  });
});

describe('log', () => {
  it('is exactly 0 at 1', () => expect(log(1)).toBe(0));
  it('has its edges where logarithms have them', () => {
    expect(log(0)).toBe(-Infinity);
    expect(log(-1)).toBeNaN();
    expect(log(NaN)).toBeNaN();
    expect(log(Infinity)).toBe(Infinity);
    expect(log(5e-324)).toBeCloseTo(-744.4400719213812, 12);
  });
  it('keeps its relative accuracy next to 1', () => {
    // log(1 + d) = d - d^2 / 2 + d^3 / 3 - …
    const d = 1.1102230246251565e-15;
    expect(Math.abs(log(1 + d) / (d - (d * d) / 2) - 1)).toBeLessThan(4e-16);
  });
  it('undoes exp', () => {
    for (let x = -600; x < 600; x += 1.7) expect(log(exp(x))).toBeCloseTo(x, 12);
  });
});

describe('powerOfTwo', () => {
  it('is exact over all normal exponents', () => {
    expect(powerOfTwo(-1022)).toBe(2.2250738585072014e-308);
    expect(powerOfTwo(0)).toBe(1);
    expect(powerOfTwo(10)).toBe(1024);
    expect(powerOfTwo(1023)).toBe(8.98846567431158e307);
  });
});
