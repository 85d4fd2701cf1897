import type { Api, Method } from '../../main/api.ts';
import type { StudyState } from './study.svelte.ts';

/**
 * What one method gives, kept until the study changes. `load` asks anew; an answer that comes after a
 * later question is let go, and the value of before stays on screen meanwhile.
 */
export class View<Name extends Method> {
  readonly #study: StudyState;
  readonly #method: Name;
  #value = $state.raw<Api[Name]['gives'] | null>(null);
  #asked = 0;
  #loading = $state(false);

  constructor(study: StudyState, method: Name) {
    this.#study = study;
    this.#method = method;
  }

  get value(): Api[Name]['gives'] | null {
    return this.#value;
  }

  get loading(): boolean {
    return this.#loading;
  }

  async load(takes: Api[Name]['takes']): Promise<Api[Name]['gives'] | undefined> {
    const question = ++this.#asked;
    this.#loading = true;
    const value = await this.#study.ask(this.#method, takes);
    if (question !== this.#asked) return undefined;
    this.#loading = false;
    if (value !== undefined) this.#value = value;
    return value;
  }

  clear(): void {
    this.#asked++;
    this.#value = null;
    this.#loading = false;
  }
}
