import type { MeanFieldState } from './expectation.ts';
import type { SweepState } from './state.ts';

/** The exponents that can be had from square roots alone, whose bits are the same everywhere. */
export type Exponent = 0.5 | 0.75 | 0.875 | 1;

/**
 * The hot loops of both fits, each over its state, which `allocate` has made room for. There are two of them with equal bits:
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
  /** The E-step of mean-field inference; returns the steps made over all passages. */
  readonly expectation: (
    state: MeanFieldState,
    limit: number,
    tolerance: number,
    flat: boolean,
  ) => number;
}
