import { expectation } from './expectation.ts';
import type { Kernel } from './kernel.ts';
import { assign, recount, sweep } from './sweep.ts';

/** The reference: readable, and used where WebAssembly is missing. */
export const plainKernel: Kernel = {
  allocate: (bytes) => ({ buffer: new ArrayBuffer(bytes), start: 0 }),
  sweep,
  assign,
  recount,
  expectation,
};
