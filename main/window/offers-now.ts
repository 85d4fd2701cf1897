import type { SuggestionLimits } from '../../engine/themes/index.ts';
import type { DecidedPassage, DecidedTranscript } from './decided-now.ts';
import type { Placed } from './passages-now.ts';
import { strengthsOf, type ThemesNow } from './themes-now.ts';

/** A theme that the fit offers for a passage. */
export interface Offer {
  readonly column: number;
  readonly strength: number;
}

/** The suggestions of one transcript that wait for a person. */
export interface OffersIn {
  /** One list for each passage, strongest first. */
  readonly passages: readonly (readonly Offer[])[];
  /** For each column, how many there are and whose words they are. */
  readonly columns: readonly { readonly count: number; readonly people: ReadonlySet<string> }[];
}

const none: readonly Offer[] = [];
const nobody = { count: 0, people: new Set<string>() } as const;

/**
 * The same rule as the engine's `suggestions`, for one transcript, so that one decision costs the
 * work of one transcript: from the threshold on, in passages with enough counted words, unless the
 * theme was decided on there, the passage was read and nothing applies, or it is held back. Where
 * something was rejected, `without` gives the strengths that the words alone would have: what was
 * taken from one theme is not put forward for the next.
 */
export function offersIn(
  placed: readonly Placed[],
  decided: DecidedTranscript,
  themes: ThemesNow,
  themeOf: (id: string) => string | undefined,
  limits: SuggestionLimits,
  isHeldBack: (passage: Placed) => boolean,
  without: (row: number) => Float64Array | null,
): OffersIn {
  const columns = new Map<number, { count: number; people: Set<string> }>();
  const passages = placed.map((passage, index) => {
    if (isHeldBack(passage)) return none;
    const here = decided.passages[index];
    const rejects = here.codings.some(({ standing }) => standing === 'rejected');
    const alone = rejects ? without(passage.row) : null;
    const offers = offersFor(passage, here, themes, themeOf, limits).filter(
      ({ column }) => alone === null || alone[column] >= limits.strength,
    );
    for (const { column } of offers) {
      const known = columns.get(column) ?? { count: 0, people: new Set<string>() };
      columns.set(column, known);
      known.count++;
      known.people.add(passage.participant);
    }
    return offers;
  });
  return { passages, columns: themes.columns.map((_, column) => columns.get(column) ?? nobody) };
}

function offersFor(
  passage: Placed,
  decided: DecidedPassage,
  themes: ThemesNow,
  themeOf: (id: string) => string | undefined,
  limits: SuggestionLimits,
): readonly Offer[] {
  if (passage.countedWords < limits.countedWords || decided.nones.length > 0) return none;
  const strengths = strengthsOf(themes, passage.row);
  if (strengths === null) return none;
  const taken = new Set(decided.codings.map(({ theme }) => themeOf(theme)));
  const offers: Offer[] = [];
  strengths.forEach((strength, column) => {
    if (strength < limits.strength || themes.offered[column] === 0) return;
    if (!taken.has(themes.columns[column])) offers.push({ column, strength });
  });
  return offers.length === 0 ? none : offers.sort((a, b) => b.strength - a.strength);
}
