/**
 * MurmurHash3 x86_32 (Austin Appleby, 2011, public domain) of three 32-bit words, seed 0: chance
 * without state. The same (a, b, c) give the same unsigned 32-bit number wherever and in whatever
 * order they are asked for.
 */
export function hash32(a: number, b: number, c: number): number {
  return finishHash(mixHash(mixHash(mixHash(0, a), b), c), 12);
}

/** One round of MurmurHash3: takes a 32-bit word into the state. */
export function mixHash(state: number, word: number): number {
  let k = Math.imul(word, 0xcc9e2d51);
  k = (k << 15) | (k >>> 17);
  state ^= Math.imul(k, 0x1b873593);
  state = (state << 13) | (state >>> 19);
  return (Math.imul(state, 5) + 0xe6546b64) | 0;
}

/** The last step of MurmurHash3; `bytes` is the number of bytes that were mixed in. */
export function finishHash(state: number, bytes: number): number {
  let h = state ^ bytes;
  h = Math.imul(h ^ (h >>> 16), 0x85ebca6b);
  h = Math.imul(h ^ (h >>> 13), 0xc2b2ae35);
  return (h ^ (h >>> 16)) >>> 0;
}
