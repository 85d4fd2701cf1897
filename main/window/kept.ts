/** A value that is kept until one of the things it depends on is another one. */
export class Kept<Value> {
  #on: readonly unknown[] | null = null;
  #value: Value | undefined;

  get(on: readonly unknown[], make: () => Value): Value {
    if (!this.has(on)) {
      this.#value = make();
      this.#on = on;
    }
    return this.#value as Value;
  }

  has(on: readonly unknown[]): boolean {
    const known = this.#on;
    return known?.length === on.length && on.every((each, index) => Object.is(each, known[index]));
  }

  forget(): void {
    this.#on = null;
    this.#value = undefined;
  }
}

/** The same for many values, each under its key. */
export class KeptEach<Key, Value> {
  readonly #values = new Map<Key, Kept<Value>>();

  get(key: Key, on: readonly unknown[], make: () => Value): Value {
    let kept = this.#values.get(key);
    if (kept === undefined) {
      kept = new Kept();
      this.#values.set(key, kept);
    }
    return kept.get(on, make);
  }

  has(key: Key, on: readonly unknown[]): boolean {
    return this.#values.get(key)?.has(on) ?? false;
  }

  /** Lets go of what belongs to keys that are no more. */
  keepOnly(keys: { has(key: Key): boolean }): void {
    for (const key of this.#values.keys()) if (!keys.has(key)) this.#values.delete(key);
  }
}
