/**
 * What collapsed inference keeps, as arrays in one buffer. Themes are the innermost dimension, in
 * rows of `stride` lanes: `themes` rounded up to a multiple of four, so that four lanes are worked
 * on at a time. Padding lanes hold 0 (1 in `themeTotals`) and stay so.
 *
 * Symbols as in Asuncion, Welling, Smyth & Teh 2009.
 */
export interface SweepState {
  /** D. */
  readonly passages: number;
  /** V. */
  readonly words: number;
  /** K. */
  readonly themes: number;
  readonly stride: number;
  /** The counts, as in `Counts`. */
  readonly offsets: Int32Array;
  readonly indices: Int32Array;
  readonly counts: Float32Array;
  /** gamma_dwk, an entry a row: the share of each theme in the occurrences of a word in a passage. */
  readonly responsibilities: Float32Array;
  /** N_dk, a passage a row: expected counts. */
  readonly passageThemes: Float32Array;
  /** N_wk, a word a row: expected counts; in the lane of a pinned theme its phi, which stays. */
  readonly wordThemes: Float32Array;
  /** N_k: expected counts; 1 in the lane of a pinned theme. */
  readonly themeTotals: Float32Array;
  /** alpha_dk, a passage a row; 0 keeps the theme out of the passage. */
  readonly alpha: Float32Array;
  /** eta_wk, a word a row; 0 shuts the word out; 0 in the lane of a pinned theme. */
  readonly eta: Float32Array;
  /** Sums of eta over words; 0 in the lane of a pinned theme. */
  readonly etaTotals: Float32Array;
  /** 1 in the lane of a theme whose words move, 0 in that of a pinned one and in padding. */
  readonly moving: Float32Array;
  /** What each entry's responsibilities were divided by in the last sweep: its predictive weight. */
  readonly normalisers: Float32Array;
  /** One row of working space. */
  readonly scratch: Float32Array;
}
