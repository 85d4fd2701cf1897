import type { Language } from './language.ts';

/**
 * The number of the rules in this folder. It goes up whenever the same text under the same settings
 * would give other passages or words.
 */
export const preparationMethod = 1;

/** How transcripts become counted words: flat, plain JSON, kept with the study and with every fit. */
export interface TextSettings {
  readonly language: Language;
  /** Passages aim for the middle between the two. */
  readonly passageMinimumWords: number;
  readonly passageMaximumWords: number;
  /** Turns of up to this many words by somebody else break no passage and count as no question. */
  readonly shortTurnWords: number;
  /** Count stems; off by default (Schofield & Mimno 2016). */
  readonly stemming: boolean;
  readonly leaveOutStopWords: boolean;
  readonly leaveOutFillers: boolean;
  /** Further words to leave out, as a person typed them. */
  readonly extraStopWords: readonly string[];
  /** Words that no list may leave out. */
  readonly keptWords: readonly string[];
  /** A word in fewer passages is left out. */
  readonly minimumPassages: number;
  /** A word said by fewer participants is left out; applies from that many participants on. */
  readonly minimumParticipants: number;
  /** A word in a larger share of the passages is left out, 0 to 1; applies from four passages on. */
  readonly maximumPassageShare: number;
}

export const defaultTextSettings: TextSettings = {
  language: 'eng',
  passageMinimumWords: 40,
  passageMaximumWords: 120,
  shortTurnWords: 3,
  stemming: false,
  leaveOutStopWords: true,
  leaveOutFillers: true,
  extraStopWords: [],
  keptWords: [],
  minimumPassages: 2,
  minimumParticipants: 2,
  maximumPassageShare: 0.5,
};

/** The lists of one language, lower case; passed in, since the engine reads no file. */
export interface LanguageLists {
  readonly stopWords: readonly string[];
  readonly fillers: readonly string[];
}

export type WordLists = Readonly<Partial<Record<Language, LanguageLists>>>;
