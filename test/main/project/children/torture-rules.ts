/** scrypt's cost where many passwords are set and none protects anything. */
export const lightWork = { n: 1024, r: 8, p: 1 };

/** Whole numbers below a bound, the same for the same seed (linear congruential, Knuth's constants). */
export function drawer(seed: number): (below: number) => number {
  let state = BigInt(seed) + 1n;
  return (below) => {
    state = (state * 6_364_136_223_846_793_005n + 1_442_695_040_888_963_407n) & ((1n << 64n) - 1n);
    return Number((state >> 33n) % BigInt(below));
  };
}
