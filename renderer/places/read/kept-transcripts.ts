import type { PassagePlace, PassageView, TranscriptView } from '../../../main/api.ts';

/** The transcripts that were read last; a change makes another of it. Newest last. */
export class KeptTranscripts {
  readonly #views: readonly TranscriptView[];
  readonly #fresh: readonly string[];

  constructor(views: readonly TranscriptView[] = [], fresh: readonly string[] = []) {
    this.#views = views;
    this.#fresh = fresh;
  }

  /** Whether a transcript is kept as the study has it now. */
  isFresh(id: string): boolean {
    return this.#fresh.includes(id);
  }

  /** The same to look at; each has to be asked for again. */
  outdated(): KeptTranscripts {
    return new KeptTranscripts(this.#views);
  }

  get(id: string): TranscriptView | null {
    return this.#views.find((view) => view.id === id) ?? null;
  }

  /** With a transcript as it is now; beyond `most` the oldest go, never `shown`. */
  with(view: TranscriptView, most: number, shown: string | null): KeptTranscripts {
    const others = this.#views.filter(({ id }) => id !== view.id);
    while (others.length >= most) {
      const oldest = others.findIndex(({ id }) => id !== shown);
      if (oldest < 0) break;
      others.splice(oldest, 1);
    }
    const fresh = this.#fresh.filter((id) => others.some((other) => other.id === id));
    return new KeptTranscripts([...others, view], [...fresh, view.id]);
  }

  withPassage(transcript: string, fresh: PassageView): KeptTranscripts {
    return new KeptTranscripts(
      this.#views.map((view) =>
        view.id === transcript
          ? {
              ...view,
              passages: view.passages.map((passage) =>
                passage.start === fresh.start && passage.end === fresh.end ? fresh : passage,
              ),
            }
          : view,
      ),
      this.#fresh,
    );
  }
}

/** Where each place of a list stands in it. */
export class Positions {
  readonly #byPlace: ReadonlyMap<string, number>;

  constructor(places: readonly PassagePlace[] = []) {
    this.#byPlace = new Map(places.map((place, index) => [keyOf(place), index]));
  }

  of(place: PassagePlace): number {
    return this.#byPlace.get(keyOf(place)) ?? -1;
  }
}

export const keyOf = ({ transcript, start, end }: PassagePlace): string =>
  `${transcript} ${start} ${end}`;

export const isDecided = ({ codings, none }: PassageView): boolean =>
  codings.length > 0 || none !== null;

/** How many more of a list's places are decided on in a transcript than before. */
export function newlyDecided(
  positions: Positions,
  transcript: string,
  before: readonly PassageView[],
  after: readonly PassageView[],
): number {
  const was = new Map(before.map((passage) => [`${passage.start} ${passage.end}`, passage]));
  let more = 0;
  for (const passage of after) {
    const known = was.get(`${passage.start} ${passage.end}`);
    if (known === undefined || known === passage) continue;
    if (positions.of({ transcript, start: passage.start, end: passage.end }) < 0) continue;
    more += Number(isDecided(passage)) - Number(isDecided(known));
  }
  return more;
}
