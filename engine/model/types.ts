/**
 * The counted words of a study as the model sees them, in compressed sparse rows: passage `d` holds
 * the entries `offsets[d]` to `offsets[d + 1]` (exclusive) of `indices` and `counts`; within a
 * passage, word indices ascend and none stands twice.
 */
export interface Counts {
  /** D, may be 0; passages without counted words keep an empty row. */
  readonly passages: number;
  /** V, the size of the vocabulary. */
  readonly words: number;
  /** D + 1 offsets. */
  readonly offsets: Int32Array;
  /** One word index an entry, 0 <= index < V. */
  readonly indices: Int32Array;
  /** How often the word stands in the passage; finite, above 0. */
  readonly counts: Float32Array;
}

/** Asymmetric Dirichlet priors: a base value, and the places where a decision departs from it. */
export interface Priors {
  /** K, the number of themes. */
  readonly themes: number;
  /** Base of the passage-theme prior, above 0. */
  readonly alpha: number;
  /** Base of the theme-word prior, above 0. */
  readonly eta: number;
  /** alpha of one theme over all passages, where it differs (a merged theme has a doubled one). */
  readonly themeAlpha?: readonly { readonly theme: number; readonly value: number }[];
  /** eta of one word in one theme; 0 shuts the word out of the theme altogether. */
  readonly wordPriors: readonly {
    readonly theme: number;
    readonly word: number;
    readonly value: number;
  }[];
  /** alpha of one theme in one passage; 0 keeps the theme out of the passage. */
  readonly passagePriors: readonly {
    readonly passage: number;
    readonly theme: number;
    readonly value: number;
  }[];
  /** Pinned themes: their word distributions (V values, sum 1) do not move. */
  readonly frozen: readonly { readonly theme: number; readonly phi: Float32Array }[];
}

/** Where a fit begins. */
export type Start =
  | {
      readonly kind: 'fresh';
      /** Unsigned 32-bit seed of the hash that breaks the symmetry between themes. */
      readonly seed: number;
      /** Seed words: most of the word's occurrences start on the theme. */
      readonly leanings: readonly { readonly theme: number; readonly word: number }[];
      /**
       * Word distributions (V values) that themes were known by: where no decision draws such a theme
       * to its row, the row takes what was found most like it. The runs know nothing of it.
       */
      readonly like?: readonly { readonly theme: number; readonly phi: Float32Array }[];
    }
  | {
      readonly kind: 'warm';
      /** Proportions of the fit before, D x K by rows, f32 as stored. */
      readonly theta: Float32Array;
      /** Theme-word distributions of the fit before, K x V by rows, f32 as stored. */
      readonly phi: Float32Array;
      readonly leanings: readonly { readonly theme: number; readonly word: number }[];
      /**
       * For each theme, how much of its old expected counts is added to its word prior (0 none,
       * 1 holds it where it was).
       */
      readonly hold: Float32Array;
    };

/** One point of a fit's history. */
export interface TracePoint {
  /** Sweeps done, from 0. */
  readonly sweep: number;
  /** Evidence lower bound in nats, evaluated at this sweep; null where it was not evaluated. */
  readonly bound: number | null;
  /** The terms that the bound adds up; null where it was not evaluated. */
  readonly terms: BoundTerms | null;
  /**
   * Predictive log likelihood a counted word, in nats, each occurrence given all the others; null
   * where it was not evaluated.
   */
  readonly likelihood: number | null;
  /** Mean absolute change of the responsibilities a counted word in this sweep. */
  readonly change: number;
}

/**
 * Why a fit ended: its likelihood settled; its sweeps were used up; it had a fixed plan and carried
 * it out (a fit from scratch, or one in which every theme is pinned); or it was cancelled.
 */
export type StopReason = 'converged' | 'sweep limit' | 'schedule completed' | 'stopped by a person';

/** The terms of the evidence lower bound; their sum is the bound. Nats. */
export interface BoundTerms {
  readonly words: number;
  readonly proportions: number;
  readonly distributions: number;
}

export interface ModelFit {
  /** Expected passage-theme proportions, D x K by rows; each row sums to 1 within f32. */
  readonly theta: Float32Array;
  /** Expected theme-word distributions, K x V by rows; each row sums to 1 within f32. */
  readonly phi: Float32Array;
  /** Expected counts of each theme over all passages, K values, in words. */
  readonly themeWords: Float64Array;
  /** Mean negative log likelihood a counted word in each passage, nats; NaN-free: 0 for no words. */
  readonly unexplained: Float32Array;
  /**
   * The history of the one run that was made, or, of a pool of runs, of the first; the last point is
   * the answer itself, with its themes frozen and all passages folded in.
   */
  readonly trace: readonly TracePoint[];
  /** Sweeps made over all runs together, without the passes of the fold. */
  readonly sweeps: number;
  readonly stopReason: StopReason;
  readonly boundTerms: BoundTerms;
}

/** What a long computation calls on its way; `progress` returns false to stop it. */
export interface Watcher {
  readonly progress: (point: TracePoint, fraction: number) => boolean;
}
