import type { Span } from '../../engine/spans/index.ts';
import type { Identifier, Study } from '../../engine/study/index.ts';
import { keyOf, nameKeyOf, shiftDate, type IdentifierGroup } from '../../engine/text/index.ts';

export type PlaceOfGroup = IdentifierGroup['places'][number];

/** What was decided about one place where something could tell who somebody is. */
export type PlaceStanding = 'open' | 'stand-in' | 'left' | 'not identifying';

/** What the record of moved dates has for a replacement; its form is the number of days. */
export const movedDates = 'moved dates';

export function isFullDate(form: string): boolean {
  return shiftDate(form, 0) !== null;
}

/** How each place stands, by the decisions of a study. */
export class Standings {
  /** Words of stand-ins, by transcript. */
  readonly #putIn = new Map<string, Set<string>>();
  readonly #stays: readonly Identifier[];
  /** Transcripts whose full dates were moved. */
  readonly #moved = new Set<string>();

  constructor({ identifiers }: Pick<Study, 'identifiers'>) {
    const all = [...identifiers.values()];
    this.#stays = all.filter(({ replacement }) => replacement === null);
    for (const { replacement, putIn } of all) {
      if (replacement === null) continue;
      if (replacement === movedDates) {
        for (const transcript of putIn) this.#moved.add(transcript);
        continue;
      }
      for (const transcript of putIn) {
        const words = this.#putIn.get(transcript) ?? new Set();
        this.#putIn.set(transcript, words);
        for (const word of replacement.split(/\s+/u)) words.add(nameKeyOf(word));
        words.add(nameKeyOf(replacement));
      }
    }
  }

  of({ kind }: Pick<IdentifierGroup, 'kind'>, place: PlaceOfGroup): PlaceStanding {
    if (kind === 'date' && this.#moved.has(place.transcript) && isFullDate(place.form)) {
      return 'stand-in';
    }
    const words = this.#putIn.get(place.transcript);
    if (words !== undefined) {
      const key = nameKeyOf(place.form);
      if (words.has(key) || key.split(/\s+/u).every((word) => words.has(word))) return 'stand-in';
    }
    const key = keyOf(kind, place.form);
    for (const { decision, kind: of, forms, places } of this.#stays) {
      const here =
        places === null
          ? of === kind && forms.some((form) => keyOf(of, form) === key)
          : places.some(
              ({ transcript, span }) => transcript === place.transcript && overlaps(span, place),
            );
      if (here) return decision === 'left' ? 'left' : 'not identifying';
    }
    return 'open';
  }
}

function overlaps(a: Span, b: Span): boolean {
  return a.start < b.end && b.start < a.end;
}
