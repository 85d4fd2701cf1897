import type { ReadingPreferences } from '../../../main/api.ts';

/** How a person likes to read: kept on this machine, in no study. */
export class Preferences {
  #kept = $state.raw<ReadingPreferences>({
    suggestions: true,
    goOn: true,
    singleKeys: true,
    keys: {},
  });
  readonly #keep: (preferences: ReadingPreferences) => void;

  constructor(keep: (preferences: ReadingPreferences) => void) {
    this.#keep = keep;
  }

  /** Takes over what the machine kept; null where it kept nothing. */
  take(kept: ReadingPreferences | null): void {
    if (kept !== null) this.#kept = kept;
  }

  /** Whether suggestions are in sight; recorded with every decision. */
  get suggestions(): boolean {
    return this.#kept.suggestions;
  }

  set suggestions(suggestions: boolean) {
    this.#change({ suggestions });
  }

  /** Whether a decision leads to the next passage. */
  get goOn(): boolean {
    return this.#kept.goOn;
  }

  set goOn(goOn: boolean) {
    this.#change({ goOn });
  }

  /** Whether a letter or digit alone does something (WCAG 2.1.4). */
  get singleKeys(): boolean {
    return this.#kept.singleKeys;
  }

  set singleKeys(singleKeys: boolean) {
    this.#change({ singleKeys });
  }

  /** Keys other than the usual ones, by what they do. */
  get keys(): Readonly<Record<string, string>> {
    return this.#kept.keys;
  }

  set keys(keys: Readonly<Record<string, string>>) {
    this.#change({ keys });
  }

  #change(change: Partial<ReadingPreferences>): void {
    this.#kept = { ...this.#kept, ...change };
    this.#keep(this.#kept);
  }
}
