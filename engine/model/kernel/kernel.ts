import type { SweepState } from './state.ts';

/** The exponents that can be had from square roots alone, whose bits are the same everywhere. */
export type Exponent = 0.5 | 0.75 | 0.875 | 1;

/**
 * The three hot loops of collapsed inference over one state. There are two of them with equal bits:
 * plain TypeScript, which says what is computed, and WebAssembly, which is fast.
 */
export interface Kernel {
  /** Room for `bytes` bytes of a state, and the offset from which they may be used. */
  readonly allocate: (bytes: number) => { readonly buffer: ArrayBuffer; readonly start: number };
  /**
   * Passes once over all entries in their order and moves their responsibilities, updating the
   * expected counts as it goes. Returns the sum of absolute changes in words.
   */
  readonly sweep: (state: SweepState, exponent: Exponent) => number;
  /** Sets each responsibility to alpha x phi, normalised; `wordThemes` holds phi. */
  readonly assign: (state: SweepState) => void;
  /** Adds the expected counts up afresh from the responsibilities; pinned lanes keep their phi. */
  readonly recount: (state: SweepState) => void;
}
