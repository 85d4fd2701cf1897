const key = 'understory.reading';

/** How a person likes to read: kept on this machine, beside no study. */
export class Preferences {
  #suggestions = $state(true);
  #goOn = $state(true);
  #singleKeys = $state(true);
  readonly #storage: Pick<Storage, 'getItem' | 'setItem'>;

  constructor(storage: Pick<Storage, 'getItem' | 'setItem'>) {
    this.#storage = storage;
    const kept = (storage.getItem(key) ?? '').split(' ');
    this.#suggestions = kept[0] !== '0';
    this.#goOn = kept[1] !== '0';
    this.#singleKeys = kept[2] !== '0';
  }

  /** Whether suggestions are in sight; recorded with every decision. */
  get suggestions(): boolean {
    return this.#suggestions;
  }

  set suggestions(value: boolean) {
    this.#suggestions = value;
    this.#keep();
  }

  /** Whether a decision leads to the next passage. */
  get goOn(): boolean {
    return this.#goOn;
  }

  set goOn(value: boolean) {
    this.#goOn = value;
    this.#keep();
  }

  /** Whether a letter or digit alone does something (WCAG 2.1.4). */
  get singleKeys(): boolean {
    return this.#singleKeys;
  }

  set singleKeys(value: boolean) {
    this.#singleKeys = value;
    this.#keep();
  }

  #keep(): void {
    const values = [this.#suggestions, this.#goOn, this.#singleKeys];
    this.#storage.setItem(key, values.map(Number).join(' '));
  }
}
