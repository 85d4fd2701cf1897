import type { ModelFit } from '../model/index.ts';
import type { Fit } from '../study/index.ts';
import type { LeftOutWord, Prepared, PreparedPassage, SurfaceForm } from '../text/index.ts';
import type { Fitted } from './fitted.ts';
import { pack, unpack } from './packed.ts';

interface WordsHead {
  readonly what: 'words';
  readonly transcripts: readonly string[];
  readonly speakers: readonly (string | null)[];
  readonly participants: readonly string[];
  readonly vocabulary: readonly string[];
  readonly surfaces: readonly (readonly (readonly [string, number])[])[];
  readonly leftOut: readonly LeftOutWord[];
}

/** Columns of the array `passages`, a row a passage; -1 stands for "none". */
const columns = [
  'transcript',
  'number',
  'start',
  'end',
  'speaker',
  'participant',
  'questionStart',
  'questionEnd',
  'startTime',
  'words',
  'countedWords',
] as const;

/**
 * The counted words of a study as one blob: lists of names as text; `passages` (columns above),
 * `segmentOffsets` and `segments` (start, end), `rowOffsets`, `indices` and `counts` (compressed
 * sparse rows), `wordOffsets` and `words` (start, end, word index in text order).
 */
export function packWords(words: Prepared): Uint8Array {
  const transcripts = numbering<string>();
  const speakers = numbering<string | null>();
  const participants = numbering<string>();
  const passages = new Int32Array(words.passages.length * columns.length);
  const segmentOffsets = new Int32Array(words.passages.length + 1);
  const segments: number[] = [];
  words.passages.forEach((passage, index) => {
    passages.set(
      [
        transcripts.of(passage.transcript),
        passage.number,
        passage.start,
        passage.end,
        speakers.of(passage.speaker),
        participants.of(passage.participant),
        passage.questionBefore?.start ?? -1,
        passage.questionBefore?.end ?? -1,
        passage.startTime ?? -1,
        passage.words,
        passage.countedWords,
      ],
      index * columns.length,
    );
    for (const { start, end } of passage.segments) segments.push(start, end);
    segmentOffsets[index + 1] = segments.length / 2;
  });
  const head: WordsHead = {
    what: 'words',
    transcripts: transcripts.all,
    speakers: speakers.all,
    participants: participants.all,
    vocabulary: words.vocabulary,
    surfaces: words.surfaces.map((forms) =>
      forms.map(({ form, occurrences }) => [form, occurrences] as const),
    ),
    leftOut: words.leftOut,
  };
  return pack({
    head,
    arrays: {
      passages,
      segmentOffsets,
      segments: Int32Array.from(segments),
      rowOffsets: words.counts.offsets,
      indices: words.counts.indices,
      counts: words.counts.counts,
      wordOffsets: words.occurrences.offsets,
      words: words.occurrences.words,
    },
  });
}

export function unpackWords(bytes: Uint8Array): Prepared {
  const { head: unknownHead, arrays } = unpack(bytes);
  const head = unknownHead as WordsHead;
  const numbers = (name: string): Int32Array => arrays[name] as Int32Array;
  const table = numbers('passages');
  const segmentOffsets = numbers('segmentOffsets');
  const segments = numbers('segments');
  const passages: PreparedPassage[] = [];
  for (let index = 0; index * columns.length < table.length; index++) {
    const [transcript, number, start, end, speaker, participant, from, to, time, words, counted] =
      table.subarray(index * columns.length, (index + 1) * columns.length);
    const own = [];
    for (let i = segmentOffsets[index]; i < segmentOffsets[index + 1]; i++) {
      own.push({ start: segments[2 * i], end: segments[2 * i + 1] });
    }
    passages.push({
      transcript: head.transcripts[transcript],
      number,
      start,
      end,
      speaker: head.speakers[speaker],
      participant: head.participants[participant],
      segments: own,
      questionBefore: from < 0 ? null : { start: from, end: to },
      startTime: time < 0 ? null : time,
      words,
      countedWords: counted,
    });
  }
  return {
    passages,
    vocabulary: head.vocabulary,
    counts: {
      passages: passages.length,
      words: head.vocabulary.length,
      offsets: numbers('rowOffsets'),
      indices: numbers('indices'),
      counts: arrays['counts'] as Float32Array,
    },
    occurrences: { offsets: numbers('wordOffsets'), words: numbers('words') },
    surfaces: head.surfaces.map((forms): SurfaceForm[] =>
      forms.map(([form, occurrences]) => ({ form, occurrences })),
    ),
    leftOut: head.leftOut,
  };
}

/** What a fit found, as one blob: theta (D x K), phi (K x V), themeWords (K), unexplained (D). */
export function packResult(fit: ModelFit): Uint8Array {
  return pack({
    head: { what: 'result' },
    arrays: {
      theta: fit.theta,
      phi: fit.phi,
      themeWords: fit.themeWords,
      unexplained: fit.unexplained,
    },
  });
}

/** A stored fit, ready to be read. */
export function unpackFitted(fit: Fit, words: Prepared, result: Uint8Array): Fitted {
  const { arrays } = unpack(result);
  return {
    fit,
    words,
    theta: arrays['theta'] as Float32Array,
    phi: arrays['phi'] as Float32Array,
    themeWords: arrays['themeWords'] as Float64Array,
    unexplained: arrays['unexplained'] as Float32Array,
  };
}

function numbering<Name>(): { readonly all: Name[]; of(name: Name): number } {
  const all: Name[] = [];
  const places = new Map<Name, number>();
  return {
    all,
    of(name) {
      const known = places.get(name);
      if (known !== undefined) return known;
      places.set(name, all.length);
      all.push(name);
      return all.length - 1;
    },
  };
}
