import { compareCodeUnits } from '../numbers/index.ts';
import { countedForm } from './counted-form.ts';
import type { Language } from './language.ts';
import { passagesOf, type Passage } from './passages.ts';
import type { TextSettings, WordLists } from './settings.ts';
import { stemmerFor } from './stemming.ts';
import { participantOf, type TranscriptText } from './transcript.ts';
import { createWordScanner, formOf } from './words.ts';

export interface PreparedPassage extends Passage {
  readonly transcript: string;
  readonly participant: string;
  /** Words that the model sees. */
  readonly countedWords: number;
}

export type LeftOutReason =
  'stop word' | 'filler' | 'too few passages' | 'too few participants' | 'too many passages';

export interface LeftOutWord {
  readonly form: string;
  readonly occurrences: number;
  readonly reason: LeftOutReason;
}

export interface SurfaceForm {
  readonly form: string;
  readonly occurrences: number;
}

/** Counted words in compressed sparse rows, as the model takes them: see engine/model/types.ts. */
export interface WordCounts {
  readonly passages: number;
  readonly words: number;
  readonly offsets: Int32Array;
  readonly indices: Int32Array;
  readonly counts: Float32Array;
}

/** What the model, the window and the reports need to know about the words of a study. */
export interface Prepared {
  /** D passages: transcripts in the order given, passages by number. */
  readonly passages: readonly PreparedPassage[];
  /** V counted forms in code-unit order; stems where stemming is on. */
  readonly vocabulary: readonly string[];
  readonly counts: WordCounts;
  /** Where the counted words of each passage stand. */
  readonly occurrences: {
    /** D + 1 offsets into triples. */
    readonly offsets: Int32Array;
    /** Triples (start, end, word index) in text order; start and end count in the transcript. */
    readonly words: Int32Array;
  };
  /** For each vocabulary entry, the forms it was said in, commonest first. */
  readonly surfaces: readonly (readonly SurfaceForm[])[];
  /** Forms that are not counted, commonest first. */
  readonly leftOut: readonly LeftOutWord[];
}

interface WordType {
  readonly form: string;
  occurrences: number;
  passages: number;
  lastPassage: number;
  readonly participants: Set<number>;
  readonly surfaces: Map<string, number>;
  readonly exempt: boolean;
  /** Its place in the vocabulary, -1 where it is left out. */
  index: number;
}

/** What becomes of a form as it is said: a type, or the list that leaves it out. */
type Sorted = WordType | { readonly reason: LeftOutReason; occurrences: number };

const fewestPassagesForShare = 4;

/**
 * Passages, vocabulary and counts of a study. `exempt` holds seed words as typed: neither lists nor
 * limits leave them out. The participant limit applies once the study has that many participants,
 * the share limit from four passages on: below, either would leave nothing.
 * The same transcripts in the same order under the same settings and lists give the same result.
 */
export function prepare(
  transcripts: readonly TranscriptText[],
  settings: TextSettings,
  lists: WordLists,
  exempt: readonly string[] = [],
): Prepared {
  const language = settings.language;
  const scan = createWordScanner(language);
  const stem = settings.stemming ? stemmerFor(language) : (form: string) => form;
  const exemptForms = new Set(exempt.map((word) => countedForm(word, settings)));
  const reasonFor = createListRule(settings, lists, language);

  const sortedForms = new Map<string, Sorted>();
  const types = new Map<string, WordType>();
  const sort = (form: string): Sorted => {
    const counted = stem(form);
    const isExempt = exemptForms.has(counted);
    const reason = isExempt ? null : reasonFor(form);
    if (reason !== null) return { reason, occurrences: 0 };
    const known = types.get(counted);
    if (known !== undefined) return known;
    const type: WordType = {
      form: counted,
      occurrences: 0,
      passages: 0,
      lastPassage: -1,
      participants: new Set(),
      surfaces: new Map(),
      exempt: isExempt,
      index: -1,
    };
    types.set(counted, type);
    return type;
  };

  const passages: PreparedPassage[] = [];
  const participantNumbers = new Map<string, number>();
  const said: { readonly type: WordType; readonly start: number; readonly end: number }[][] = [];
  for (const transcript of transcripts) {
    for (const passage of passagesOf(transcript, settings, scan)) {
      const participant = participantOf(transcript, passage.speaker);
      const participantNumber = participantNumbers.get(participant) ?? participantNumbers.size;
      participantNumbers.set(participant, participantNumber);
      const number = passages.length;
      const words: (typeof said)[number] = [];
      for (const segment of passage.segments) {
        scan(transcript.text, segment, (start, end, form) => {
          if (form === null) return;
          let entry = sortedForms.get(form);
          if (entry === undefined) {
            entry = sort(form);
            sortedForms.set(form, entry);
          }
          entry.occurrences++;
          if ('reason' in entry) return;
          if (entry.lastPassage !== number) {
            entry.lastPassage = number;
            entry.passages++;
            entry.participants.add(participantNumber);
          }
          entry.surfaces.set(form, (entry.surfaces.get(form) ?? 0) + 1);
          words.push({ type: entry, start, end });
        });
      }
      said.push(words);
      passages.push({ ...passage, transcript: transcript.id, participant, countedWords: 0 });
    }
  }

  const leftOut: LeftOutWord[] = [];
  for (const [form, entry] of sortedForms) {
    if ('reason' in entry) {
      leftOut.push({ form, occurrences: entry.occurrences, reason: entry.reason });
    }
  }
  const kept: WordType[] = [];
  for (const type of types.values()) {
    const reason = type.exempt
      ? null
      : limitFor(type, settings, passages.length, participantNumbers.size);
    if (reason === null) kept.push(type);
    else leftOut.push({ form: type.form, occurrences: type.occurrences, reason });
  }
  kept.sort((a, b) => compareCodeUnits(a.form, b.form));
  kept.forEach((type, index) => {
    type.index = index;
  });
  leftOut.sort(byOccurrences);

  const countedIn = said.map((words) => words.filter((word) => word.type.index >= 0));
  return {
    passages: passages.map((passage, d) => ({ ...passage, countedWords: countedIn[d]!.length })),
    vocabulary: kept.map((type) => type.form),
    counts: countsOf(
      countedIn.map((words) => words.map((word) => word.type.index)),
      kept.length,
    ),
    occurrences: occurrencesOf(countedIn),
    surfaces: kept.map((type) =>
      [...type.surfaces].map(([form, occurrences]) => ({ form, occurrences })).sort(byOccurrences),
    ),
    leftOut,
  };
}

/** How many forms and occurrences each reason left out; reasons that left out none are absent. */
export function tallyLeftOut(
  leftOut: readonly LeftOutWord[],
): Partial<Record<LeftOutReason, { forms: number; occurrences: number }>> {
  const tally: Partial<Record<LeftOutReason, { forms: number; occurrences: number }>> = {};
  for (const { reason, occurrences } of leftOut) {
    const entry = (tally[reason] ??= { forms: 0, occurrences: 0 });
    entry.forms++;
    entry.occurrences += occurrences;
  }
  return tally;
}

function byOccurrences(a: SurfaceForm, b: SurfaceForm): number {
  return b.occurrences - a.occurrences || compareCodeUnits(a.form, b.form);
}

function createListRule(
  settings: TextSettings,
  lists: WordLists,
  language: Language,
): (form: string) => LeftOutReason | null {
  const forms = (words: readonly string[]): string[] =>
    words.flatMap((word) => formOf(word, language) ?? []);
  const list = lists[language] ?? { stopWords: [], fillers: [] };
  const kept = new Set(forms(settings.keptWords));
  const stopWords = new Set([
    ...(settings.leaveOutStopWords ? forms(list.stopWords) : []),
    ...forms(settings.extraStopWords),
  ]);
  const fillers = new Set(settings.leaveOutFillers ? forms(list.fillers) : []);
  return (form) => {
    if (kept.has(form)) return null;
    if (fillers.has(form)) return 'filler';
    return stopWords.has(form) ? 'stop word' : null;
  };
}

function limitFor(
  type: WordType,
  settings: TextSettings,
  passages: number,
  participants: number,
): LeftOutReason | null {
  if (type.passages < settings.minimumPassages) return 'too few passages';
  if (
    participants >= settings.minimumParticipants &&
    type.participants.size < settings.minimumParticipants
  ) {
    return 'too few participants';
  }
  if (
    passages >= fewestPassagesForShare &&
    type.passages > settings.maximumPassageShare * passages
  ) {
    return 'too many passages';
  }
  return null;
}

function countsOf(passages: readonly (readonly number[])[], words: number): WordCounts {
  const offsets = new Int32Array(passages.length + 1);
  const indices: number[] = [];
  const counts: number[] = [];
  passages.forEach((passage, d) => {
    const ascending = Int32Array.from(passage).sort();
    ascending.forEach((word, i) => {
      if (i > 0 && ascending[i - 1] === word) {
        counts[counts.length - 1]!++;
      } else {
        indices.push(word);
        counts.push(1);
      }
    });
    offsets[d + 1] = indices.length;
  });
  return {
    passages: passages.length,
    words,
    offsets,
    indices: Int32Array.from(indices),
    counts: Float32Array.from(counts),
  };
}

function occurrencesOf(
  passages: readonly (readonly { type: WordType; start: number; end: number }[])[],
): Prepared['occurrences'] {
  const offsets = new Int32Array(passages.length + 1);
  passages.forEach((words, d) => {
    offsets[d + 1] = offsets[d]! + words.length;
  });
  const flat = new Int32Array(3 * offsets[passages.length]!);
  let at = 0;
  for (const words of passages) {
    for (const { type, start, end } of words) {
      flat[at++] = start;
      flat[at++] = end;
      flat[at++] = type.index;
    }
  }
  return { offsets, words: flat };
}
