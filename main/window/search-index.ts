import { compareCodeUnits } from '../../engine/numbers/index.ts';
import type { Transcript } from '../../engine/study/index.ts';
import { stemmerFor, type Language } from '../../engine/text/index.ts';
import { Kept, KeptEach } from './kept.ts';
import { pause, scannerFor, type Placed } from './passages-now.ts';
import type { StudyNow } from './study-now.ts';

/** The words of one transcript's participants, in reading order. */
interface Piece {
  /** Numbers of forms in the dictionary. */
  readonly forms: Int32Array;
  readonly starts: Int32Array;
  readonly ends: Int32Array;
}

/** Every word that participants say, one after the other over all transcripts. */
export interface Said {
  readonly transcripts: readonly Transcript[];
  /** Where each transcript's words begin, and after the last one. */
  readonly from: Int32Array;
  readonly forms: Int32Array;
  readonly starts: Int32Array;
  readonly ends: Int32Array;
  /** Index of the passage in its transcript, or -1. */
  readonly passages: Int32Array;
  /** Words of each form: `places` from `offsets[form]` to `offsets[form + 1]`, ascending. */
  readonly offsets: Int32Array;
  readonly places: Int32Array;
  readonly dictionary: Dictionary;
}

const millisecondsAtOnce = 20;

/**
 * An index of what is said, made when it is first asked for and kept: a transcript is read again only
 * where its words changed. Made a little at a time, so that other calls are answered meanwhile.
 */
export class SearchIndex {
  readonly #now: StudyNow;
  readonly #pieces = new KeptEach<string, Piece>();
  readonly #passages = new KeptEach<string, Int32Array>();
  readonly #said = new Kept<Said>();
  #dictionary: Dictionary | null = null;

  constructor(now: StudyNow) {
    this.#now = now;
  }

  /** Everything that is said as the study stands once it is settled. */
  async said(): Promise<Said> {
    const now = this.#now;
    for (;;) {
      await now.settled();
      await this.#scan();
      await now.settled();
      if (this.#isFresh()) return this.#joined();
    }
  }

  #isFresh(): boolean {
    return this.#now.transcripts.every((one) => this.#pieces.has(one.id, this.#on(one)));
  }

  #on({ text, turns, speakers }: Transcript): readonly unknown[] {
    return [text.sequence, turns, speakers, this.#forms()];
  }

  #forms(): Dictionary {
    const { language } = this.#now.settings.text;
    if (this.#dictionary?.language !== language) this.#dictionary = new Dictionary(language);
    return this.#dictionary;
  }

  async #scan(): Promise<void> {
    const now = this.#now;
    this.#pieces.keepOnly(now.study.transcripts);
    this.#passages.keepOnly(now.study.transcripts);
    let since = performance.now();
    for (const transcript of now.transcripts) {
      if (!now.study.transcripts.has(transcript.id)) continue;
      const on = this.#on(transcript);
      if (this.#pieces.has(transcript.id, on)) continue;
      this.#pieces.get(transcript.id, on, () => this.#piece(transcript));
      if (performance.now() - since < millisecondsAtOnce) continue;
      await pause();
      await now.settled();
      since = performance.now();
    }
  }

  #piece({ id, turns, speakers }: Transcript): Piece {
    const dictionary = this.#forms();
    const scan = scannerFor(dictionary.language);
    const text = this.#now.desk.text(id);
    const participants = new Set(
      speakers.filter(({ role }) => role === 'participant').map(({ label }) => label),
    );
    const forms: number[] = [];
    const starts: number[] = [];
    const ends: number[] = [];
    for (const turn of turns) {
      if (!participants.has(turn.speaker)) continue;
      scan(text, turn, (start, end, form) => {
        forms.push(dictionary.numberOf(form ?? text.slice(start, end)));
        starts.push(start);
        ends.push(end);
      });
    }
    return {
      forms: Int32Array.from(forms),
      starts: Int32Array.from(starts),
      ends: Int32Array.from(ends),
    };
  }

  #joined(): Said {
    const now = this.#now;
    const { transcripts } = now;
    const pieces = transcripts.map((one) =>
      this.#pieces.get(one.id, this.#on(one), () => this.#piece(one)),
    );
    const placed = transcripts.map(({ id }) => now.passagesIn(id));
    return this.#said.get([transcripts, ...pieces, ...placed], () => {
      const passages = transcripts.map(({ id }, index) =>
        this.#passages.get(id, [pieces[index], placed[index]], () =>
          passagesOf(pieces[index], placed[index]),
        ),
      );
      return join(transcripts, pieces, passages, this.#forms());
    });
  }
}

/** The passage of each word of a transcript; both are in the order of the text. */
function passagesOf({ starts, ends }: Piece, placed: readonly Placed[]): Int32Array {
  const segments = placed
    .flatMap(({ segments: own }, passage) => own.map(({ start, end }) => ({ start, end, passage })))
    .sort((a, b) => a.start - b.start);
  const passages = new Int32Array(starts.length).fill(-1);
  let at = 0;
  for (let word = 0; word < starts.length; word++) {
    while (at < segments.length && segments[at].end < ends[word]) at++;
    if (at < segments.length && segments[at].start <= starts[word]) {
      passages[word] = segments[at].passage;
    }
  }
  return passages;
}

function join(
  transcripts: readonly Transcript[],
  pieces: readonly Piece[],
  passages: readonly Int32Array[],
  dictionary: Dictionary,
): Said {
  const from = new Int32Array(pieces.length + 1);
  pieces.forEach(({ forms }, index) => (from[index + 1] = from[index] + forms.length));
  const all = from[pieces.length];
  const said = {
    forms: new Int32Array(all),
    starts: new Int32Array(all),
    ends: new Int32Array(all),
    passages: new Int32Array(all),
  };
  pieces.forEach((piece, index) => {
    said.forms.set(piece.forms, from[index]);
    said.starts.set(piece.starts, from[index]);
    said.ends.set(piece.ends, from[index]);
    said.passages.set(passages[index], from[index]);
  });
  const offsets = new Int32Array(dictionary.size + 1);
  for (let word = 0; word < all; word++) offsets[said.forms[word] + 1]++;
  for (let form = 0; form < dictionary.size; form++) offsets[form + 1] += offsets[form];
  const next = offsets.slice();
  const places = new Int32Array(all);
  for (let word = 0; word < all; word++) places[next[said.forms[word]]++] = word;
  return { transcripts, from, ...said, offsets, places, dictionary };
}

/** The forms of a language's words, numbered as they come. */
export class Dictionary {
  readonly language: Language;
  readonly #numbers = new Map<string, number>();
  readonly #forms: string[] = [];
  readonly #byStem = new Map<string, number[]>();
  #stemmed = 0;
  #ranks = new Int32Array(0);

  constructor(language: Language) {
    this.language = language;
  }

  get size(): number {
    return this.#forms.length;
  }

  numberOf(form: string): number {
    let number = this.#numbers.get(form);
    if (number === undefined) {
      number = this.#forms.length;
      this.#numbers.set(form, number);
      this.#forms.push(form);
    }
    return number;
  }

  /** The number of a form, as a list of one or none. */
  known(form: string): readonly number[] {
    const number = this.#numbers.get(form);
    return number === undefined ? [] : [number];
  }

  /** Forms with the same stem. */
  relatives(form: string): readonly number[] {
    const stem = stemmerFor(this.language);
    for (; this.#stemmed < this.#forms.length; this.#stemmed++) {
      const key = stem(this.#forms[this.#stemmed]);
      const own = this.#byStem.get(key);
      if (own === undefined) this.#byStem.set(key, [this.#stemmed]);
      else own.push(this.#stemmed);
    }
    return this.#byStem.get(stem(form)) ?? [];
  }

  beginningWith(beginning: string): readonly number[] {
    return this.#forms.flatMap((form, number) => (form.startsWith(beginning) ? [number] : []));
  }

  /** The place of each form in the order of the alphabet, from 1. */
  ranks(): Int32Array {
    if (this.#ranks.length !== this.#forms.length) {
      const order = this.#forms.map((form, number) => ({ form, number }));
      order.sort((a, b) => compareCodeUnits(a.form, b.form));
      this.#ranks = new Int32Array(this.#forms.length);
      order.forEach(({ number }, rank) => (this.#ranks[number] = rank + 1));
    }
    return this.#ranks;
  }
}
