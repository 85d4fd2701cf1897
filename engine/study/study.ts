import type { Detail, IdentifierKind, Role, Span, Turn } from '../spans/index.ts';

/** An id is minted outside the engine and never changes. */
export type ReaderId = string;
export type TranscriptId = string;
export type ParticipantId = string;
export type ThemeId = string;
export type CodingId = string;
export type NoneId = string;
export type MemoId = string;
export type FitId = string;
export type HeadingId = string;
export type IdentifierId = string;
export type QuestionId = string;
export type FieldNoteId = string;
export type DrawId = string;

/** Bytes kept in the study file, addressed by the sequence number of their record. */
export interface BlobRef {
  readonly sequence: number;
  /** Length in bytes. */
  readonly bytes: number;
}

/** Settings are flat ("text.stemming"), so that a change reads as one line in the trail. */
export type SettingValue = string | number | boolean | null | readonly string[];
export type SettingValues = Readonly<Record<string, SettingValue>>;

/** A person who codes. */
export interface Reader {
  readonly id: ReaderId;
  readonly name: string;
}

/** A person whose words were recorded. */
export interface Participant {
  readonly id: ParticipantId;
  readonly name: string;
  /** Attribute name to value, both as given; a missing value is absent. */
  readonly attributes: Readonly<Record<string, string>>;
}

/** One label of a transcript and whose it is. */
export interface Speaker {
  /** The label as it stands in the turns; null for turns without one. */
  readonly label: string | null;
  readonly role: Role;
  /** Set for participants only. */
  readonly participant: ParticipantId | null;
}

/** What a person knows about an interview besides its words; what nobody said is absent. */
export interface TranscriptFacts {
  /** When it was held: a day, YYYY-MM-DD. */
  readonly collected?: string;
  readonly interviewedBy?: string;
  /** ISO 639-3, where it is another than the study's. */
  readonly language?: string;
  /** Whether somebody compared it with the recording. */
  readonly checked?: boolean;
}

export interface Transcript {
  readonly id: TranscriptId;
  /** Unique in the study; a path with "/" where folders were gathered. */
  readonly name: string;
  readonly source: {
    readonly fileName: string;
    readonly format: string;
    /** SHA-256 of the file's bytes, hex. */
    readonly hash: string;
  };
  /** The canonical text that every offset counts in. */
  readonly text: BlobRef;
  /** Its length in UTF-16 code units. */
  readonly length: number;
  readonly details: readonly Detail[];
  readonly turns: readonly Turn[];
  readonly speakers: readonly Speaker[];
  /** Absent where nothing was said. */
  readonly facts?: TranscriptFacts;
}

/** A question of the interview guide. */
export interface GuideQuestion {
  readonly id: QuestionId;
  readonly text: string;
}

/** A stretch of one transcript. */
export interface TranscriptPlace {
  readonly transcript: TranscriptId;
  readonly span: Span;
}

/**
 * What a person decided about a name, a place, a number: the same over the whole study. The words in
 * `forms` and nothing else here are originals; sealing leaves them out.
 */
export interface Identifier {
  readonly id: IdentifierId;
  readonly kind: IdentifierKind;
  /** The ways in which it stands in the texts, in code-unit order. */
  readonly forms: readonly string[];
  /**
   * A stand-in is another name, a generalisation what it is an instance of ("a village"); what is
   * left stays in the texts knowingly; what is not identifying was taken for a name by mistake.
   */
  readonly decision: 'stand-in' | 'generalised' | 'left' | 'not identifying';
  /** What was put in its place; null where nothing was. */
  readonly replacement: string | null;
  /** Transcripts in which it was put. */
  readonly putIn: readonly TranscriptId[];
  /** For what stays: where it stays, or null for everywhere, later transcripts included. */
  readonly places: readonly TranscriptPlace[] | null;
}

/** What was written down beside the recordings. Kept for reading; no model ever sees it. */
export interface FieldNote {
  readonly id: FieldNoteId;
  readonly name: string;
  /** The transcript that it speaks of; null for the study as a whole. */
  readonly transcript: TranscriptId | null;
  readonly source: Transcript['source'];
  readonly text: BlobRef;
  /** Its length in UTF-16 code units. */
  readonly length: number;
}

/** A codebook entry (MacQueen, McLellan, Kay & Milstein 1998), without its name. */
export interface Definition {
  /** A short mark for the theme in tables and margins; absent or empty where there is none. */
  readonly code?: string;
  readonly brief: string;
  readonly full: string;
  readonly whenToUse: string;
  readonly whenNotToUse: string;
  readonly examples: string;
}

export const emptyDefinition: Definition = {
  brief: '',
  full: '',
  whenToUse: '',
  whenNotToUse: '',
  examples: '',
};

export interface Theme {
  readonly id: ThemeId;
  /** Null while it is a candidate: a fitted theme that no person has named. */
  readonly name: string | null;
  /** A theme by hand has no word distribution and stays out of the model. */
  readonly origin: 'fitted' | 'asked for' | 'by hand';
  readonly definition: Definition;
  /** Counts the wordings of the codebook entry from 1; codings remember theirs. */
  readonly version: number;
  readonly pinned: boolean;
  readonly setAside: boolean;
  /** Where its codings and words went; null while it stands for itself. */
  readonly mergedInto: ThemeId | null;
  /** Word forms in code-unit order. */
  readonly seeds: readonly string[];
  readonly shutOut: readonly string[];
}

/** A name over several themes; it is no model. */
export interface Heading {
  readonly id: HeadingId;
  readonly name: string;
}

export type Standing = 'confirmed' | 'rejected' | 'by hand';

/** What was known and in sight when a decision was made. */
export interface DecidedUnder {
  readonly reader: ReaderId;
  /** ISO 8601 in UTC. */
  readonly at: string;
  /** The reading list that the passage was drawn from. */
  readonly drawnBy: string;
  /** Whether suggestions were visible. */
  readonly seenSuggestion: boolean;
  /** The fit on screen, or null before the first. */
  readonly fit: FitId | null;
  /** How many were decided in one gesture, each looked at before; absent for one by one. */
  readonly together?: number;
}

/** One theme on one span of one transcript, decided by a person. */
export interface Coding {
  readonly id: CodingId;
  readonly transcript: TranscriptId;
  readonly span: Span;
  readonly theme: ThemeId;
  readonly standing: Standing;
  readonly under: DecidedUnder;
  /** The model's strength at that moment, 0 to 1; null where there was none. */
  readonly strength: number | null;
  /** The version of the theme's codebook entry at that moment. */
  readonly codebookVersion: number;
  readonly memo: string;
}

/** Read, and no theme applies. */
export interface None {
  readonly id: NoneId;
  readonly transcript: TranscriptId;
  readonly span: Span;
  readonly under: DecidedUnder;
}

/** Where a drawn passage stands; it has no other name. */
export interface DrawnPlace {
  readonly transcript: TranscriptId;
  readonly span: Span;
}

/**
 * Passages drawn by chance, as they were when they were drawn. A cold sample is drawn before the
 * first fit and read without suggestions: what is decided in it enters no prior, and nothing is
 * suggested for it, until it has been scored.
 */
export interface Draw {
  readonly id: DrawId;
  readonly kind: 'random draw' | 'cold sample';
  /** As each decision in it records it (`DecidedUnder.drawnBy`); unique. */
  readonly name: string;
  readonly seed: number;
  /** How many were asked for; there may have been fewer. */
  readonly count: number;
  /** Whether only passages without a decision could be drawn. */
  readonly unreadOnly: boolean;
  /** In the order of the draw. */
  readonly places: readonly DrawnPlace[];
  readonly reader: ReaderId;
  /** ISO 8601 in UTC. */
  readonly at: string;
  /** The fit that a cold sample was first held against; null until then and for other draws. */
  readonly scored: Scored | null;
}

export interface Scored {
  readonly fit: FitId;
  readonly reader: ReaderId;
  /** ISO 8601 in UTC. */
  readonly at: string;
}

export type MemoSubject =
  | { readonly kind: 'study' }
  | { readonly kind: 'transcript'; readonly transcript: TranscriptId }
  | { readonly kind: 'passage'; readonly transcript: TranscriptId; readonly span: Span }
  | { readonly kind: 'theme'; readonly theme: ThemeId };

export interface Memo {
  readonly id: MemoId;
  readonly subject: MemoSubject;
  readonly text: string;
  readonly reader: ReaderId;
  /** ISO 8601 in UTC. */
  readonly at: string;
}

/** Plain JSON: finite numbers only. */
export type PlainValue =
  string | number | boolean | null | readonly PlainValue[] | { readonly [key: string]: PlainValue };

/** What can be measured about a fit afterwards; engine/evidence gives the results their shapes. */
export type EvidenceKind = 'steadiness' | 'how many';

/** What a fit was made from and what came out: enough to make it again, bit for bit. */
export interface Fit {
  readonly id: FitId;
  readonly name: string | null;
  /** Rows of the fitted arrays, in order. */
  readonly themes: readonly ThemeId[];
  /** The trail up to this sequence number was taken into account. */
  readonly basis: number;
  readonly start: {
    readonly kind: 'fresh' | 'warm';
    readonly seed: number;
    /** The fit that a warm one starts from. */
    readonly from: FitId | null;
    /** From scratch: the fit whose themes rows were found again by; absent where there was none. */
    readonly rowsFrom?: FitId;
    /** Which theme of the fit before was split, and the theme that its other half became. */
    readonly split?: { readonly theme: ThemeId; readonly into: ThemeId };
  };
  /** Number of the numerical method; results of different methods differ. */
  readonly method: number;
  /** Number of the rules that turn texts into counted words. */
  readonly preparation: number;
  /** All settings with their defaults, as they were. */
  readonly settings: SettingValues;
  readonly passages: number;
  readonly vocabulary: number;
  readonly countedWords: number;
  readonly sweeps: number;
  readonly stopReason: string;
  /** Nats. */
  readonly bound: number;
  readonly boundTerms: Readonly<Record<string, number>>;
  readonly trace: readonly {
    readonly sweep: number;
    readonly bound: number | null;
    /** Absent in older fits. */
    readonly terms?: Readonly<Record<string, number>> | null;
    readonly likelihood: number | null;
    readonly change: number;
  }[];
  /** SHA-256, hex, of the stored words, the priors and the stored result. */
  readonly hashes: {
    readonly words: string;
    readonly priors: string;
    readonly result: string;
    readonly previousResult: string | null;
  };
  /** What the words were counted from: a hash of texts, speakers, settings and lists, and the seeds. */
  readonly counting?: { readonly source: string; readonly seeds: readonly string[] };
  /** Passages, vocabulary, counted words and their places. */
  readonly words: BlobRef;
  /** Proportions and distributions, f32. */
  readonly result: BlobRef;
  /** The newest evidence of each kind; absent before any was gathered. */
  readonly evidence?: { readonly [Kind in EvidenceKind]?: PlainValue };
}

/** A report that left the study, and whose words it held. */
export interface Exported {
  /** Its format as the reports call it ("docx"). */
  readonly what: string;
  readonly fileName: string;
  readonly transcripts: readonly TranscriptId[];
  readonly participants: readonly ParticipantId[];
  /** ISO 8601 in UTC. */
  readonly at: string;
  readonly reader: ReaderId;
}

/** Another copy of this study, up to its last record of then, as it was taken in. */
export interface TakenIn {
  /** The chain's hash after that copy's last record, hex. */
  readonly head: string;
  /** The last record that both copies share. */
  readonly shared: number;
  /** How many records the copy had. */
  readonly records: number;
  /** Fits that only the other copy has; codings that came along may have been made under them. */
  readonly fits: readonly FitId[];
  /** The other copy's decisions since the shared record, as JSON lines; null where none came. */
  readonly branch: BlobRef | null;
}

/** What a withdrawal leaves of a person. */
export interface Withdrawal {
  /** Transcripts that went altogether. */
  readonly transcripts: readonly TranscriptId[];
  /** Transcripts with other people, in which the person's turns lost their words. */
  readonly shared: readonly TranscriptId[];
}

/** A chain of units that undo or redo can reach, newest first. */
export interface HistoryStep {
  /** Sequence numbers in the order in which they were made. */
  readonly sequences: readonly number[];
  readonly group: string | null;
  readonly below: HistoryStep | null;
}

/**
 * A study: the fold of its trail. Immutable; holds lengths and references, no texts and no arrays.
 * Only the order of themes and of headings has a meaning: an undone removal puts anything else back at the end of
 * its map, so what depends on an order has to sort.
 * Codings and nones are kept by transcript so that one decision replaces one small map.
 */
export interface Study {
  readonly id: string;
  readonly name: string;
  /** Sequence number of the last edit folded in; -1 before the first. */
  readonly sequence: number;
  readonly settings: SettingValues;
  readonly readers: ReadonlyMap<ReaderId, Reader>;
  readonly transcripts: ReadonlyMap<TranscriptId, Transcript>;
  readonly participants: ReadonlyMap<ParticipantId, Participant>;
  readonly fieldNotes: ReadonlyMap<FieldNoteId, FieldNote>;
  /** In codebook order. */
  readonly themes: ReadonlyMap<ThemeId, Theme>;
  /** In the order in which they are shown. */
  readonly headings: ReadonlyMap<HeadingId, Heading>;
  /** Themes that stand under a heading, and which. */
  readonly under: ReadonlyMap<ThemeId, HeadingId>;
  readonly codings: ReadonlyMap<TranscriptId, ReadonlyMap<CodingId, Coding>>;
  readonly nones: ReadonlyMap<TranscriptId, ReadonlyMap<NoneId, None>>;
  readonly memos: ReadonlyMap<MemoId, Memo>;
  readonly identifiers: ReadonlyMap<IdentifierId, Identifier>;
  /** The interview guide, in its order. */
  readonly guide: readonly GuideQuestion[];
  readonly fits: ReadonlyMap<FitId, Fit>;
  readonly draws: ReadonlyMap<DrawId, Draw>;
  /** The fit on screen. */
  readonly fit: FitId | null;
  /** Fits that codings may refer to and that are not here: erased, or another copy's. */
  readonly absentFits: ReadonlySet<FitId>;
  readonly withdrawn: ReadonlyMap<ParticipantId, Withdrawal>;
  /** Transcripts whose earlier wordings were erased. */
  readonly sealed: ReadonlySet<TranscriptId>;
  /** In order. */
  readonly exported: readonly Exported[];
  readonly takenIn: readonly TakenIn[];
  readonly undo: HistoryStep | null;
  readonly redo: HistoryStep | null;
}

export const emptyStudy: Study = {
  id: '',
  name: '',
  sequence: -1,
  settings: {},
  readers: new Map(),
  transcripts: new Map(),
  participants: new Map(),
  fieldNotes: new Map(),
  themes: new Map(),
  headings: new Map(),
  under: new Map(),
  codings: new Map(),
  nones: new Map(),
  memos: new Map(),
  identifiers: new Map(),
  guide: [],
  fits: new Map(),
  draws: new Map(),
  fit: null,
  absentFits: new Set(),
  withdrawn: new Map(),
  sealed: new Set(),
  exported: [],
  takenIn: [],
  undo: null,
  redo: null,
};
