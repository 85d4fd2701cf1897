import type { Span } from '../../../main/api.ts';
import { wordsIn } from './selecting.ts';

/** Words that are selected by keys: from the one where selecting began to the one it reached. */
export class WordSelection {
  readonly #words: readonly Span[];
  readonly #from: number;
  readonly #to: number;

  private constructor(words: readonly Span[], from: number, to: number) {
    this.#words = words;
    this.#from = from;
    this.#to = to;
  }

  /** At the first word of some stretches; null where they hold no word. */
  static in(text: string, stretches: readonly Span[]): WordSelection | null {
    const words = wordsIn(text, stretches);
    return words.length === 0 ? null : new WordSelection(words, 0, 0);
  }

  get span(): Span {
    const first = this.#words[Math.min(this.#from, this.#to)]!;
    const last = this.#words[Math.max(this.#from, this.#to)]!;
    return { start: first.start, end: last.end };
  }

  /** Some words on or back; `extend` keeps where selecting began. */
  move(by: number, extend: boolean): WordSelection {
    const to = Math.max(0, Math.min(this.#words.length - 1, this.#to + by));
    return new WordSelection(this.#words, extend ? this.#from : to, to);
  }
}
