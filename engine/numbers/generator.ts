/** Seeded chance. Each call moves the generator on; pass it in, never keep one at module level. */
export interface Generator {
  /** An integer from 0 to 2^32 - 1. */
  uint32(): number;
  /** A number from 0 (inclusive) to 1 (exclusive), in steps of 2^-53. */
  uniform(): number;
  /** An integer from 0 (inclusive) to `bound` (exclusive), each equally likely. */
  integer(bound: number): number;
  /** Puts the values into random order, in place, and returns them (Durstenfeld 1964). */
  shuffle<T extends unknown[] | Int32Array | Uint32Array | Float32Array | Float64Array>(
    values: T,
  ): T;
}

/**
 * PCG32 (PCG-XSH-RR 64/32, Melissa O'Neill 2014, "PCG: A family of simple fast space-efficient
 * statistically good algorithms for random number generation"). Different streams of one seed are
 * different sequences. `seed` and `stream` are integers from 0 to 2^53 - 1.
 */
export function createGenerator(seed: number, stream = 0): Generator {
  requireInteger('seed', seed);
  requireInteger('stream', stream);
  // 64-bit state and increment, each in two 32-bit halves.
  const incrementHigh = Math.floor(stream / 2147483648) >>> 0;
  const incrementLow = ((stream << 1) | 1) >>> 0;
  let stateHigh = 0;
  let stateLow = 0;

  function step(): void {
    // state = state * 6364136223846793005 + increment, modulo 2^64
    const productHigh =
      (highProduct(stateLow, multiplierLow) +
        Math.imul(stateHigh, multiplierLow) +
        Math.imul(stateLow, multiplierHigh)) |
      0;
    const low = (Math.imul(stateLow, multiplierLow) >>> 0) + incrementLow;
    stateLow = low >>> 0;
    stateHigh = (productHigh + incrementHigh + (low > 4294967295 ? 1 : 0)) >>> 0;
  }

  function uint32(): number {
    const oldHigh = stateHigh;
    const oldLow = stateLow;
    step();
    // ((old >> 18) ^ old) >> 27, rotated right by old >> 59
    const mixedHigh = (oldHigh >>> 18) ^ oldHigh;
    const mixedLow = ((oldLow >>> 18) | (oldHigh << 14)) ^ oldLow;
    const shifted = ((mixedLow >>> 27) | (mixedHigh << 5)) >>> 0;
    const rotation = oldHigh >>> 27;
    return ((shifted >>> rotation) | (shifted << (-rotation & 31))) >>> 0;
  }

  function uniform(): number {
    const high = uint32() >>> 5;
    const low = uint32() >>> 6;
    return (high * 67108864 + low) / 9007199254740992;
  }

  function integer(bound: number): number {
    if (!(Number.isInteger(bound) && bound >= 1 && bound <= 4294967296)) {
      throw new Error(`Generator.integer: bound is ${bound}; must be an integer from 1 to 2^32`);
    }
    // Numbers past the last full multiple would make small results likelier: drawn again.
    const limit = 4294967296 - (4294967296 % bound);
    let drawn = uint32();
    while (drawn >= limit) drawn = uint32();
    return drawn % bound;
  }

  function shuffle<T extends unknown[] | Int32Array | Uint32Array | Float32Array | Float64Array>(
    values: T,
  ): T {
    const list = values as unknown[];
    for (let last = list.length - 1; last > 0; last--) {
      const chosen = integer(last + 1);
      const held = list[last];
      list[last] = list[chosen];
      list[chosen] = held;
    }
    return values;
  }

  step();
  const low = stateLow + (seed >>> 0);
  stateLow = low >>> 0;
  stateHigh = (stateHigh + Math.floor(seed / 4294967296) + (low > 4294967295 ? 1 : 0)) >>> 0;
  step();
  return { uint32, uniform, integer, shuffle };
}

const multiplierHigh = 0x5851f42d;
const multiplierLow = 0x4c957f2d;

/** The upper 32 bits of the 64-bit product of two unsigned 32-bit numbers. */
function highProduct(a: number, b: number): number {
  const a0 = a & 0xffff;
  const a1 = a >>> 16;
  const b0 = b & 0xffff;
  const b1 = b >>> 16;
  const low = a0 * b0;
  const middle = a1 * b0 + (low >>> 16);
  const carried = (middle & 0xffff) + a0 * b1;
  return (a1 * b1 + Math.floor(middle / 65536) + Math.floor(carried / 65536)) | 0;
}

function requireInteger(name: string, value: number): void {
  if (!(Number.isSafeInteger(value) && value >= 0)) {
    throw new Error(`createGenerator: ${name} is ${value}; must be an integer from 0 to 2^53 - 1`);
  }
}
