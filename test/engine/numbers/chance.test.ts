import { describe, expect, it } from 'vitest';
import { createGenerator, hash32 } from '../../../engine/numbers/index.ts';
import { finishHash, mixHash } from '../../../engine/numbers/hash.ts';

describe('createGenerator', () => {
  it('gives the published first numbers of PCG32 for seed 42, stream 54', () => {
    // O'Neill's pcg32-demo, round 1 (from memory).
    const generator = createGenerator(42, 54);
    const drawn = Array.from({ length: 6 }, () => generator.uint32());
    expect(drawn).toEqual([0xa15c02b7, 0x7b47f409, 0xba1d3330, 0x83d2f293, 0xbfa4784b, 0xcbed606e]);
  });

  it('agrees with the same recurrence in exact 64-bit integers, for large seeds and streams', () => {
    const [seed, stream] = [9007199254740991n, 123456789012345n];
    const mask = (1n << 64n) - 1n;
    const increment = ((stream << 1n) | 1n) & mask;
    let state = ((increment + seed) * 6364136223846793005n + increment) & mask;
    const generator = createGenerator(Number(seed), Number(stream));
    for (let i = 0; i < 1000; i++) {
      const shifted = (((state >> 18n) ^ state) >> 27n) & 0xffffffffn;
      const rotation = state >> 59n;
      const expected = ((shifted >> rotation) | (shifted << (-rotation & 31n))) & 0xffffffffn;
      expect(generator.uint32()).toBe(Number(expected));
      state = (state * 6364136223846793005n + increment) & mask;
    }
  });

  it('draws integers below the bound, each about equally often', () => {
    const generator = createGenerator(1);
    const seen = new Array<number>(7).fill(0);
    for (let i = 0; i < 70000; i++) seen[generator.integer(7)]++;
    // Chi-square with 6 degrees of freedom stays below 22.46 in 999 of 1000 fair draws.
    const chiSquare = seen.reduce((total, n) => total + (n - 10000) ** 2 / 10000, 0);
    expect(chiSquare).toBeLessThan(22.46);
  });

  it('draws uniform numbers from 0 inclusive to 1 exclusive with mean one half', () => {
    const generator = createGenerator(3);
    let total = 0;
    for (let i = 0; i < 20000; i++) {
      const u = generator.uniform();
      expect(u >= 0 && u < 1).toBe(true);
      total += u;
    }
    expect(Math.abs(total / 20000 - 0.5)).toBeLessThan(4 / Math.sqrt(12 * 20000));
  });

  it('shuffles without losing a value, and the same way for the same seed', () => {
    const values = Array.from({ length: 100 }, (_, i) => i);
    const shuffled = createGenerator(5).shuffle([...values]);
    expect(shuffled).not.toEqual(values);
    expect([...shuffled].sort((a, b) => a - b)).toEqual(values);
    expect(createGenerator(5).shuffle([...values])).toEqual(shuffled);
    expect(createGenerator(6).shuffle([...values])).not.toEqual(shuffled);
  });

  it('refuses a seed or bound that is no whole number in its range', () => {
    expect(() => createGenerator(-1)).toThrow('createGenerator: seed is -1');
    expect(() => createGenerator(0.5)).toThrow('createGenerator: seed is 0.5');
    expect(() => createGenerator(1, NaN)).toThrow('createGenerator: stream is NaN');
    expect(() => createGenerator(1).integer(0)).toThrow('Generator.integer: bound is 0');
  });
});

describe('hash32', () => {
  it('is MurmurHash3: published values for four bytes', () => {
    // Common test values of MurmurHash3_x86_32 with seed 0 (from memory).
    expect(finishHash(mixHash(0, 0xffffffff), 4)).toBe(0x76293b50);
    expect(finishHash(mixHash(0, 0x87654321), 4)).toBe(0xf55b516b);
    expect(finishHash(0, 0)).toBe(0);
  });

  it('is an unsigned 32-bit number that hangs on each argument and on their order', () => {
    const seen = new Set<number>();
    for (let a = 0; a < 20; a++) {
      for (let b = 0; b < 20; b++) for (let c = 0; c < 20; c++) seen.add(hash32(a, b, c));
    }
    expect(seen.size).toBe(8000);
    for (const h of seen) expect(Number.isInteger(h) && h >= 0 && h < 4294967296).toBe(true);
  });
});
