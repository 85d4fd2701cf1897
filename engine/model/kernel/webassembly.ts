// The type checks of other rooms reach this file without reading its folder.
// eslint-disable-next-line @typescript-eslint/triple-slash-reference
/// <reference path="./compiled.d.ts" />
import bytes from './sweep.as.ts?wasm';
import type { Exponent, Kernel } from './kernel.ts';
import type { MeanFieldState } from './expectation.ts';
import type { SweepState } from './state.ts';

/** What sweep.as.ts exports; all numbers are sizes or addresses in its memory. */
interface Compiled {
  readonly sweep: (...args: number[]) => number;
  readonly assign: (...args: number[]) => void;
  readonly recount: (...args: number[]) => void;
  readonly expectation: (...args: number[]) => number;
}

/** The part of WebAssembly used here; the engine's types know no browser and no Node. */
declare const WebAssembly: {
  readonly Module: new (bytes: Uint8Array) => object;
  readonly Memory: new (size: { readonly initial: number }) => { readonly buffer: ArrayBuffer };
  readonly Instance: new (module: object, imports: object) => { readonly exports: unknown };
};

const pageBytes = 65536;
/** AssemblyScript keeps its own tables below. */
const firstByte = 65536;

const rootsOf: Readonly<Record<Exponent, number>> = { 1: 0, 0.5: 1, 0.75: 2, 0.875: 3 };

/** The SIMD kernel, or null where WebAssembly or its SIMD is missing. */
export function webAssemblyKernel(): Kernel | null {
  let module: object;
  try {
    module = new WebAssembly.Module(bytes);
  } catch {
    return null;
  }
  // Each state has a memory of its own, and the code that is bound to it.
  const compiledFor = new WeakMap<ArrayBufferLike, Compiled>();
  const codeOf = (array: { readonly buffer: ArrayBufferLike }): Compiled => {
    const code = compiledFor.get(array.buffer);
    if (!code) throw new Error('webAssemblyKernel: the state was allocated by another kernel');
    return code;
  };
  const at = (array: { readonly byteOffset: number }): number => array.byteOffset;

  return {
    allocate: (size) => {
      const initial = Math.ceil((firstByte + size) / pageBytes);
      const memory = new WebAssembly.Memory({ initial });
      const instance = new WebAssembly.Instance(module, { env: { memory } });
      compiledFor.set(memory.buffer, instance.exports as Compiled);
      return { buffer: memory.buffer, start: firstByte };
    },
    sweep: (s: SweepState, exponent: Exponent) =>
      codeOf(s.scratch).sweep(
        s.passages,
        s.stride,
        at(s.offsets),
        at(s.indices),
        at(s.counts),
        at(s.responsibilities),
        at(s.passageThemes),
        at(s.wordThemes),
        at(s.themeTotals),
        at(s.alpha),
        at(s.eta),
        at(s.etaTotals),
        at(s.moving),
        at(s.normalisers),
        at(s.scratch),
        rootsOf[exponent],
      ),
    assign: (s: SweepState) =>
      codeOf(s.scratch).assign(
        s.passages,
        s.stride,
        at(s.offsets),
        at(s.indices),
        at(s.responsibilities),
        at(s.wordThemes),
        at(s.alpha),
        at(s.scratch),
      ),
    recount: (s: SweepState) =>
      codeOf(s.scratch).recount(
        s.passages,
        s.words,
        s.stride,
        at(s.offsets),
        at(s.indices),
        at(s.counts),
        at(s.responsibilities),
        at(s.passageThemes),
        at(s.wordThemes),
        at(s.themeTotals),
        at(s.moving),
      ),
    expectation: (s: MeanFieldState, limit, tolerance, flat) =>
      codeOf(s.scratch).expectation(
        s.passages,
        s.words,
        s.themes,
        s.stride,
        at(s.offsets),
        at(s.indices),
        at(s.counts),
        at(s.alpha),
        at(s.gamma),
        at(s.expected),
        at(s.statistics),
        at(s.scratch),
        limit,
        tolerance,
        flat ? 1 : 0,
      ),
  };
}
