import type { Detail, Replacement, Span, Turn } from '../spans/index.ts';
import type {
  BlobRef,
  Coding,
  CodingId,
  Definition,
  Draw,
  DrawId,
  EvidenceKind,
  Exported,
  FieldNote,
  FieldNoteId,
  Fit,
  FitId,
  Heading,
  HeadingId,
  GuideQuestion,
  Identifier,
  IdentifierId,
  Memo,
  MemoId,
  None,
  Participant,
  ParticipantId,
  PlainValue,
  QuestionId,
  Reader,
  Scored,
  SettingValue,
  Speaker,
  TakenIn,
  Theme,
  ThemeId,
  Transcript,
  TranscriptFacts,
  TranscriptId,
} from './study.ts';

/** What a revision of a transcript's text replaces. */
export interface TextState {
  readonly text: BlobRef;
  readonly length: number;
  readonly turns: readonly Turn[];
}

/** What is said about a transcript besides its words. */
export interface TranscriptDescription {
  readonly fileName: string;
  readonly details: readonly Detail[];
  /** Null for nothing said. */
  readonly facts: TranscriptFacts | null;
}
/** What was known and in sight when a coding got its theme. */
export type CodingKnown = Pick<Coding, 'under' | 'strength' | 'codebookVersion'>;

/** The part of a coding that can be changed afterwards. */
export type CodingState = Pick<Coding, 'theme' | 'standing' | 'span' | 'memo'> & {
  /** Needed where the theme changes: another theme is another decision. */
  readonly known?: CodingKnown;
};

/**
 * One decision, in the past tense, as plain data. Each carries what it replaces, so that its inverse
 * needs nothing but the edit itself and the trail can be read without replaying it. The `kind` is
 * the stable code in the file; what people read is in main/sentences.
 */
export type Edit =
  | { readonly kind: 'studyStarted'; readonly study: string; readonly name: string }
  | { readonly kind: 'studyRenamed'; readonly from: string; readonly to: string }
  | {
      readonly kind: 'settingsChanged';
      /** `null` stands for "not set: the default". */
      readonly changes: readonly {
        readonly key: string;
        readonly from: SettingValue;
        readonly to: SettingValue;
      }[];
    }
  | { readonly kind: 'readerAdded'; readonly reader: Reader }
  | { readonly kind: 'readerRemoved'; readonly reader: Reader }
  | { readonly kind: 'transcriptGathered'; readonly transcript: Transcript }
  | { readonly kind: 'transcriptRemoved'; readonly transcript: Transcript }
  | {
      readonly kind: 'transcriptRenamed';
      readonly transcript: TranscriptId;
      readonly from: string;
      readonly to: string;
    }
  | {
      readonly kind: 'speakersAssigned';
      readonly transcript: TranscriptId;
      readonly from: readonly Speaker[];
      readonly to: readonly Speaker[];
    }
  | {
      readonly kind: 'textRevised';
      readonly transcript: TranscriptId;
      readonly from: TextState;
      readonly to: TextState;
      readonly replacements: readonly Replacement[];
      /** Spans that mapping does not bring where they belong, and where that is. */
      readonly placed: readonly { readonly id: string; readonly span: Span }[];
      /** Spans as they are before, which mapping back would not restore (see `spansLost`). */
      readonly lost: readonly { readonly id: string; readonly span: Span }[];
    }
  | {
      readonly kind: 'transcriptDescribed';
      readonly transcript: TranscriptId;
      readonly from: TranscriptDescription;
      readonly to: TranscriptDescription;
    }
  | {
      readonly kind: 'guideRevised';
      readonly from: readonly GuideQuestion[];
      readonly to: readonly GuideQuestion[];
    }
  | {
      /** Which questions of the guide turns ask; null for none. */
      readonly kind: 'turnsTagged';
      readonly transcript: TranscriptId;
      readonly changes: readonly {
        /** The turn's place among the transcript's, from 0. */
        readonly turn: number;
        readonly from: QuestionId | null;
        readonly to: QuestionId | null;
      }[];
    }
  | {
      /** What a person decided about something that could tell who somebody is; null for nothing. */
      readonly kind: 'identifierSettled';
      readonly identifier: IdentifierId;
      readonly from: Identifier | null;
      readonly to: Identifier | null;
    }
  | { readonly kind: 'participantAdded'; readonly participant: Participant }
  | { readonly kind: 'participantRemoved'; readonly participant: Participant }
  | {
      readonly kind: 'participantDescribed';
      readonly participant: ParticipantId;
      readonly from: Omit<Participant, 'id'>;
      readonly to: Omit<Participant, 'id'>;
    }
  | { readonly kind: 'fieldNoteKept'; readonly note: FieldNote }
  | { readonly kind: 'fieldNoteLetGo'; readonly note: FieldNote }
  | {
      readonly kind: 'fieldNoteDescribed';
      readonly note: FieldNoteId;
      readonly from: Pick<FieldNote, 'name' | 'transcript'>;
      readonly to: Pick<FieldNote, 'name' | 'transcript'>;
    }
  | {
      readonly kind: 'themeAdded';
      readonly theme: Theme;
      /** Its place in codebook order, counted from 0; null or absent for the last. */
      readonly place?: number | null;
    }
  | {
      readonly kind: 'themeRemoved';
      readonly theme: Theme;
      /** The place that it leaves, counted from 0; null for the last. */
      readonly place: number | null;
    }
  | {
      readonly kind: 'themeRenamed';
      readonly theme: ThemeId;
      readonly from: string | null;
      readonly to: string | null;
    }
  | {
      readonly kind: 'themeDefined';
      readonly theme: ThemeId;
      readonly from: { readonly version: number; readonly definition: Definition };
      readonly to: { readonly version: number; readonly definition: Definition };
    }
  | { readonly kind: 'themePinned'; readonly theme: ThemeId }
  | { readonly kind: 'themeUnpinned'; readonly theme: ThemeId }
  | { readonly kind: 'themeSetAside'; readonly theme: ThemeId }
  | { readonly kind: 'themeBroughtBack'; readonly theme: ThemeId }
  | {
      readonly kind: 'themesMerged';
      readonly into: ThemeId;
      readonly from: readonly ThemeId[];
    }
  | {
      readonly kind: 'themesUnmerged';
      readonly into: ThemeId;
      readonly from: readonly ThemeId[];
    }
  | {
      readonly kind: 'themesOrdered';
      readonly from: readonly ThemeId[];
      readonly to: readonly ThemeId[];
    }
  | {
      readonly kind: 'headingAdded';
      readonly heading: Heading;
      /** Its place among the headings, counted from 0; null for the last. */
      readonly place: number | null;
    }
  | {
      readonly kind: 'headingRemoved';
      readonly heading: Heading;
      readonly place: number | null;
    }
  | {
      readonly kind: 'headingRenamed';
      readonly heading: HeadingId;
      readonly from: string;
      readonly to: string;
    }
  | {
      readonly kind: 'themePutUnder';
      readonly theme: ThemeId;
      /** Null stands for no heading. */
      readonly from: HeadingId | null;
      readonly to: HeadingId | null;
    }
  | { readonly kind: 'wordSeeded'; readonly theme: ThemeId; readonly word: string }
  | { readonly kind: 'wordUnseeded'; readonly theme: ThemeId; readonly word: string }
  | { readonly kind: 'wordShutOut'; readonly theme: ThemeId; readonly word: string }
  | { readonly kind: 'wordLetIn'; readonly theme: ThemeId; readonly word: string }
  | { readonly kind: 'codingMade'; readonly coding: Coding }
  | { readonly kind: 'codingRemoved'; readonly coding: Coding }
  | {
      readonly kind: 'codingRevised';
      readonly transcript: TranscriptId;
      readonly coding: CodingId;
      readonly from: CodingState;
      readonly to: CodingState;
    }
  | {
      /** A coding of an earlier wording stands under a later one as well. */
      readonly kind: 'codingLookedAtAgain';
      readonly transcript: TranscriptId;
      readonly coding: CodingId;
      /** Versions of the theme's codebook entry. */
      readonly from: number;
      readonly to: number;
    }
  | { readonly kind: 'noneMarked'; readonly none: None }
  | { readonly kind: 'noneCleared'; readonly none: None }
  | { readonly kind: 'memoWritten'; readonly memo: Memo }
  | { readonly kind: 'memoErased'; readonly memo: Memo }
  | {
      readonly kind: 'memoRevised';
      readonly memo: MemoId;
      readonly from: string;
      readonly to: string;
    }
  | { readonly kind: 'drawMade'; readonly draw: Draw }
  | { readonly kind: 'drawRemoved'; readonly draw: Draw }
  | {
      /** A cold sample is held against a fit; from then on its decisions enter priors. */
      readonly kind: 'drawScored';
      readonly draw: DrawId;
      readonly from: Scored | null;
      readonly to: Scored | null;
    }
  | {
      readonly kind: 'modelFitted';
      readonly fit: Fit;
      /** Candidate themes that this fit found. */
      readonly found: readonly Theme[];
      /** The fit that was on screen before. */
      readonly before: FitId | null;
    }
  | {
      /** Takes the newest fit back. Its arrays stay in the file, so a redo computes nothing. */
      readonly kind: 'fitRemoved';
      readonly fit: Fit;
      readonly found: readonly Theme[];
      /** The fit that comes on screen again. */
      readonly before: FitId | null;
    }
  | { readonly kind: 'fitChosen'; readonly from: FitId | null; readonly to: FitId | null }
  | {
      readonly kind: 'fitRenamed';
      readonly fit: FitId;
      readonly from: string | null;
      readonly to: string | null;
    }
  | {
      readonly kind: 'evidenceGathered';
      readonly fit: FitId;
      readonly what: EvidenceKind;
      /** Plain JSON; null takes it away. */
      readonly result: PlainValue;
      /** What stood there before; null for nothing. */
      readonly before: PlainValue;
    }
  | {
      /** A person's words, codings, memos and attributes are gone for good. */
      readonly kind: 'participantWithdrawn';
      readonly participant: ParticipantId;
      /** Transcripts that went altogether. */
      readonly transcripts: readonly TranscriptId[];
      /** Transcripts with other people, in which the person's turns lost their words. */
      readonly shared: readonly TranscriptId[];
    }
  | {
      /** The wordings before the one of now are gone for good. */
      readonly kind: 'originalsSealed';
      readonly transcripts: readonly TranscriptId[];
    }
  | {
      /** Fits whose stored words held something that was erased. */
      readonly kind: 'fitsForgotten';
      readonly fits: readonly FitId[];
    }
  | { readonly kind: 'copyTakenIn'; readonly copy: TakenIn }
  | { readonly kind: 'copyLetGo'; readonly copy: TakenIn }
  | { readonly kind: 'reportExported'; readonly report: Exported };

export type EditKind = Edit['kind'];
export type EditOf<Kind extends EditKind> = Extract<Edit, { readonly kind: Kind }>;

/** An edit with its place in the trail. */
export interface Entry {
  /** Sequence number of its record in the file; ascends, with gaps where blobs stand. */
  readonly sequence: number;
  /** ISO 8601 in UTC, as the machine's clock gave it. */
  readonly at: string;
  /** The reader's id, or a fixed word for a program acting without one ("command line"). */
  readonly by: string;
  /** Edits of one gesture share a group and are undone together. */
  readonly group?: string;
  /** The sequence number of the edit that this one takes back (an undo, or the undo of one). */
  readonly undoes?: number;
  readonly edit: Edit;
}
