import { compareCodeUnits } from '../engine/numbers/index.ts';
import {
  apply,
  emptyStudy,
  fold,
  takingBack,
  type BlobRef,
  type Edit,
  type Entry,
  type FieldNoteId,
  type FitId,
  type HistoryStep,
  type Refusal,
  type Study,
  type TranscriptId,
} from '../engine/study/index.ts';
import type { Prepared, TranscriptText } from '../engine/text/index.ts';
import { speakerKey } from '../engine/text/index.ts';
import { unpackFitted, unpackWords, type Fitted } from '../engine/themes/index.ts';
import { hashOf, type MintId } from './ids.ts';
import type { StudyFileFailure } from './project/index.ts';
import type { Store } from './store.ts';
import { upcast } from './upcast.ts';

/** One decision to be made: the edit, told where its blobs will stand. */
export interface Draft {
  readonly blobs?: readonly Uint8Array[];
  readonly edit: Edit | ((blobs: readonly BlobRef[]) => Edit);
}

export interface MakeOptions {
  /** Drafts of one gesture share a group and are undone together. */
  readonly group?: string;
  /** For each draft, the sequence number that it takes back. */
  readonly undoes?: readonly number[];
}

/** Who is at the desk and what the time is: given from outside, so that tests can say. */
export interface DeskContext {
  readonly by: string;
  readonly now: () => string;
  readonly mintId: MintId;
}

export type DeskResult<Value> =
  { readonly ok: true; readonly value: Value } | Refusal | StudyFileFailure;

/**
 * An open study: its trail so far, the study that the trail describes, and its texts and fits, read
 * when asked for. Every decision goes through `make`: tried on the study first, then written, then
 * taken over.
 */
export class Desk {
  readonly store: Store;
  readonly context: DeskContext;
  #study: Study = emptyStudy;
  readonly #entries = new Map<number, Entry>();
  readonly #texts = new Map<number, string>();
  readonly #textHashes = new Map<number, string>();
  readonly #words = new Map<number, Prepared>();
  readonly #fitted = new Map<FitId, Fitted>();

  constructor(store: Store, context: DeskContext) {
    this.store = store;
    this.context = context;
  }

  /** Folds a stored trail into the study; throws where an entry of it cannot be applied. */
  load(edits: Iterable<{ readonly sequence: number; readonly json: unknown }>): void {
    for (const { sequence, json } of edits) {
      const brought = upcast(json);
      if (!brought.ok) throw new Error(`Desk.load: entry ${sequence}: ${brought.code}`);
      const entry: Entry = { ...brought.entry, sequence };
      const next = apply(this.#study, entry);
      if (!next.ok) {
        throw new Error(`Desk.load: entry ${sequence} (${entry.edit.kind}): ${next.code}`);
      }
      this.#study = next.value;
      this.#entries.set(sequence, entry);
    }
  }

  get study(): Study {
    return this.#study;
  }

  /** The trail in order. */
  get entries(): Iterable<Entry> {
    return this.#entries.values();
  }

  /**
   * Makes decisions in order, all or none. Their sequence numbers, once they are where the store
   * keeps them.
   */
  make(drafts: readonly Draft[], options: MakeOptions = {}): DeskResult<readonly number[]> {
    const at = this.context.now();
    const entries: Entry[] = [];
    let study = this.#study;
    let next = this.store.nextSequence;
    for (const [index, { blobs = [], edit }] of drafts.entries()) {
      const refs = blobs.map((bytes) => ({ sequence: next++, bytes: bytes.length }));
      const undoes = options.undoes?.[index];
      const entry: Entry = {
        sequence: next++,
        at,
        by: this.context.by,
        ...(options.group === undefined ? {} : { group: options.group }),
        ...(undoes === undefined ? {} : { undoes }),
        edit: typeof edit === 'function' ? edit(refs) : edit,
      };
      const changed = apply(study, entry);
      if (!changed.ok) return changed;
      study = changed.value;
      entries.push(entry);
    }
    const written = this.store.appendAll(
      drafts.map(({ blobs = [] }, index) => ({
        blobs,
        edit: () => withoutSequence(entries[index]),
      })),
    );
    if (!written.ok) return written;
    this.#study = study;
    for (const entry of entries) this.#entries.set(entry.sequence, entry);
    return written;
  }

  /** Takes back the last gesture; null where there is none. */
  undo(): DeskResult<readonly number[]> | null {
    return this.#takeBack(this.#study.undo);
  }

  /** Takes back the last undo; null where there is none. */
  redo(): DeskResult<readonly number[]> | null {
    return this.#takeBack(this.#study.redo);
  }

  /** The study as it was after this sequence number. */
  studyAt(sequence: number): Study {
    const then = fold([...this.entries].filter((entry) => entry.sequence <= sequence));
    if (!then.ok) throw new Error(`Desk.studyAt: an entry cannot be applied: ${then.code}`);
    return then.value;
  }

  /** The canonical text of a transcript. */
  text(transcript: TranscriptId): string {
    const { sequence } = this.#transcript(transcript).text;
    const known = this.#texts.get(sequence);
    if (known !== undefined) return known;
    const text = Buffer.from(this.store.readBlob(sequence)).toString('utf8');
    this.#texts.set(sequence, text);
    return text;
  }

  /** SHA-256, hex, of a transcript's text. */
  textHash(transcript: TranscriptId): string {
    const { sequence } = this.#transcript(transcript).text;
    const known = this.#textHashes.get(sequence) ?? hashOf(this.store.readBlob(sequence));
    this.#textHashes.set(sequence, known);
    return known;
  }

  /** The text of a field note. */
  noteText(note: FieldNoteId): string {
    const kept = this.#study.fieldNotes.get(note);
    if (kept === undefined)
      throw new Error(`Desk.noteText: ${note} is no field note of this study`);
    const { sequence } = kept.text;
    const known = this.#texts.get(sequence);
    if (known !== undefined) return known;
    const text = Buffer.from(this.store.readBlob(sequence)).toString('utf8');
    this.#texts.set(sequence, text);
    return text;
  }

  /** A transcript as the engine takes it in. */
  transcriptText(id: TranscriptId): TranscriptText {
    const { turns, speakers } = this.#transcript(id);
    return {
      id,
      text: this.text(id),
      turns,
      roles: Object.fromEntries(speakers.map(({ label, role }) => [speakerKey(label), role])),
      participants: Object.fromEntries(
        speakers.flatMap(({ label, participant }) =>
          participant === null ? [] : [[speakerKey(label), participant]],
        ),
      ),
    };
  }

  /** Every transcript as the engine takes it in, in the order of their names. */
  transcriptTexts(): TranscriptText[] {
    return transcriptsInOrder(this.#study).map(({ id }) => this.transcriptText(id));
  }

  /** A stored fit, unpacked; null for null. */
  fitted(id: FitId): Fitted;
  fitted(id: FitId | null): Fitted | null;
  fitted(id: FitId | null): Fitted | null {
    if (id === null) return null;
    const known = this.#fitted.get(id);
    if (known !== undefined) return known;
    const fit = this.#study.fits.get(id);
    if (fit === undefined) throw new Error(`Desk.fitted: ${id} is no fit of this study`);
    const { sequence } = fit.words;
    const words = this.#words.get(sequence) ?? unpackWords(this.store.readBlob(sequence));
    this.#words.set(sequence, words);
    const fitted = unpackFitted(fit, words, this.store.readBlob(fit.result.sequence));
    this.#fitted.set(id, fitted);
    return fitted;
  }

  #transcript(id: TranscriptId) {
    const transcript = this.#study.transcripts.get(id);
    if (transcript === undefined) throw new Error(`Desk: ${id} is no transcript of this study`);
    return transcript;
  }

  #takeBack(step: HistoryStep | null): DeskResult<readonly number[]> | null {
    if (step === null) return null;
    const steps = takingBack(step, (sequence) => {
      const entry = this.#entries.get(sequence);
      if (entry === undefined) throw new Error(`Desk: entry ${sequence} is not in the trail`);
      return entry;
    });
    return this.make(
      steps.map(({ edit }) => ({ edit })),
      { group: this.context.mintId('group'), undoes: steps.map(({ undoes }) => undoes) },
    );
  }
}

/** As it is stored: its record has the number. */
function withoutSequence({ sequence: _sequence, ...stored }: Entry): Omit<Entry, 'sequence'> {
  return stored;
}

/** Transcripts by name, in code-unit order: the order of every table and of every fit. */
export function transcriptsInOrder(study: Study) {
  return [...study.transcripts.values()].sort((a, b) => compareCodeUnits(a.name, b.name));
}
