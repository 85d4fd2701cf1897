import { adjustedRand, matchThemes } from '../model/index.ts';
import { leadingRow, type Fitted } from './fitted.ts';

/** Two themes of two fits that stand for each other. */
export interface FitPair {
  /** Row in the first fit. */
  readonly first: number;
  /** Row in the second fit. */
  readonly second: number;
  /** Of their word distributions over the words of both fits, 0 to 1. */
  readonly cosine: number;
  /** Passages that the one leads, the other leads, and both lead; of those in both fits. */
  readonly led: { readonly first: number; readonly second: number; readonly both: number };
}

export interface FitComparison {
  /** In the order of the first fit's rows. */
  readonly pairs: readonly FitPair[];
  /** Rows without a partner. */
  readonly onlyFirst: readonly number[];
  readonly onlySecond: readonly number[];
  /** Passages that both fits have and that both counted words in. */
  readonly compared: number;
  /** Of these, the share whose leading themes are partners, 0 to 1; 1 where there are none. */
  readonly agreement: number;
  /** The same corrected for chance, whatever the partners: Hubert & Arabie 1985. */
  readonly adjustedRand: number;
  /** Words that both fits counted, and that either did. */
  readonly words: { readonly both: number; readonly either: number };
}

/**
 * Two fits side by side. Themes are paired by the cosines of their word distributions so that these
 * are largest in sum (Kuhn 1955), whatever their ids; passages are matched by their places.
 */
export function compareFits(first: Fitted, second: Fitted): FitComparison {
  const { union, both } = unionOf(first.words.vocabulary, second.words.vocabulary);
  const { partner, cosines } = matchThemes(
    overUnion(first, union),
    overUnion(second, union),
    union.size,
  );
  const later = new Map<string, number>();
  second.words.passages.forEach((passage, index) => later.set(placeOf(passage), index));
  const leadsFirst: number[] = [];
  const leadsSecond: number[] = [];
  first.words.passages.forEach((passage, index) => {
    const other = later.get(placeOf(passage));
    if (other === undefined) return;
    const [one, two] = [leadingRow(first, index), leadingRow(second, other)];
    if (one < 0 || two < 0) return;
    leadsFirst.push(one);
    leadsSecond.push(two);
  });
  const pairs = [...partner].flatMap((row, own): FitPair[] => {
    if (row < 0) return [];
    const led = { first: 0, second: 0, both: 0 };
    leadsFirst.forEach((one, index) => {
      const two = leadsSecond[index];
      if (one === own) led.first++;
      if (two === row) led.second++;
      if (one === own && two === row) led.both++;
    });
    return [{ first: own, second: row, cosine: cosines[own], led }];
  });
  const paired = new Set(pairs.map(({ second: row }) => row));
  const agreed = pairs.reduce((sum, { led }) => sum + led.both, 0);
  const compared = leadsFirst.length;
  return {
    pairs,
    onlyFirst: [...partner.keys()].filter((row) => partner[row] < 0),
    onlySecond: second.fit.themes.map((_, row) => row).filter((row) => !paired.has(row)),
    compared,
    agreement: compared === 0 ? 1 : agreed / compared,
    adjustedRand: adjustedRand(leadsFirst, leadsSecond),
    words: { both, either: union.size },
  };
}

function placeOf({
  transcript,
  start,
  end,
}: {
  readonly transcript: string;
  readonly start: number;
  readonly end: number;
}): string {
  return `${transcript} ${start} ${end}`;
}

function unionOf(first: readonly string[], second: readonly string[]) {
  const union = new Map(first.map((form, place) => [form, place]));
  let both = 0;
  for (const form of second) {
    if (union.has(form)) both++;
    else union.set(form, union.size);
  }
  return { union, both };
}

/** Word distributions of a fit over the words of both. */
function overUnion({ fit, phi, words }: Fitted, union: ReadonlyMap<string, number>): Float32Array {
  const { vocabulary } = words;
  const spread = new Float32Array(fit.themes.length * union.size);
  vocabulary.forEach((form, word) => {
    const place = union.get(form) ?? 0;
    for (let row = 0; row < fit.themes.length; row++) {
      spread[row * union.size + place] = phi[row * vocabulary.length + word];
    }
  });
  return spread;
}
