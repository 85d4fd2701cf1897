import type { Kernel } from './kernel.ts';

/** Each array begins on sixteen bytes, which are one SIMD load. */
const alignment = 16;
/** More arrays than any state has: room for what alignment skips. */
const arrays = 32;

/** Arrays one after the other in a buffer of a kernel's; `bytes` is their size together. */
export function carve(kernel: Kernel, bytes: number) {
  const { buffer, start } = kernel.allocate(bytes + arrays * alignment);
  let next = start;
  const claim = (size: number): number => {
    const from = next;
    next = Math.ceil((from + size) / alignment) * alignment;
    return from;
  };
  return {
    integers: (length: number) => new Int32Array(buffer, claim(4 * length), length),
    singles: (length: number) => new Float32Array(buffer, claim(4 * length), length),
    doubles: (length: number) => new Float64Array(buffer, claim(8 * length), length),
  };
}
