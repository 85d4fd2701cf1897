import type { Edit, Reader, Refusal } from '../../engine/study/index.ts';
import type { Refused } from '../api.ts';
import { Desk, type Draft } from '../desk.ts';
import { randomIds } from '../ids.ts';
import type { StudyFile, StudyFileFailure } from '../project/index.ts';
import { sentenceFor } from '../sentences/sentences.ts';
import { Kept } from './kept.ts';
import { NamesNow } from './names-now.ts';
import { knownReader } from './readers.ts';
import { SearchIndex } from './search-index.ts';
import { StudyNow } from './study-now.ts';

/** Decisions with which a study begins; nobody wants them taken back. */
export const startGroup = 'start';

/** A full answer that is being made behind the quick one on screen. */
export interface Refinement {
  /** The quick answer. */
  readonly fit: string;
  /** How far the full one is, 0 to 1. */
  fraction: number;
  readonly stop: AbortController;
}

/** A study that is open in a window: its file, its desk, who sits there, and what views read. */
export class OpenStudy {
  readonly file: StudyFile;
  readonly desk: Desk;
  readonly now: StudyNow;
  readonly search: SearchIndex;
  readonly names: NamesNow;
  readonly accountName: string;
  /** Aborted when the study is closed, so that a fit of it ends. */
  readonly closing = new AbortController();
  fitting = false;
  /** Whether evidence about the fit on screen is being gathered. */
  gathering = false;
  refinement: Refinement | null = null;
  /** The revision that was last told to those who listen. */
  told = -1;
  readonly #newcomer = randomIds('reader');
  readonly #known = new Kept<Reader | null>();
  #chosenReader: string | null = null;

  constructor(
    file: StudyFile,
    { accountName, now }: { readonly accountName: string; readonly now: () => string },
  ) {
    this.file = file;
    this.accountName = accountName.trim() === '' ? 'Reader' : accountName.trim();
    const readerId = (): string => this.reader.id;
    this.desk = new Desk(file, {
      get by() {
        return readerId();
      },
      now,
      mintId: randomIds,
    });
    this.now = new StudyNow(this.desk);
    this.search = new SearchIndex(this.now);
    this.names = new NamesNow(this.desk);
  }

  get study() {
    return this.desk.study;
  }

  /** Who decides here; not in the study until the first decision. */
  get reader(): Reader {
    const { study } = this;
    const chosen = this.#chosenReader === null ? undefined : study.readers.get(this.#chosenReader);
    return (
      chosen ??
      this.#known.get([study.readers], () =>
        knownReader(study, this.desk.entries, this.accountName),
      ) ?? { id: this.#newcomer, name: this.accountName }
    );
  }

  /** Goes on under the name of another reader of the study. */
  chooseReader(id: string): void {
    this.#chosenReader = id;
  }

  /** Makes edits as one decision, all or none; null where they were made. */
  decide(drafts: readonly (Edit | Draft)[]): Refused | null {
    if (drafts.length === 0) return null;
    const { reader, study } = this;
    const known = study.readers.has(reader.id);
    const all: Draft[] = drafts.map((draft) => ('kind' in draft ? { edit: draft } : draft));
    if (!known) all.unshift({ edit: { kind: 'readerAdded', reader } });
    const made = this.desk.make(all, { group: this.desk.context.mintId('group') });
    return made.ok ? null : this.refusal(made);
  }

  /** A refusal in words, with names in place of ids. */
  refusal(refusal: Refusal | StudyFileFailure): Refused {
    if ('path' in refusal) return { code: refusal.code, refused: sentenceFor(refusal) };
    const subject = this.#inWords(refusal.subject);
    return { code: refusal.code, refused: sentenceFor({ ...refusal, subject }) };
  }

  /** Lets go of a full answer on its way. */
  stopRefining(): void {
    this.refinement?.stop.abort();
    this.refinement = null;
  }

  close(): void {
    this.leave();
    this.file.close();
  }

  /** Ends what goes on here; the file stays open for whoever has it next. */
  leave(): void {
    this.closing.abort();
    this.names.close();
  }

  #inWords(subject: string): string {
    const { study, now } = this;
    if (study.themes.has(subject)) return now.label(subject);
    return (
      study.transcripts.get(subject)?.name ??
      study.participants.get(subject)?.name ??
      study.readers.get(subject)?.name ??
      subject
    );
  }
}
