import type { Study, Transcript } from '../../engine/study/index.ts';
import {
  createWordScanner,
  participantOf,
  passagesOf,
  type Passage,
  type TextSettings,
  type TranscriptText,
} from '../../engine/text/index.ts';
import type { Fitted } from '../../engine/themes/index.ts';
import type { Desk } from '../desk.ts';
import { KeptEach } from './kept.ts';
import type { SinceFit } from './since-fit.ts';

/** A passage as the settings of now divide it, and where the fit on screen has it. */
export interface Placed extends Passage {
  readonly transcript: string;
  readonly participant: string;
  /** Its index in the fit on screen, or -1. */
  readonly row: number;
  /** Words that the fit counted in it; 0 where it has none for it. */
  readonly countedWords: number;
}

/** What the passages of a study are a function of. */
export interface PassageBasis {
  readonly study: Study;
  readonly fitted: Fitted | null;
  readonly since: SinceFit | null;
  readonly text: TextSettings;
}

interface Derived {
  readonly passages: readonly Passage[];
  readonly participants: readonly string[];
}

// Long enough for a transcript or two, short enough that nobody notices.
const millisecondsAtOnce = 12;

/**
 * The passages of every transcript. Those of the fit serve as long as nothing they depend on has
 * changed; others are derived, a few at a time so that the window stays alive, and kept.
 */
export class PassagesNow {
  readonly #desk: Desk;
  readonly #derived = new KeptEach<string, Derived>();
  readonly #placed = new KeptEach<string, readonly Placed[]>();
  #settling: Promise<void> | null = null;

  constructor(desk: Desk) {
    this.#desk = desk;
  }

  /** Whether `in` would answer at once for every transcript. */
  isSettled(basis: PassageBasis): boolean {
    for (const transcript of basis.study.transcripts.values()) {
      if (isFromFit(basis, transcript)) continue;
      if (!this.#derived.has(transcript.id, derivedOn(basis, transcript))) return false;
    }
    return true;
  }

  /** Derives what is missing. `basisNow` is asked again after each pause: decisions go on meanwhile. */
  settle(basisNow: () => PassageBasis): Promise<void> {
    this.#settling ??= this.#settle(basisNow).finally(() => {
      this.#settling = null;
    });
    return this.#settling;
  }

  in(basis: PassageBasis, id: string): readonly Placed[] {
    const transcript = basis.study.transcripts.get(id);
    if (transcript === undefined) throw new Error(`PassagesNow.in: ${id} is no transcript`);
    const { fitted } = basis;
    if (isFromFit(basis, transcript)) {
      return this.#placed.get(id, [fitted], () => fromFit(fitted as Fitted, id));
    }
    const derived = this.#derive(basis, transcript);
    return this.#placed.get(id, [derived, fitted], () => placedIn(fitted, id, derived));
  }

  async #settle(basisNow: () => PassageBasis): Promise<void> {
    let since = performance.now();
    for (let basis = basisNow(); !this.isSettled(basis); basis = basisNow()) {
      this.#derived.keepOnly(basis.study.transcripts);
      this.#placed.keepOnly(basis.study.transcripts);
      const next = [...basis.study.transcripts.values()].find(
        (transcript) =>
          !isFromFit(basis, transcript) &&
          !this.#derived.has(transcript.id, derivedOn(basis, transcript)),
      );
      if (next !== undefined) this.#derive(basis, next);
      if (performance.now() - since < millisecondsAtOnce) continue;
      await pause();
      since = performance.now();
    }
  }

  #derive(basis: PassageBasis, transcript: Transcript): Derived {
    return this.#derived.get(transcript.id, derivedOn(basis, transcript), () => {
      const text: TranscriptText = this.#desk.transcriptText(transcript.id);
      const passages = passagesOf(text, basis.text, scannerFor(basis.text.language));
      return {
        passages,
        participants: passages.map(({ speaker }) => participantOf(text, speaker)),
      };
    });
  }
}

/** Lets whatever else waits be answered. */
export function pause(): Promise<void> {
  return new Promise((resolve) => setImmediate(resolve));
}

const scanners = new Map<string, ReturnType<typeof createWordScanner>>();

/** A scanner remembers the words that it has seen, so one serves every transcript of a language. */
export function scannerFor(
  language: TextSettings['language'],
): ReturnType<typeof createWordScanner> {
  const known = scanners.get(language) ?? createWordScanner(language);
  scanners.set(language, known);
  return known;
}

function isFromFit({ fitted, since }: PassageBasis, { id }: Transcript): boolean {
  return fitted !== null && since !== null && !since.passageSettings && !since.transcripts.has(id);
}

function derivedOn({ text }: PassageBasis, transcript: Transcript): readonly unknown[] {
  return [
    transcript.text.sequence,
    transcript.turns,
    transcript.speakers,
    text.language,
    text.passageMinimumWords,
    text.passageMaximumWords,
    text.shortTurnWords,
  ];
}

const rowsByTranscript = new WeakMap<Fitted, Map<string, number[]>>();

/** The rows of each transcript in a fit, in reading order. */
export function rowsIn(fitted: Fitted, transcript: string): readonly number[] {
  let rows = rowsByTranscript.get(fitted);
  if (rows === undefined) {
    rows = new Map();
    for (const [row, passage] of fitted.words.passages.entries()) {
      const own = rows.get(passage.transcript);
      if (own === undefined) rows.set(passage.transcript, [row]);
      else own.push(row);
    }
    rowsByTranscript.set(fitted, rows);
  }
  return rows.get(transcript) ?? [];
}

function fromFit(fitted: Fitted, id: string): Placed[] {
  return rowsIn(fitted, id).map((row) => ({ ...fitted.words.passages[row], row }));
}

function placedIn(fitted: Fitted | null, id: string, derived: Derived): Placed[] {
  const rows = new Map<string, number>();
  if (fitted !== null) {
    for (const row of rowsIn(fitted, id)) {
      const { start, end } = fitted.words.passages[row];
      rows.set(`${start} ${end}`, row);
    }
  }
  return derived.passages.map((passage, index) => {
    const row = rows.get(`${passage.start} ${passage.end}`) ?? -1;
    return {
      ...passage,
      transcript: id,
      participant: derived.participants[index],
      row,
      countedWords: row < 0 ? 0 : (fitted as Fitted).words.passages[row].countedWords,
    };
  });
}
