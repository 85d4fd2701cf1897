/**
 * The contract between a window and the desk: every method a window may call, once, typed. Types
 * only. The preload, the server half (main/link) and the client (renderer/link.ts) are derived from
 * `methods` and `Api`; a window never chooses a channel.
 *
 * Everything that travels is plain data (JSON values, Uint8Array, Float32Array, Int32Array). A method
 * answers with its result or with a `Refused`, which holds a sentence for a person. Offsets are UTF-16
 * code units in a transcript's text, end exclusive; times are milliseconds from the start of a
 * recording; strengths and shares run from 0 to 1.
 */

/** A refusal that a person can read: what happened, where, what to do next. */
export interface Refused {
  readonly refused: string;
  readonly code: string;
  /** The file that it is about, where a window may offer another way with it. */
  readonly path?: string;
}

export type Answer<Value> = { readonly value: Value } | Refused;

export interface Span {
  readonly start: number;
  readonly end: number;
}

/** A passage as derived from the settings of now: named by its place. */
export interface PassagePlace extends Span {
  readonly transcript: string;
}

export interface About {
  readonly version: string;
  readonly shell: 'electron' | 'browser';
  /** Whether the system's own file dialogs can be shown. */
  readonly dialogs: boolean;
  /** Where studies are kept unless a person says otherwise. */
  readonly studiesFolder: string;
  readonly platform: string;
  /** BCP 47, for the formats of numbers and dates. */
  readonly locale: string;
}

export interface RecentStudy {
  readonly path: string;
  /** The file's name without its ending. */
  readonly name: string;
  /** The folder, as a person would say it. */
  readonly folder: string;
  readonly missing: boolean;
}

export interface BackupsView {
  /** How many are kept of each study; 0: none are made. */
  readonly keep: number;
  /** Where new ones of this study go. */
  readonly folder: string;
  /** The folder that was chosen for all studies; null: beside each study. */
  readonly chosenFolder: string | null;
  /** Of this study, newest first. */
  readonly backups: readonly {
    readonly path: string;
    /** What the study's file was called then, where it has another name now; else null. */
    readonly calledThen: string | null;
    readonly number: number;
    /** ISO 8601 in UTC. */
    readonly at: string;
    readonly bytes: number;
  }[];
  /** Why the last one could not be made; null where it could. */
  readonly failed: string | null;
}

/** What writing the study anew would save, or has saved. Bytes. */
export interface CompactView {
  readonly before: number;
  readonly after: number;
  /** What would go, in words; empty where nothing can. */
  readonly goes: readonly string[];
}

/** What came over from a damaged study into a new file, and what did not. */
export interface RecoveryView {
  readonly overview: Overview;
  readonly path: string;
  /** Records that came over. */
  readonly kept: number;
  /** What is missing, each in words. */
  readonly missing: readonly string[];
  /** Decisions left out because what they rest on is missing, each in words. */
  readonly leftOut: readonly string[];
}

/** A study that waits for its password. Nothing of what is in it is told. */
export interface LockedStudy {
  /** It is being opened; nobody was there for a while; somebody asked for it. */
  readonly why: 'opening' | 'idle' | 'asked';
  /** While it is being opened: its file's name without the ending, and its folder. Else null. */
  readonly name: string | null;
  readonly folder: string | null;
}

/** How the open study is locked, and what goes with it. */
export interface PasswordView {
  readonly hasPassword: boolean;
  /** Minutes without a sign of a person until a study with a password is locked; 0: never. */
  readonly idleMinutes: number;
  readonly idleChoices: readonly number[];
  /** Characters that a new password must have. */
  readonly shortest: number;
}

/** What the frame shows on every place. */
export interface Overview {
  readonly study: { readonly id: string; readonly name: string; readonly path: string | null };
  readonly readOnly: boolean;
  /** Whether the study's file has a password. */
  readonly hasPassword: boolean;
  /** ISO 8601 in UTC: when the last decision reached the drive. */
  readonly savedAt: string | null;
  /** Goes up with every decision: a view with another number is out of date. */
  readonly revision: number;
  readonly transcripts: number;
  readonly words: number;
  readonly themes: number;
  readonly passages: number;
  /** Passages that nobody has decided on yet. */
  readonly unread: number;
  /** Transcripts in which every passage was read before the first fit. */
  readonly transcriptsRead: number;
  readonly fitted: boolean;
  /** The full answer that is being made behind the quick one on screen; null where none is. */
  readonly refining: Refining | null;
  /** True where texts, people or settings changed since the fit on screen. */
  readonly stale: boolean;
  /** Decisions that the next fit will take up, in words ("2 words seeded"). */
  readonly waiting: readonly string[];
  /** Whether a re-fit follows each decision that it would take up. */
  readonly followChanges: boolean;
  /** What undo and redo would take back, in words; null where there is nothing. */
  readonly undo: string | null;
  readonly redo: string | null;
  readonly reader: { readonly id: string; readonly name: string };
  /** The cold sample, and how far it was read; null where none was drawn. */
  readonly coldSample: {
    readonly places: number;
    readonly read: number;
    readonly scored: boolean;
  } | null;
}

export interface Refining {
  /** The quick answer, on screen until the full one takes its place. */
  readonly fit: string;
  /** How far it is, 0 to 1. */
  readonly fraction: number;
}

export type Role = 'interviewer' | 'participant' | 'other';

export interface SpeakerView {
  /** Null for turns without a label. */
  readonly label: string | null;
  readonly role: Role;
  readonly participant: { readonly id: string; readonly name: string } | null;
  readonly turns: number;
  readonly words: number;
}

export interface TranscriptRow {
  readonly id: string;
  readonly name: string;
  readonly fileName: string;
  readonly format: string;
  readonly words: number;
  readonly passages: number;
  readonly speakers: readonly SpeakerView[];
  /** What a person should look at ("No interviewer was recognised"); empty where all is well. */
  readonly needsLook: readonly string[];
  readonly codings: number;
}

export interface ParticipantRow {
  readonly id: string;
  readonly name: string;
  readonly attributes: Readonly<Record<string, string>>;
  readonly transcripts: readonly string[];
  readonly words: number;
}

export interface GatherView {
  readonly transcripts: readonly TranscriptRow[];
  readonly participants: readonly ParticipantRow[];
  readonly attributes: readonly string[];
  readonly settings: {
    readonly themes: number;
    readonly language: string;
    readonly languages: readonly { readonly code: string; readonly name: string }[];
    readonly stemming: boolean;
    readonly passageMinimumWords: number;
    readonly passageMaximumWords: number;
    readonly extraStopWords: readonly string[];
  };
  /** Memos on the study as a whole, oldest first. */
  readonly fieldNotes: readonly FieldNoteRow[];
  readonly memos: readonly MemoView[];
}

/** What the model would see with the settings of now. */
export interface Counted {
  readonly passages: number;
  readonly words: number;
  readonly forms: number;
  /** Passages with too few counted words to be suggested for. */
  readonly tooShort: number;
}

export interface GatherOutcome {
  readonly gathered: readonly string[];
  readonly skipped: readonly { readonly file: string; readonly sentence: string }[];
  /** What tables of attributes among the files said; null where there was none. */
  readonly attributes: AttributesOutcome | null;
  readonly tables: readonly TableOffer[];
  readonly doubles: readonly DoubleOffer[];
}

/** A table among the files that were added: a person says which of its columns hold what. */
export interface TableOffer {
  /** Names it in the calls that follow, as long as the study is open. */
  readonly table: string;
  readonly file: string;
  readonly sheets: readonly {
    readonly name: string;
    readonly rows: number;
    readonly columns: readonly {
      readonly heading: string;
      readonly guess: ColumnPart;
      readonly filled: number;
      /** Words in a cell that holds something, on average. */
      readonly words: number;
    }[];
    /** The first rows, long cells cut short. */
    readonly first: readonly (readonly string[])[];
  }[];
}

export type ColumnPart = 'text' | 'participant' | 'attribute' | 'left out';

/** A file of a name that a transcript came from before, with other words in it. */
export interface DoubleOffer {
  readonly double: string;
  readonly file: string;
  readonly transcript: string;
  readonly transcriptName: string;
  readonly codings: number;
}

export type DoubleChoice = 'skip' | 'replace' | 'keep both';

export interface FieldNoteRow {
  readonly id: string;
  readonly name: string;
  readonly fileName: string;
  /** The transcript that it speaks of; null for the study as a whole. */
  readonly transcript: { readonly id: string; readonly name: string } | null;
  readonly words: number;
}

export interface FieldNotesOutcome {
  readonly kept: readonly string[];
  readonly skipped: readonly { readonly file: string; readonly sentence: string }[];
}

/** A codebook that was made elsewhere, before it is taken in. */
export interface CodebookOffer {
  readonly entries: readonly {
    readonly name: string;
    readonly heading: string | null;
    readonly brief: string;
    readonly seeds: readonly string[];
    /** Whether the study has a theme of that name. */
    readonly taken: boolean;
  }[];
}

export interface AttributesOutcome {
  readonly described: number;
  readonly unmatched: readonly string[];
}

export interface TurnView extends Span {
  readonly speaker: string | null;
  readonly role: Role;
  readonly time: number | null;
}

export type Standing = 'confirmed' | 'rejected' | 'by hand';

export interface CodingView {
  readonly id: string;
  readonly span: Span;
  readonly theme: string;
  readonly themeName: string;
  readonly standing: Standing;
  readonly memo: string;
  readonly reader: string;
  readonly at: string;
  readonly strengthAtDecision: number | null;
  /** What the fit on screen would give without the decisions on this passage; null for no theme there. */
  readonly strengthWithout: number | null;
  /** How many were coded in one gesture; null for one by one. */
  readonly together: number | null;
}

export interface SuggestionView {
  readonly theme: string;
  readonly themeName: string;
  readonly strength: number;
  /** Where the words stand that carry the theme here, strongest first. */
  readonly carriedBy: readonly Span[];
  /**
   * Of suggestions about as strong in random draws, how many a person judged and how many of them
   * were confirmed; null below ten.
   */
  readonly alike: { readonly judged: number; readonly confirmed: number } | null;
}

export interface PassageView extends Span {
  /** From 1 in its transcript. */
  readonly number: number;
  readonly speaker: string | null;
  readonly participant: string;
  readonly time: number | null;
  readonly segments: readonly Span[];
  readonly question: Span | null;
  readonly words: number;
  readonly countedWords: number;
  /** Themes from the threshold on that nobody decided on here, strongest first. */
  readonly suggestions: readonly SuggestionView[];
  /** The strongest themes whatever their strength, for "another theme"; at most five. */
  readonly strongest: readonly SuggestionView[];
  readonly codings: readonly CodingView[];
  /** In a cold sample that was not scored yet: nothing is suggested here. */
  readonly heldBack: boolean;
  /** Set where it was read and no theme applies. */
  readonly none: { readonly id: string; readonly reader: string; readonly at: string } | null;
  readonly memos: readonly MemoView[];
}

export interface MemoView {
  readonly id: string;
  readonly text: string;
  readonly reader: string;
  readonly at: string;
}

export interface TranscriptView {
  readonly id: string;
  readonly name: string;
  readonly text: string;
  readonly details: readonly { readonly name: string; readonly value: string }[];
  readonly turns: readonly TurnView[];
  readonly passages: readonly PassageView[];
  readonly words: number;
  /** Field notes and what stood beside the text in its file. */
  readonly fieldNotes: readonly FieldNoteRow[];
  readonly memos: readonly MemoView[];
}

export type ReadingListKind =
  | 'in order'
  | 'strongest first'
  | 'nearest the edge'
  | 'unexplained'
  | 'random draw'
  | 'cold sample'
  | 'one theme'
  | 'earlier wording'
  | 'keyword in context';

/** What is looked for in everything that participants say. */
export interface SearchRequest {
  readonly text: string;
  /**
   * 'words': each word as typed; 'stems': in all its forms; 'phrase': the words one after the other
   * as typed; 'near': in all their forms, each within some words of the first. A word that ends in *
   * stands for every word that begins so.
   */
  readonly mode: 'words' | 'stems' | 'phrase' | 'near';
  /** For 'near': how many words away at most, from 1 to 100. */
  readonly within: number;
  /** Lines in the order of the text, or by the words before or after. */
  readonly order: 'place' | 'left' | 'right';
}

/** Keyword in context. */
export interface SearchResult {
  /** Places found, and the passages and people that they lie in. */
  readonly lines: number;
  readonly passages: number;
  readonly people: number;
  /** Words of the text that nobody says. */
  readonly unheard: readonly string[];
  readonly shown: readonly (PassagePlace & {
    readonly transcriptName: string;
    readonly participant: string;
    readonly before: string;
    readonly match: string;
    readonly after: string;
    readonly read: boolean;
  })[];
}

export interface ReadingListRequest {
  readonly kind: ReadingListKind;
  /** For 'one theme' and 'earlier wording' and, where set, to narrow the others. */
  readonly theme: string | null;
  /** For 'in order': one transcript, or null for all. */
  readonly transcript: string | null;
  readonly unreadOnly: boolean;
  /** For a random draw: how many. */
  readonly count: number;
  /** For a random draw: its seed, recorded with each decision. */
  readonly seed: number;
  /** For 'keyword in context'. */
  readonly search?: SearchRequest;
}

export interface DrawRequest {
  readonly kind: 'random draw' | 'cold sample';
  readonly count: number;
  readonly seed: number;
  readonly unreadOnly: boolean;
}

/** x of n with the interval that belongs to it; shares from 0 to 1. */
export interface Rate {
  readonly count: number;
  readonly of: number;
  readonly low: number;
  readonly high: number;
}

/** What random draws say about the suggestions and about what is left to read. */
export interface ReadingEvidence {
  /** In the order in which they were drawn. */
  readonly draws: readonly {
    readonly name: string;
    readonly kind: 'random draw' | 'cold sample';
    readonly at: string;
    readonly reader: string;
    readonly places: number;
    readonly read: number;
  }[];
  /** Passages of the study that nobody has read. */
  readonly unread: number;
  /**
   * Of unread passages drawn at random and read since: how many hold something that was coded, and how
   * many something that was not suggested. `atMost`: the share in what is left (95 %, one-sided; exact
   * binomial: Clopper & Pearson 1934; for 0 Hanley & Lippman-Hand 1983).
   */
  readonly stopping: {
    readonly read: number;
    readonly coded: number;
    readonly codedAtMost: number;
    readonly missed: number;
    readonly missedAtMost: number;
  } | null;
  /** Suggestions in random draws that a person judged, by their strength then. */
  readonly calibration: {
    readonly judged: number;
    readonly confirmed: number;
    /** With Wilson's interval (1927); empty below ten judged. */
    readonly bins: readonly (Rate & { readonly from: number; readonly to: number })[];
  };
  readonly coldSample: ColdSampleView | null;
}

export interface ColdSampleView {
  readonly name: string;
  readonly at: string;
  readonly reader: string;
  readonly places: number;
  readonly read: number;
  /** When it was scored; null before. */
  readonly scoredAt: string | null;
  /** How the suggestions of the fit it was scored against stand to what was coded; null before. */
  readonly score: {
    readonly fit: string;
    /** Passages with a coding: those for which something is suggested. */
    readonly coded: Rate;
    /** Passages to which no theme applies: those for which something is suggested all the same. */
    readonly none: Rate;
    /** Codings with themes of the fit: those that are suggested too. */
    readonly found: Rate;
    /** Suggestions: those that were coded too. */
    readonly right: Rate;
    /** Codings with themes that the fit has no words for, which it cannot suggest. */
    readonly beyond: number;
    readonly themes: readonly {
      readonly id: string;
      readonly label: string;
      readonly coded: number;
      readonly suggested: number;
      readonly both: number;
      readonly modelled: boolean;
    }[];
  } | null;
}

/** How a person likes to read: kept on this machine, in no study. */
export interface ReadingPreferences {
  readonly suggestions: boolean;
  readonly goOn: boolean;
  /** Whether a letter or digit alone does something (WCAG 2.1.4). */
  readonly singleKeys: boolean;
  /** Other keys than the usual ones: what they do, and the key. */
  readonly keys: Readonly<Record<string, string>>;
}

/** Where a reader stopped: numbers only, so that nothing of a study lies outside its file. */
export interface StoppedAt {
  readonly kind: ReadingListKind;
  readonly unreadOnly: boolean;
  readonly count: number;
  readonly seed: number;
  /** Places in the codebook and in the order of gathering; -1 for none. */
  readonly theme: number;
  readonly only: number;
  readonly transcript: number;
  readonly start: number;
}

export interface ReadingList {
  /** As it is recorded with each decision ("random draw of 60, seed 7"). */
  readonly name: string;
  readonly places: readonly PassagePlace[];
  /** How many of them carry a decision. */
  readonly decided: number;
}

export interface ThemeRowView {
  readonly id: string;
  /** Null for a candidate. */
  readonly name: string | null;
  /** Its short mark in the codebook; empty where there is none. */
  readonly code: string;
  /** The heading that it stands under. */
  readonly heading: string | null;
  /** What it is called on screen. */
  readonly label: string;
  readonly origin: 'fitted' | 'asked for' | 'by hand';
  readonly pinned: boolean;
  readonly setAside: boolean;
  /** Whether the fit on screen has words for it. */
  readonly modelled: boolean;
  readonly share: number | null;
  /** First words by probability. */
  readonly words: readonly string[];
  readonly confirmedPeople: number;
  readonly suggestedPeople: number;
  readonly codings: number;
  readonly suggestions: number;
}

export interface ShapeView {
  /** In codebook order; what is set aside comes last. */
  readonly themes: readonly ThemeRowView[];
  readonly headings: readonly { readonly id: string; readonly name: string }[];
  readonly people: number;
  readonly fit: FitView | null;
  /** Oldest first. */
  readonly fits: readonly FitRow[];
  readonly before: string | null;
}

/** A fit that is kept. */
export interface FitRow {
  readonly id: string;
  /** Its name, else what it is. */
  readonly label: string;
  readonly name: string | null;
  readonly at: string;
  readonly kind: 'from scratch' | 're-fit';
  readonly themes: number;
  readonly passages: number;
}

/** Two fits side by side. */
export interface FitsCompared {
  readonly first: FitRow;
  readonly second: FitRow;
  readonly pairs: readonly {
    readonly first: FitThemeView;
    readonly second: FitThemeView;
    /** Cosine of the two word distributions, 0 to 1. */
    readonly cosine: number;
    /** Passages that the one leads, the other leads, and both. */
    readonly led: { readonly first: number; readonly second: number; readonly both: number };
  }[];
  readonly onlyFirst: readonly FitThemeView[];
  readonly onlySecond: readonly FitThemeView[];
  /** Passages in both fits, and the share of them whose leading themes are partners. */
  readonly compared: number;
  readonly agreement: number;
  /** The same corrected for chance (Hubert & Arabie 1985). */
  readonly adjustedRand: number;
  readonly words: { readonly both: number; readonly either: number };
}

/** A theme as one fit has it. */
export interface FitThemeView {
  readonly label: string;
  readonly words: readonly string[];
}

export interface FitView {
  readonly id: string;
  readonly kind: 'from scratch' | 're-fit';
  /** Whether the themes come from a quick answer or a full one; of a re-fit, the one it goes back to. */
  readonly answer: 'quick' | 'full';
  readonly themes: number;
  readonly passages: number;
  readonly countedWords: number;
  readonly bound: number;
  readonly sweeps: number;
  readonly stopReason: string;
  readonly seed: number;
  readonly trace: readonly FitProgress[];
}

/**
 * The layered bands: everything to draw them once. Band `b` is transcript `bands[b]`; its passages are
 * the rows from `from` on, in reading order.
 */
export interface Strata {
  readonly bands: readonly {
    readonly transcript: string;
    readonly name: string;
    readonly participant: string;
    /** Of whoever says most. */
    readonly attributes: Readonly<Record<string, string>>;
    /** Its place in the order in which transcripts came in, from 0. */
    readonly gathered: number;
    readonly from: number;
    readonly passages: number;
  }[];
  /** Ids of the layers, K values. */
  readonly themes: readonly string[];
  /** Spoken words of each passage: the width of its place in the band. */
  readonly words: Int32Array;
  /** 1 where an interviewer's turn stands before the passage. */
  readonly gaps: Int32Array;
  /** Start and end of each passage in its transcript, pairs. */
  readonly places: Int32Array;
  /** Proportions by rows, passages x K; zeros where nothing was counted. */
  readonly shares: Float32Array;
  /** Each theme's share of a transcript's counted words, bands x K. */
  readonly bandShares: Float32Array;
  /** Confirmed codings and codings by hand: pairs (passage row, index in `themes`, or -1). */
  readonly ticks: Int32Array;
}

export interface ThemeWordView {
  readonly form: string;
  readonly surface: string;
  readonly probability: number;
  /** Blei & Lafferty 2009, nats: high where the word sets the theme apart from the others. */
  readonly termScore: number;
  /** Other ways it is written, where it joins several. */
  readonly joins: readonly string[];
  readonly seeded: boolean;
}

/** A codebook entry without its name. */
export interface DefinitionView {
  readonly code: string;
  readonly brief: string;
  readonly full: string;
  readonly whenToUse: string;
  readonly whenNotToUse: string;
  readonly examples: string;
}

/** One wording of a codebook entry. */
export interface WordingView {
  readonly version: number;
  /** Empty for the first, with which a theme begins. */
  readonly at: string;
  readonly reader: string;
  readonly definition: DefinitionView;
  /** Codings that were made, or looked at again, under it. */
  readonly codings: number;
}

export interface ThemeView {
  readonly row: ThemeRowView;
  readonly definition: DefinitionView;
  readonly version: number;
  /** Every wording that stands, oldest first. */
  readonly wordings: readonly WordingView[];
  /** Codings under a wording that told otherwise when to use the theme. */
  readonly earlierCodings: number;
  /** By probability. */
  readonly words: readonly ThemeWordView[];
  /** The same theme's first words by term score. */
  readonly tellingWords: readonly ThemeWordView[];
  readonly seeds: readonly string[];
  /** What may go wrong with the seeds, a sentence each. */
  readonly seedCautions: readonly string[];
  readonly shutOut: readonly string[];
  /** People whose passages it leads, and how much of it comes from one of them or one question. */
  readonly people: number;
  readonly ofPeople: number;
  readonly mostFromOnePerson: { readonly name: string; readonly share: number } | null;
  readonly mostAfterOneQuestion: { readonly question: string; readonly share: number } | null;
  /** Strongest passages, one a participant before a second from anyone. */
  readonly passages: readonly ThemePassageView[];
  readonly memos: readonly MemoView[];
}

export interface ThemePassageView extends PassagePlace {
  readonly transcriptName: string;
  readonly participant: string;
  readonly time: number | null;
  readonly text: string;
  readonly carriedBy: readonly Span[];
  readonly strength: number;
  readonly countedWords: number;
  readonly standing: Standing | 'suggested' | 'none';
  readonly coding: string | null;
  /** The wording that the coding was made under; null without a coding. */
  readonly version: number | null;
}

export type ThemePassageList = 'strongest' | 'nearest the edge' | 'rejected' | 'earlier wording';

/** For whom a theme is told, and after which question. */
export interface ThemeSpread {
  readonly attributes: readonly {
    readonly name: string;
    readonly values: readonly {
      /** Null for people without a value. */
      readonly value: string | null;
      readonly people: number;
      /** People with a coding that a person made or confirmed. */
      readonly coded: number;
      /** People with a passage that the theme leads in the fit on screen. */
      readonly led: number;
    }[];
  }[];
  /** Most of the theme's expected words first; without those said before any question. */
  readonly questions: readonly {
    readonly question: string;
    /** Of the theme's expected counted words, 0 to 1. */
    readonly share: number;
    readonly people: number;
  }[];
}

/** What a merge would bring together. */
export interface MergePreview {
  readonly label: string;
  readonly joins: readonly string[];
  /** Of modelled words; null where none of them is modelled. */
  readonly share: number | null;
  readonly people: number;
  readonly codings: number;
  /** Passages that are coded with two or more of them, and will carry each coding still. */
  readonly codedTwice: number;
  readonly suggestions: number;
  /** First words of them together, before the re-fit. */
  readonly words: readonly string[];
}

/** Where a word is said, and by which themes it is used. */
export interface WordView {
  readonly form: string;
  readonly forms: readonly { readonly form: string; readonly occurrences: number }[];
  readonly occurrences: number;
  readonly passages: number;
  readonly people: number;
  /** Themes by their part of the word's occurrences, largest first. */
  readonly themes: readonly {
    readonly id: string;
    readonly label: string;
    readonly share: number;
  }[];
  readonly lines: readonly (PassagePlace & {
    readonly transcriptName: string;
    readonly before: string;
    readonly word: string;
    readonly after: string;
  })[];
}

export interface FitProgress {
  readonly sweep: number;
  /** Nats; null where it was not evaluated at this sweep. */
  readonly bound: number | null;
  readonly change: number;
  readonly fraction: number;
}

export interface FitRequest {
  readonly kind: 'from scratch' | 're-fit';
  /** For a fit from scratch: how many themes; null for the study's setting. */
  readonly themes: number | null;
}

export type EvidenceRequest =
  | { readonly what: 'steadiness'; readonly resamples: number }
  | { readonly what: 'how many'; readonly from: number; readonly to: number };

/** What was measured of the fit on screen; null where it was not. */
export interface EvidenceView {
  readonly steadiness: SteadinessView | null;
  readonly howMany: HowManyView | null;
}

/** Floors are what the same study reaches with its words shuffled among the passages. */
export interface SteadinessView {
  readonly refits: number;
  readonly refitsAtLeast: number;
  readonly people: number;
  /** People whom each re-fit leaves out. */
  readonly leftOut: number;
  /** Themes in the rows of the fit; one that others were merged into since is left out. */
  readonly themes: readonly {
    readonly id: string;
    readonly label: string;
    /** -1 to 1: mean cosine of what sets the theme apart to the same in the re-fits. */
    readonly steadiness: number;
    readonly aboveFloor: boolean;
    readonly passages: number;
    readonly stayed: number;
    /** NPMI, -1 to 1. */
    readonly coherence: number;
    /** "33 of its 40 passages stayed in at least 40 of 50 re-fits." */
    readonly sentence: string;
  }[];
  readonly floor: {
    readonly steadiness: number;
    readonly coherence: number;
    /** A leading strength that shuffled words reach in one passage out of twenty. */
    readonly strength: number;
    /** Share of passages that stayed with their theme, 0 to 1. */
    readonly stayed: number;
  };
  /** Held-out perplexity, and with shuffled words. */
  readonly perplexity: number;
  readonly perplexityFloor: number;
  /** How many themes are steadier than the floor, and what the floor of strength means here. */
  readonly sentences: readonly string[];
}

/** Three curves over numbers of themes, each with its floor; it recommends and never chooses. */
export interface HowManyView {
  readonly people: number;
  /** Groups of people that were held out in turn. */
  readonly groups: number;
  readonly points: readonly {
    readonly themes: number;
    readonly perplexity: number;
    readonly coherence: number;
    readonly coherenceError: number;
    readonly steadiness: number;
    readonly steadinessError: number;
    readonly floor: {
      readonly perplexity: number;
      readonly coherence: number;
      readonly steadiness: number;
    };
  }[];
  /** Numbers worth reading, ends included; null where nothing can be said. */
  readonly range: { readonly from: number; readonly to: number } | null;
  readonly sentence: string;
}

/** What a split of a theme would give; nothing is decided yet. */
export interface SplitPreview {
  readonly theme: string;
  readonly label: string;
  /** The first keeps the theme's id, name, seeds and codings; the second is a new candidate. */
  readonly halves: readonly [SplitHalf, SplitHalf];
  /** How alike the halves' words are, 0 to 1. */
  readonly cosine: number;
  /** Which half keeps what, and why. */
  readonly sentence: string;
}

export interface SplitHalf {
  /** Share of all counted words, 0 to 1. */
  readonly share: number;
  readonly words: readonly {
    readonly form: string;
    readonly surface: string;
    readonly probability: number;
  }[];
  /** Passages that it would lead, and the people who say them. */
  readonly passages: number;
  readonly people: number;
  /** Codings with the theme, confirmed or by hand, on passages whose words are this half's. */
  readonly codings: number;
  /** Strongest first, one a participant before a second from anyone. */
  readonly strongest: readonly (PassagePlace & {
    readonly transcriptName: string;
    readonly participant: string;
    readonly text: string;
    readonly strength: number;
    readonly countedWords: number;
  })[];
}

export interface MovedView {
  readonly compared: number;
  readonly ofThemes: number;
  readonly passages: readonly (PassagePlace & {
    readonly transcriptName: string;
    readonly number: number;
    readonly text: string;
    readonly from: { readonly id: string; readonly label: string };
    readonly to: { readonly id: string; readonly label: string };
    readonly strengths: {
      readonly fromBefore: number;
      readonly fromAfter: number;
      readonly toBefore: number;
      readonly toAfter: number;
    };
  })[];
  readonly themes: readonly {
    readonly id: string;
    readonly label: string;
    readonly gained: readonly string[];
    readonly lost: readonly string[];
  }[];
  readonly appeared: readonly string[];
  readonly gone: readonly string[];
}

/** What moves between a fit and a re-fit of it without any new decision. */
export interface MovedFloor {
  readonly passages: number;
  /** Themes that gained or lost words among their first ones. */
  readonly themes: number;
}

export type ReportStanding = 'confirmed' | 'by hand' | 'suggested' | 'rejected';
export type ReportFormat = 'csv' | 'json' | 'html' | 'docx' | 'themes csv' | 'methods';

export interface ReportRequest {
  readonly standings: readonly ReportStanding[];
  /** Themes to include; null for all. */
  readonly themes: readonly string[] | null;
  /** Whether cells that a spreadsheet would run are guarded. */
  readonly guard: boolean;
}

export interface ReportPreview {
  readonly count: number;
  readonly people: number;
  readonly filter: string;
  readonly themes: readonly {
    readonly id: string;
    readonly label: string;
    readonly count: number;
    readonly people: number;
  }[];
  /** The first excerpts, as they will stand. */
  readonly excerpts: readonly {
    readonly theme: string;
    readonly question: string;
    readonly text: string;
    readonly attribution: string;
    readonly standing: string;
  }[];
  readonly cautions: readonly string[];
}

export interface NamedFile {
  readonly fileName: string;
  readonly bytes: Uint8Array;
}

export interface Found {
  readonly themes: readonly { readonly id: string; readonly label: string }[];
  readonly words: readonly { readonly form: string; readonly occurrences: number }[];
  readonly transcripts: readonly { readonly id: string; readonly name: string }[];
  readonly passages: readonly (PassagePlace & {
    readonly transcriptName: string;
    readonly before: string;
    readonly match: string;
    readonly after: string;
  })[];
}

export interface VerifyView {
  readonly outcome: 'holds' | 'differs' | 'not checked';
  readonly sentence: string;
  /** What is wrong with the file or the trail, a sentence each. */
  readonly faults: readonly string[];
  /** A line a fit. */
  readonly fits: readonly string[];
  /** What was found of the noted hash, or what cannot be known without one. */
  readonly noted: string;
  /** The chain's last hash; empty where the file is damaged. */
  readonly head: string;
}

export interface TrailRequest {
  readonly by: string | null;
  readonly kind: string | null;
  /** The beginning of a time, ISO 8601. */
  readonly since: string | null;
  readonly theme: string | null;
}

export interface TrailView {
  readonly head: string;
  /** How many decisions there are in all. */
  readonly of: number;
  readonly readers: readonly string[];
  readonly kinds: readonly { readonly kind: string; readonly label: string }[];
  /** Newest first. */
  readonly lines: readonly {
    readonly record: number;
    readonly at: string;
    readonly by: string;
    readonly heading: string;
    readonly what: string;
    readonly on: readonly string[];
    readonly undoes: number | null;
    readonly takenBack: boolean;
  }[];
}

export interface WithdrawalRequestView {
  readonly participant: string;
  /** Names by which others speak of the person. */
  readonly names: readonly string[];
}

/** What a withdrawal takes away. */
export interface WithdrawalView {
  readonly participant: string;
  readonly transcripts: readonly string[];
  /** Transcripts with others, in which their turns lose their words. */
  readonly shared: readonly string[];
  readonly codings: number;
  readonly memos: number;
  readonly fits: number;
  readonly exported: readonly string[];
  readonly names: readonly string[];
  /** Where the names stand besides, in words. */
  readonly mentions: readonly string[];
  readonly beyondReach: string;
}

/** What a seal takes away. */
export interface SealView {
  readonly transcripts: readonly string[];
  readonly wordings: number;
  readonly originals: number;
  readonly fits: number;
  readonly exported: readonly string[];
  readonly names: readonly {
    readonly name: string;
    readonly standIn: string;
    readonly person: boolean;
    readonly mentions: readonly string[];
  }[];
  readonly beyondReach: string;
}

export type TakeInChoice = 'mine' | 'theirs' | 'both';

/** What another copy of the study would bring. */
export interface TakeInView {
  readonly path: string;
  readonly name: string;
  /** The copy's head: taking in refuses another state of it than the one shown. */
  readonly head: string;
  readonly readers: readonly string[];
  readonly themes: readonly string[];
  readonly codings: number;
  readonly removed: number;
  readonly nones: number;
  readonly memos: number;
  /** Decisions on what is not here: withdrawn, or gathered in the other copy alone. */
  readonly left: number;
  readonly conflicts: readonly {
    readonly id: string;
    /** Where it stands, in words. */
    readonly on: string;
    readonly text: string;
    /** Null where it was removed. */
    readonly mine: string | null;
    readonly theirs: string | null;
    readonly both: boolean;
  }[];
}

/** What an act of erasing came to. */
export interface ErasedView {
  readonly overview: Overview;
  readonly records: number;
  readonly fits: number;
  readonly refitted: boolean;
  readonly backupsRemoved: number;
  /** Why backups that hold what was erased are still there. */
  readonly backupsLeft: readonly string[];
}

/** What kind of thing could tell who somebody is. */
export type IdentifierKind =
  | 'person'
  | 'place'
  | 'organisation'
  | 'other name'
  | 'e-mail'
  | 'telephone'
  | 'web'
  | 'date'
  | 'age'
  | 'postcode'
  | 'number';

/** A stand-in is another name; a generalisation says what kind of thing stood there. */
export type IdentifierDecision = 'stand-in' | 'generalised' | 'left' | 'not identifying';

/** Something that could tell who somebody is, in all its ways of writing. */
export interface IdentifierRow {
  readonly key: string;
  readonly kind: IdentifierKind;
  readonly name: string;
  readonly forms: readonly { readonly form: string; readonly occurrences: number }[];
  /** Places that nobody has decided on; never 0. */
  readonly open: number;
  readonly transcripts: number;
  /** What is offered first: the decision, and what would be put there. */
  readonly offered: { readonly decision: IdentifierDecision; readonly replacement: string };
  /** Stand-ins that were put in place of the same name before: two for two people of one name. */
  readonly before: readonly string[];
  /** What to mind, one sentence each ("Also the stand-in for somebody else"). */
  readonly notes: readonly string[];
}

export interface IdentifiersView {
  /** Kind by kind, the commonest first. */
  readonly open: readonly IdentifierRow[];
  readonly settled: readonly {
    readonly id: string;
    readonly kind: IdentifierKind;
    readonly forms: readonly string[];
    readonly decision: IdentifierDecision;
    readonly replacement: string | null;
    readonly transcripts: number;
    /** Whether it can be opened again by itself: what was put into texts is taken back by undo. */
    readonly canReopen: boolean;
  }[];
  /** Open places by transcript; one that is not here has none. */
  readonly byTranscript: Readonly<Record<string, number>>;
  /** Full dates that would move together. */
  readonly dates: { readonly movable: number; readonly moved: boolean };
}

/** One place of an identifier. */
export interface IdentifierPlace extends PassagePlace {
  readonly key: string;
  readonly kind: IdentifierKind;
  readonly standing: 'open' | 'stand-in' | 'left' | 'not identifying';
  readonly transcriptName: string;
  readonly speaker: string | null;
  readonly before: string;
  readonly match: string;
  readonly after: string;
}

export interface IdentifierPlaces {
  readonly places: readonly IdentifierPlace[];
  /** Where the same words stand outside the texts. */
  readonly elsewhere: readonly { readonly where: string; readonly text: string }[];
}

export interface SettleRequest {
  readonly key: string;
  readonly decision: IdentifierDecision;
  /** For a stand-in or a generalisation; null for others. */
  readonly replacement: string | null;
  /** Null for every open place. */
  readonly places: readonly PassagePlace[] | null;
}

/** How a decision about a passage came about: stored with it. */
export interface UnderView {
  /** The reading list's name. */
  readonly drawnBy: string;
  readonly seenSuggestion: boolean;
}

export interface CodeRequest extends UnderView {
  readonly place: PassagePlace;
  readonly theme: string;
  readonly memo: string;
}

/** Every method: what it takes and what it answers with. `null` takes or answers nothing. */
export interface Api {
  about: { takes: null; gives: About };
  recentStudies: { takes: null; gives: readonly RecentStudy[] };
  overview: { takes: null; gives: Overview | null };

  openDemo: { takes: null; gives: Overview };
  /** `path` null: ask with the system's dialog, or use the studies folder. Null where cancelled. */
  startStudy: {
    takes: { name: string; path: string | null; password?: string | undefined };
    gives: Overview | null;
  };
  /** Refused with the code 'locked' where it needs a password: `lockedStudy` and `unlockStudy`. */
  openStudy: {
    takes: {
      path: string | null;
      readOnly: boolean;
      /** Although a note beside it says that another machine has it open. */
      despiteNote?: boolean | undefined;
    };
    gives: Overview | null;
  };
  /** The study that waits for its password; null where none does. */
  lockedStudy: { takes: null; gives: LockedStudy | null };
  unlockStudy: { takes: { password: string }; gives: Overview };
  /** No longer asks for the password; what was open before is open still. */
  leaveLocked: { takes: null; gives: Overview | null };
  /** Closes a study with a password and asks for it; a running fit is stopped. */
  lockStudy: { takes: null; gives: null };
  /** A person moved, typed or clicked. */
  stillHere: { takes: null; gives: null };
  passwordView: { takes: null; gives: PasswordView };
  /** Sets, changes or (next null) removes the password; `current` is null where there is none. */
  setPassword: {
    takes: { current: string | null; next: string | null };
    gives: { overview: Overview; /** What else a person should know. */ notes: readonly string[] };
  };
  setIdleMinutes: { takes: { minutes: number }; gives: PasswordView };
  closeStudy: { takes: null; gives: null };
  /**
   * Copies the open study to another place. `path` null: ask with the system's dialog, or beside it.
   * `goOn`: the copy is the open study afterwards. Null where cancelled.
   */
  copyStudy: {
    takes: { path: string | null; goOn: boolean };
    gives: { path: string; overview: Overview } | null;
  };
  backupsView: { takes: null; gives: BackupsView };
  /** For all studies on this machine. `folder` null: beside each study. */
  keepBackups: { takes: { keep: number; folder: string | null }; gives: BackupsView };
  /** Shows the system's dialog; null where there is none or it was cancelled. */
  chooseBackupFolder: { takes: null; gives: string | null };
  makeBackup: { takes: null; gives: BackupsView };
  removeBackup: { takes: { path: string }; gives: BackupsView };
  /** Copies a backup to a new file and opens that. `path` null: beside the study. */
  openBackup: { takes: { backup: string; path: string | null }; gives: Overview | null };
  compactView: { takes: null; gives: CompactView };
  compactStudy: { takes: null; gives: CompactView };
  /** Brings what is whole in a damaged study over into a new file. `to` null: beside it. */
  recoverStudy: {
    takes: { path: string; to: string | null; password?: string | undefined };
    gives: RecoveryView;
  };
  renameStudy: { takes: { name: string }; gives: Overview };
  nameReader: { takes: { name: string }; gives: Overview };
  undo: { takes: null; gives: { did: string | null; overview: Overview } };
  redo: { takes: null; gives: { did: string | null; overview: Overview } };

  /** Shows the system's dialog; null where there is none or it was cancelled. */
  chooseTranscripts: { takes: null; gives: GatherOutcome | null };
  addTranscripts: {
    takes: { files: readonly { name: string; bytes: Uint8Array }[] };
    gives: GatherOutcome;
  };
  /** Makes a transcript of a table of answers. Columns by their headings. */
  addTable: {
    takes: {
      table: string;
      sheet: string;
      text: readonly string[];
      participant: string | null;
      attributes: readonly string[];
    };
    gives: GatherOutcome;
  };
  leaveTable: { takes: { table: string }; gives: null };
  settleDoubles: {
    takes: { choices: readonly { double: string; choice: DoubleChoice }[] };
    gives: GatherOutcome;
  };
  addFieldNotes: {
    takes: {
      files: readonly { name: string; bytes: Uint8Array }[];
      transcript: string | null;
    };
    gives: FieldNotesOutcome;
  };
  fieldNoteView: { takes: { note: string }; gives: FieldNoteRow & { readonly text: string } };
  describeFieldNote: {
    takes: { note: string; name: string; transcript: string | null };
    gives: Overview;
  };
  removeFieldNote: { takes: { note: string }; gives: Overview };
  readCodebook: { takes: { name: string; bytes: Uint8Array }; gives: CodebookOffer };
  /** Takes the named entries in as themes; those whose names are taken are passed over. */
  addCodebook: {
    takes: { name: string; bytes: Uint8Array; names: readonly string[]; byHand: boolean };
    gives: { overview: Overview; added: number };
  };
  addAttributes: { takes: { name: string; bytes: Uint8Array }; gives: AttributesOutcome };
  gatherView: { takes: null; gives: GatherView };
  /** Takes a moment in a large study; null while nothing is gathered. */
  counted: { takes: null; gives: Counted | null };
  transcriptView: { takes: { transcript: string }; gives: TranscriptView };
  /** What could tell who somebody is, over the whole study. Takes seconds in a large one. */
  identifiers: { takes: null; gives: IdentifiersView };
  /** Every place of one of them. */
  identifierPlaces: { takes: { key: string }; gives: IdentifierPlaces };
  /** All that stands in one transcript, in order, for marking it there. */
  identifiersIn: { takes: { transcript: string }; gives: readonly IdentifierPlace[] };
  /** Decides on any number at once; with `elsewhere`, in names, memos and the codebook as well. */
  settleIdentifiers: {
    takes: { settle: readonly SettleRequest[]; elsewhere: boolean };
    gives: Overview;
  };
  /** Takes back that something stays as it is. */
  reopenIdentifier: { takes: { identifier: string }; gives: Overview };
  /** Moves every full date of the study by one number of days that nobody is told. */
  moveDates: { takes: null; gives: Overview };
  /** The names behind the stand-ins in a file that opens with this password alone. */
  identifierKey: { takes: { password: string }; gives: NamedFile };
  /** Takes such a file in: the same stand-ins are offered again. How many names it held. */
  readIdentifierKey: {
    takes: { name: string; bytes: Uint8Array; password: string };
    gives: { names: number };
  };
  renameTranscript: { takes: { transcript: string; name: string }; gives: Overview };
  removeTranscript: { takes: { transcript: string }; gives: Overview };
  assignSpeaker: {
    takes: {
      transcript: string;
      label: string | null;
      role: Role;
      /** A name: the participant of that name, made where there is none. Null for other roles. */
      participant: string | null;
      /** The same for every transcript with this label. */
      everywhere: boolean;
    };
    gives: Overview;
  };
  describeParticipant: {
    takes: { participant: string; name: string; attributes: Record<string, string> };
    gives: Overview;
  };
  changeSettings: {
    takes: { settings: Record<string, string | number | boolean | readonly string[]> };
    gives: Overview;
  };

  /**
   * Reports progress; cancelling stops it and leaves the study as it was. A fit from scratch that
   * would take long answers with the quick answer first, where the study's setting asks for the full
   * one: that is made behind it (`Overview.refining`, event `refining`) and takes its place.
   */
  fit: { takes: FitRequest; gives: { overview: Overview; moved: MovedView | null } };
  moved: { takes: null; gives: MovedView | null };
  /** What a re-fit moves by itself; null where the fit on screen is no re-fit. Takes a moment. */
  movedFloor: { takes: null; gives: MovedFloor | null };
  chooseFit: { takes: { fit: string }; gives: Overview };
  /** An empty name takes it away. */
  nameFit: { takes: { fit: string; name: string }; gives: Overview };
  compareFits: { takes: { first: string; second: string }; gives: FitsCompared };
  /** Lets go of the full answer that is being made; the quick one stays. */
  stopRefining: { takes: null; gives: Overview };
  /** Measures the fit on screen and keeps the result with it. Reports progress, can be cancelled. */
  gatherEvidence: { takes: EvidenceRequest; gives: Overview };
  evidenceView: { takes: null; gives: EvidenceView };

  shapeView: { takes: null; gives: ShapeView };
  strata: { takes: null; gives: Strata };
  /** The strata as a drawing (SVG), with bands in the order given. */
  strataFigure: {
    takes: { theme: string | null; transcripts: readonly string[] };
    gives: NamedFile;
  };
  themeView: { takes: { theme: string }; gives: ThemeView };
  themePassages: {
    takes: { theme: string; list: ThemePassageList };
    gives: readonly ThemePassageView[];
  };
  themeSpread: { takes: { theme: string }; gives: ThemeSpread };
  wordView: { takes: { form: string }; gives: WordView };
  /** What may go wrong with seed words, a sentence each; for a new theme `theme` is null. */
  seedCheck: {
    takes: { theme: string | null; words: readonly string[] };
    gives: readonly string[];
  };
  nameTheme: { takes: { theme: string; name: string }; gives: Overview };
  defineTheme: {
    takes: {
      theme: string;
      code: string;
      brief: string;
      full: string;
      whenToUse: string;
      whenNotToUse: string;
      examples: string;
    };
    gives: Overview;
  };
  addTheme: {
    takes: { name: string; byHand: boolean; seeds: readonly string[] };
    gives: { overview: Overview; theme: string };
  };
  /** A theme that starts from the words of marked passages, which are coded with it by hand. */
  addThemeFromPassages: {
    takes: { name: string; passages: readonly PassagePlace[] };
    gives: { overview: Overview; theme: string };
  };
  /** Both halves as they would be; decides nothing. Reports progress, can be cancelled. */
  splitPreview: { takes: { theme: string }; gives: SplitPreview };
  /** The same, decided: a fit in which all other themes keep their words. `theme` is the new one. */
  splitTheme: { takes: { theme: string }; gives: { overview: Overview; theme: string } };
  pinTheme: { takes: { theme: string; pinned: boolean }; gives: Overview };
  setThemeAside: { takes: { theme: string; aside: boolean }; gives: Overview };
  mergePreview: { takes: { into: string; from: readonly string[] }; gives: MergePreview };
  mergeThemes: { takes: { into: string; from: readonly string[] }; gives: Overview };
  orderThemes: { takes: { themes: readonly string[] }; gives: Overview };
  /** A heading over themes, and those that come to stand under it. */
  addHeading: { takes: { name: string; themes: readonly string[] }; gives: Overview };
  /** Its name, and all the themes that stand under it from now on. */
  changeHeading: {
    takes: { heading: string; name: string; themes: readonly string[] };
    gives: Overview;
  };
  /** What stood under it stands under none. */
  removeHeading: { takes: { heading: string }; gives: Overview };
  putUnder: { takes: { theme: string; heading: string | null }; gives: Overview };
  seedWord: { takes: { theme: string; word: string; seeded: boolean }; gives: Overview };
  shutOutWord: { takes: { theme: string; word: string; shutOut: boolean }; gives: Overview };

  readingList: { takes: ReadingListRequest; gives: ReadingList };
  passageView: { takes: { place: PassagePlace }; gives: PassageView };
  /** Confirms where the theme was suggested here, codes by hand otherwise. */
  confirm: { takes: CodeRequest; gives: Overview };
  reject: { takes: CodeRequest; gives: Overview };
  codeByHand: { takes: CodeRequest; gives: Overview };
  /** Says that a coding of an earlier wording stands under the wording of now. */
  keepCoding: { takes: { transcript: string; coding: string }; gives: Overview };
  removeCoding: { takes: { transcript: string; coding: string }; gives: Overview };
  markNone: { takes: UnderView & { place: PassagePlace }; gives: Overview };
  clearNone: { takes: { transcript: string; none: string }; gives: Overview };
  /** Gives a coding another theme: a decision of its own, with what is known now. */
  moveCoding: {
    takes: UnderView & { transcript: string; coding: string; theme: string };
    gives: Overview;
  };
  /** Codes several passages in one gesture, each of which was opened before; recorded as such. */
  codeTogether: {
    takes: UnderView & { places: readonly PassagePlace[]; theme: string };
    gives: Overview;
  };
  /** Draws passages by chance and records which; a draw that was made already stays as it was. */
  drawSample: { takes: DrawRequest; gives: Overview };
  /** Holds the cold sample against the fit on screen; its decisions enter priors from then on. */
  scoreColdSample: { takes: null; gives: Overview };
  readingEvidence: { takes: null; gives: ReadingEvidence };
  search: { takes: SearchRequest & { from: number; count: number }; gives: SearchResult };
  /** What this machine keeps for whoever reads here; `stopped` in the open study. */
  readingKept: {
    takes: null;
    gives: { preferences: ReadingPreferences | null; stopped: StoppedAt | null };
  };
  keepReading: {
    takes: { preferences: ReadingPreferences | null; stopped: StoppedAt | null };
    gives: null;
  };
  writeMemo: {
    takes: {
      on:
        | { kind: 'study' }
        | { kind: 'transcript'; transcript: string }
        | { kind: 'passage'; place: PassagePlace }
        | { kind: 'theme'; theme: string }
        | { kind: 'coding'; transcript: string; coding: string };
      text: string;
    };
    gives: Overview;
  };
  reviseMemo: { takes: { memo: string; text: string }; gives: Overview };

  find: { takes: { text: string }; gives: Found };
  reportPreview: { takes: ReportRequest; gives: ReportPreview };
  report: { takes: ReportRequest & { format: ReportFormat }; gives: NamedFile };
  /** Reads every byte, makes every fit again and compares; reports progress, can be cancelled. */
  verifyStudy: { takes: { head: string | null }; gives: VerifyView };
  trailView: { takes: TrailRequest; gives: TrailView };
  trailFile: { takes: TrailRequest & { format: 'csv' | 'markdown' }; gives: NamedFile };
  withdrawalView: { takes: WithdrawalRequestView; gives: WithdrawalView };
  /** Erases for good; with `refit` the study is fitted again first, which reports progress. */
  withdrawParticipant: { takes: WithdrawalRequestView & { refit: boolean }; gives: ErasedView };
  /** Null where there is nothing to seal. */
  sealView: { takes: null; gives: SealView | null };
  /** `names`: originals that are replaced by their stand-ins wherever they stand. */
  sealOriginals: { takes: { names: readonly string[]; refit: boolean }; gives: ErasedView };

  /** `path` null: ask with the system's dialog. Null where cancelled. */
  takeInView: { takes: { path: string | null; password: string | null }; gives: TakeInView | null };
  takeIn: {
    takes: {
      path: string;
      password: string | null;
      head: string;
      choices: Record<string, TakeInChoice>;
    };
    gives: Overview;
  };

  /** Shows the system's dialog and writes the file; the path, or null where cancelled. */
  saveFile: { takes: NamedFile; gives: string | null };
}

export type Method = keyof Api;

/** What the server half tells a window without being asked. */
export interface Events {
  /** A decision was made, here or in another window. */
  changed: Overview;
  closed: null;
  /**
   * How far the full answer behind the quick one is. At its end `fraction` is null, and `said` tells
   * why it was let go, or is null where it took its place (`changed` is told as well).
   */
  refining: { readonly fraction: number | null; readonly said: string | null };
  /** Something that nobody asked about went wrong, in a sentence; decisions are safe all the same. */
  caution: string;
  /** A study waits for its password: nothing of the one that was shown may stay on screen. */
  locked: LockedStudy;
  /** A menu item was chosen; the window carries it out. */
  command:
    | 'undo'
    | 'redo'
    | 'find'
    | 'start study'
    | 'open study'
    | 'add transcripts'
    | 'lock study'
    | 'close study';
}

/** One line of what can travel, so that the three parts that are derived from it agree. */
export const methods = [
  'about',
  'recentStudies',
  'overview',
  'openDemo',
  'startStudy',
  'openStudy',
  'lockedStudy',
  'unlockStudy',
  'leaveLocked',
  'lockStudy',
  'stillHere',
  'passwordView',
  'setPassword',
  'setIdleMinutes',
  'closeStudy',
  'copyStudy',
  'backupsView',
  'keepBackups',
  'chooseBackupFolder',
  'makeBackup',
  'removeBackup',
  'openBackup',
  'compactView',
  'compactStudy',
  'recoverStudy',
  'renameStudy',
  'nameReader',
  'undo',
  'redo',
  'chooseTranscripts',
  'addTranscripts',
  'addTable',
  'leaveTable',
  'settleDoubles',
  'addFieldNotes',
  'fieldNoteView',
  'describeFieldNote',
  'removeFieldNote',
  'readCodebook',
  'addCodebook',
  'addAttributes',
  'gatherView',
  'counted',
  'transcriptView',
  'identifiers',
  'identifierPlaces',
  'identifiersIn',
  'settleIdentifiers',
  'reopenIdentifier',
  'moveDates',
  'identifierKey',
  'readIdentifierKey',
  'renameTranscript',
  'removeTranscript',
  'assignSpeaker',
  'describeParticipant',
  'changeSettings',
  'fit',
  'moved',
  'movedFloor',
  'chooseFit',
  'nameFit',
  'compareFits',
  'stopRefining',
  'gatherEvidence',
  'evidenceView',
  'shapeView',
  'strata',
  'strataFigure',
  'themeView',
  'themePassages',
  'themeSpread',
  'wordView',
  'seedCheck',
  'nameTheme',
  'defineTheme',
  'addTheme',
  'addThemeFromPassages',
  'splitPreview',
  'splitTheme',
  'pinTheme',
  'setThemeAside',
  'mergePreview',
  'mergeThemes',
  'orderThemes',
  'addHeading',
  'changeHeading',
  'removeHeading',
  'putUnder',
  'seedWord',
  'shutOutWord',
  'readingList',
  'passageView',
  'confirm',
  'reject',
  'codeByHand',
  'keepCoding',
  'removeCoding',
  'markNone',
  'clearNone',
  'moveCoding',
  'codeTogether',
  'drawSample',
  'scoreColdSample',
  'readingEvidence',
  'search',
  'readingKept',
  'keepReading',
  'writeMemo',
  'reviseMemo',
  'find',
  'reportPreview',
  'report',
  'verifyStudy',
  'trailView',
  'trailFile',
  'withdrawalView',
  'withdrawParticipant',
  'sealView',
  'sealOriginals',
  'takeInView',
  'takeIn',
  'saveFile',
] as const satisfies readonly Method[];

/** Fails to compile where a method is missing from the list above. */
export type EveryMethodIsListed =
  Exclude<Method, (typeof methods)[number]> extends never ? true : never;
export const everyMethodIsListed: EveryMethodIsListed = true;

/** The client's side of the contract, as a window uses it. */
export interface Link {
  call<Name extends Method>(
    method: Name,
    takes: Api[Name]['takes'],
    options?: {
      readonly onProgress?: (progress: FitProgress) => void;
      readonly signal?: AbortSignal;
    },
  ): Promise<Answer<Api[Name]['gives']>>;
  on<Name extends keyof Events>(event: Name, listener: (detail: Events[Name]) => void): () => void;
}
