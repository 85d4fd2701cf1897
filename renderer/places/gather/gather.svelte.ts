import type {
  About,
  Api,
  AttributesOutcome,
  CodebookOffer,
  DoubleChoice,
  DoubleOffer,
  GatherOutcome,
  TableOffer,
} from '../../../main/api.ts';
import { counted } from '../../parts/counted.ts';
import type { StudyState } from '../../state/study.svelte.ts';
import type { LooseFile } from './loose-files.ts';

export type Section = 'transcripts' | 'names' | 'participants' | 'notes' | 'words';

/** A codebook in hand: what is in it, and its file, which is asked for again when it is taken in. */
export interface CodebookInHand {
  readonly name: string;
  readonly bytes: Uint8Array;
  readonly offer: CodebookOffer;
}

export interface Skipped {
  readonly file: string;
  readonly sentence: string;
}

/** What a table of attributes did, as far as a person has to look at it. */
export interface Unmatched {
  readonly file: string;
  readonly names: readonly string[];
}

/** One call brings at most so much, so that progress can be shown. */
const batchFiles = 8;
const batchBytes = 24 * 1024 * 1024;

/**
 * What Gather has in hand: which part is shown, which transcript is chosen, and what came of the
 * files that were added. Kept while a person goes to other places and comes back.
 */
export class GatherState {
  readonly #study: StudyState;
  #skipped = $state.raw<readonly Skipped[]>([]);
  #unmatched = $state.raw<readonly Unmatched[]>([]);
  #adding = $state.raw<{ readonly done: number; readonly of: number } | null>(null);
  #about = $state.raw<About | null>(null);
  #tables = $state.raw<readonly TableOffer[]>([]);
  #doubles = $state.raw<readonly DoubleOffer[]>([]);
  #codebook = $state.raw<CodebookInHand | null>(null);
  #begun = false;
  note = $state<string | null>(null);
  section = $state<Section>('transcripts');
  chosen = $state<string | null>(null);
  /** The name, number or date that is looked at, by its key. */
  identifier = $state<string | null>(null);
  onlyThoseThatNeedALook = $state(false);

  constructor(study: StudyState) {
    this.#study = study;
  }

  /** Asks once how files can be chosen and saved here. */
  begin(): void {
    if (this.#begun) return;
    this.#begun = true;
    void this.#study.ask('about', null).then((about) => (this.#about = about ?? null));
  }

  get skipped(): readonly Skipped[] {
    return this.#skipped;
  }

  get unmatched(): readonly Unmatched[] {
    return this.#unmatched;
  }

  /** Tables that wait until a person says which columns hold what. */
  get tables(): readonly TableOffer[] {
    return this.#adding === null ? this.#tables : [];
  }

  /** Files of known names that wait until a person says what to do with them. */
  get doubles(): readonly DoubleOffer[] {
    return this.#adding === null ? this.#doubles : [];
  }

  get codebook(): CodebookInHand | null {
    return this.#codebook;
  }

  /** How far the adding of files has come; null where none are added. */
  get adding(): { readonly done: number; readonly of: number } | null {
    return this.#adding;
  }

  /** Whether the system's own dialog chooses files. */
  get dialogs(): boolean {
    return this.#about?.dialogs ?? false;
  }

  dismissSkipped(): void {
    this.#skipped = [];
  }

  dismissUnmatched(): void {
    this.#unmatched = [];
  }

  /** Transcripts and, after them, tables of attributes. */
  async add(files: readonly LooseFile[]): Promise<void> {
    if (this.#adding !== null || files.length === 0) return;
    const isTable = ({ name }: LooseFile): boolean => /\.(csv|tsv|xlsx)$/iu.test(name);
    this.#study.hush();
    this.#adding = { done: 0, of: files.length };
    try {
      const done = [
        ...(await this.#addInBatches(files.filter((file) => !isTable(file)))),
        ...(await this.#addInBatches(files.filter(isTable))),
      ];
      this.#sayWhatCame(done);
    } finally {
      this.#adding = null;
    }
  }

  /** With the system's own dialog. */
  async choose(): Promise<void> {
    if (this.#adding !== null) return;
    this.#study.hush();
    const outcome = await this.#study.ask('chooseTranscripts', null, {
      onProgress: ({ fraction }) => {
        this.#adding = { done: Math.floor(fraction * 100), of: 100 };
      },
    });
    this.#adding = null;
    if (outcome === undefined || outcome === null) return;
    this.#keep(outcome, 'the table');
    this.#sayWhatCame([outcome]);
  }

  /** Makes a transcript of a table; true where it was made. */
  async addTable(plan: Api['addTable']['takes']): Promise<boolean> {
    this.#study.hush();
    const outcome = await this.#study.ask('addTable', plan);
    if (outcome === undefined) return false;
    this.#tables = this.#tables.filter(({ table }) => table !== plan.table);
    this.#keep(outcome, '');
    this.#sayWhatCame([outcome]);
    return true;
  }

  leaveTable(offer: TableOffer): void {
    this.#tables = this.#tables.filter(({ table }) => table !== offer.table);
    void this.#study.ask('leaveTable', { table: offer.table });
    this.#keepSkipped([
      { file: offer.file, sentence: 'Left out, since it is a table. Add it again to use it.' },
    ]);
  }

  async settleDoubles(choices: ReadonlyMap<string, DoubleChoice>): Promise<boolean> {
    this.#study.hush();
    const outcome = await this.#study.ask('settleDoubles', {
      choices: this.#doubles.map(({ double }) => ({
        double,
        choice: choices.get(double) ?? 'skip',
      })),
    });
    if (outcome === undefined) return false;
    this.#doubles = [];
    this.#keep(outcome, '');
    this.#sayWhatCame([outcome]);
    return true;
  }

  /** Keeps files beside the transcripts. */
  async addFieldNotes(files: readonly LooseFile[], transcript: string | null): Promise<void> {
    if (this.#adding !== null || files.length === 0) return;
    this.#study.hush();
    const read: { name: string; bytes: Uint8Array }[] = [];
    for (const file of files) {
      const bytes = await this.#read(file);
      if (bytes !== null) read.push({ name: file.name, bytes });
    }
    if (read.length === 0) return;
    const outcome = await this.#study.ask('addFieldNotes', { files: read, transcript });
    if (outcome === undefined) return;
    this.#keepSkipped(outcome.skipped);
    if (outcome.kept.length === 0) return;
    this.section = 'notes';
    this.#study.say('done', `${counted(outcome.kept.length, 'field note')} kept.`);
  }

  /** Looks into a codebook; what is in it is shown before anything is taken in. */
  async openCodebook(file: LooseFile): Promise<void> {
    this.#study.hush();
    const bytes = await this.#read(file);
    if (bytes === null) return;
    const offer = await this.#study.ask('readCodebook', { name: file.name, bytes });
    if (offer !== undefined) this.#codebook = { name: file.name, bytes, offer };
  }

  closeCodebook(): void {
    this.#codebook = null;
  }

  async takeInCodebook(names: readonly string[], byHand: boolean): Promise<boolean> {
    const book = this.#codebook;
    if (book === null) return false;
    this.#study.hush();
    const { name, bytes } = book;
    const outcome = await this.#study.ask('addCodebook', { name, bytes, names, byHand });
    if (outcome === undefined) return false;
    this.#codebook = null;
    this.#study.say('done', `${counted(outcome.added, 'theme')} taken in. They stand in Shape.`);
    return true;
  }

  /** One table of attributes; anything else is refused. */
  async addAttributes(file: LooseFile): Promise<void> {
    if (this.#adding !== null) return;
    this.#study.hush();
    const bytes = await this.#read(file);
    if (bytes === null) return;
    const attributes = await this.#study.ask('addAttributes', { name: file.name, bytes });
    if (attributes === undefined) return;
    const outcome = { gathered: [], skipped: [], attributes, tables: [], doubles: [] };
    this.#keep(outcome, file.name);
    this.#sayWhatCame([outcome]);
  }

  async #addInBatches(files: readonly LooseFile[]): Promise<GatherOutcome[]> {
    const outcomes: GatherOutcome[] = [];
    let batch: { name: string; bytes: Uint8Array }[] = [];
    let bytes = 0;
    const send = async (): Promise<boolean> => {
      if (batch.length === 0) return true;
      const outcome = await this.#study.ask('addTranscripts', { files: batch });
      if (outcome !== undefined) {
        this.#keep(outcome, batch.map(({ name }) => name).join(', '));
        outcomes.push(outcome);
      }
      this.#further(batch.length);
      batch = [];
      bytes = 0;
      return outcome !== undefined;
    };
    for (const [index, file] of files.entries()) {
      if (batch.length >= batchFiles || (batch.length > 0 && bytes + file.size > batchBytes)) {
        // What refuses a whole call (a full drive, a study for reading only) refuses the next too.
        if (!(await send())) {
          this.#leaveOut(files.slice(index));
          return outcomes;
        }
      }
      const content = await this.#read(file);
      if (content === null) continue;
      batch.push({ name: file.name, bytes: content });
      bytes += content.length;
    }
    await send();
    return outcomes;
  }

  #sayWhatCame(outcomes: readonly GatherOutcome[]): void {
    const added = outcomes.reduce((sum, { gathered }) => sum + gathered.length, 0);
    const described = outcomes.reduce(
      (sum, { attributes }) => sum + (attributes?.described ?? 0),
      0,
    );
    const parts = [
      ...(added > 0 ? [`${counted(added, 'transcript')} added`] : []),
      ...(described > 0 ? [`attributes of ${counted(described, 'participant')} taken in`] : []),
    ];
    if (parts.length > 0 && this.#study.message?.kind !== 'refused') {
      const sentence = parts.join(', ');
      this.#study.say('done', `${sentence.charAt(0).toUpperCase()}${sentence.slice(1)}.`);
    }
    if (added === 0 && described > 0) this.section = 'participants';
  }

  async #read(file: LooseFile): Promise<Uint8Array | null> {
    try {
      return await file.read();
    } catch {
      this.#leaveOut(
        [file],
        'It could not be read. Check that it is still there and may be opened.',
      );
      this.#further(1);
      return null;
    }
  }

  #leaveOut(
    files: readonly LooseFile[],
    sentence = 'Not tried, since the files before it were refused. Add it again afterwards.',
  ): void {
    this.#keepSkipped(files.map(({ name }) => ({ file: name, sentence })));
  }

  #keep({ skipped, attributes, tables, doubles }: GatherOutcome, table: string): void {
    this.#tables = [...this.#tables, ...tables];
    this.#doubles = [...this.#doubles, ...doubles];
    this.#keepSkipped(skipped);
    if (attributes !== null) this.#keepUnmatched(attributes, table);
  }

  #keepSkipped(skipped: readonly Skipped[]): void {
    const again = skipped.map(({ file }) => file);
    this.#skipped = [...this.#skipped.filter(({ file }) => !again.includes(file)), ...skipped];
  }

  #keepUnmatched({ unmatched }: AttributesOutcome, file: string): void {
    const others = this.#unmatched.filter((one) => one.file !== file);
    this.#unmatched = unmatched.length === 0 ? others : [...others, { file, names: unmatched }];
  }

  #further(files: number): void {
    if (this.#adding !== null) {
      this.#adding = { ...this.#adding, done: this.#adding.done + files };
    }
  }
}

const kept = new WeakMap<StudyState, { readonly study: string; readonly state: GatherState }>();

/** Gather's state for the open study: the same one until another study is opened. */
export function gatherStateOf(study: StudyState): GatherState {
  const id = study.overview?.study.id ?? '';
  const known = kept.get(study);
  if (known !== undefined && known.study === id) return known.state;
  const state = new GatherState(study);
  kept.set(study, { study: id, state });
  return state;
}
