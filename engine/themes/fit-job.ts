import type { FitSettings } from '../model/index.ts';
import type { Prepared, TextSettings, TranscriptText, WordLists } from '../text/index.ts';
import type { Decided } from './decided.ts';
import type { ModelledTheme } from './modelled-theme.ts';

/** All that a fit is a function of. Plain data and typed arrays: it travels to a worker. */
export interface FitJob {
  readonly transcripts: readonly TranscriptText[];
  readonly text: TextSettings;
  readonly lists: WordLists;
  /** Words counted before from all of the above, with the hash of their blob: not counted again. */
  readonly counted?: { readonly words: Prepared; readonly hash: string };
  readonly model: FitSettings;
  /** Base values of the priors. */
  readonly alpha: number;
  readonly eta: number;
  readonly seed: number;
  /** Rows of the model, in order; at least one. */
  readonly themes: readonly ModelledTheme[];
  readonly decisions: readonly Decided[];
  /** The fit to start from, as stored; null for a fit from scratch. */
  readonly previous: PreviousFit | null;
  /** From scratch: themes stand in rows like those that they had in this fit; null where there is none. */
  readonly rowsFrom?: PreviousFit | null;
  /**
   * A theme of the fit before in two halves, `into` being the new one's id: all other themes keep
   * their words exactly, and every passage is folded in again.
   */
  readonly split?: Split;
  /** Pinned themes keep the words of this fit, also from scratch; null where there is none. */
  readonly pinnedFrom: PreviousFit | null;
  /** Themes that the fit before does not know and an earlier one did: they were set aside since. */
  readonly remembered?: readonly RememberedTheme[];
}

export interface Split {
  readonly theme: string;
  readonly into: string;
}

/** The words of a theme in the last fit that had it. */
export interface RememberedTheme {
  readonly theme: string;
  readonly vocabulary: readonly string[];
  /** A share for each of them. */
  readonly phi: Float32Array;
}

export interface PreviousFit {
  readonly themes: readonly string[];
  readonly words: Prepared;
  readonly theta: Float32Array;
  readonly phi: Float32Array;
}

/** The vocabulary index of a word as a person typed it, or undefined where it is not counted. */
export type WordPlaces = (word: string) => number | undefined;
