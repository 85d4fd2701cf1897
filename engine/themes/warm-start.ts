import type { Start } from '../model/index.ts';
import type { Prepared } from '../text/index.ts';
import type { FitJob, PreviousFit, RememberedTheme } from './fit-job.ts';
import type { ModelledTheme } from './modelled-theme.ts';

/**
 * Measured: with this much of its old expected counts as a prior a theme stays where it was (94 to
 * 97 % of leading themes kept) and still takes in new decisions.
 */
const held = 1;

/** How much of a passage that a person gave to a new theme starts with it. */
const mostOf = 0.9;

/** How much of a new theme's start is the words of its passages; the rest is the average word. */
const ownWords = 0.9;

/**
 * Carries a stored fit over to a new set of themes, words and passages: rows follow ids, merged ones
 * are added up, columns follow word forms, passages follow their places in the text. A theme that
 * the fit did not know starts as the average of all words, with an even part of each passage; where
 * a person gave it passages (`marked`, for each theme), it starts from their words and with most of
 * them. A passage that the fit did not know starts even, too. A theme that was set aside meanwhile
 * starts from the words that are remembered of it and is held to them: from the average it came back
 * as another theme (README.md of the model).
 */
export function warmStart(
  themes: readonly ModelledTheme[],
  words: Prepared,
  previous: PreviousFit,
  leanings: readonly { readonly theme: number; readonly word: number }[],
  remembered: readonly RememberedTheme[] = [],
  marked: readonly (readonly number[])[] = [],
): Start {
  const sources = themes.map(({ id, absorbed }) => sourceRows(previous, [id, ...absorbed]));
  const known = themes.map(({ id }) => remembered.find(({ theme }) => theme === id));
  const sizes = expectedWords(previous);
  const average = averageWords(words);
  const size = words.vocabulary.length;
  const phi = new Float32Array(themes.length * size);
  sources.forEach((rows, theme) => {
    const into = phi.subarray(theme * size, (theme + 1) * size);
    const own = known[theme];
    const passages = marked[theme] ?? [];
    if (rows.length === 0) {
      if (own) into.set(rememberedPhi(own, words.vocabulary));
      else into.set(passages.length > 0 ? wordsIn(words, passages, average) : average);
    } else mixRows(previous, rows, sizes, words.vocabulary, into);
  });
  return {
    kind: 'warm',
    theta: proportions(
      sources,
      words,
      previous,
      sources.map((rows, theme) =>
        rows.length === 0 && known[theme] === undefined ? (marked[theme] ?? []) : [],
      ),
    ),
    phi,
    leanings,
    hold: Float32Array.from(sources, (rows, theme) =>
      rows.length === 0 && known[theme] === undefined ? 0 : held,
    ),
  };
}

/** The words that themes had in the fit whose rows are to be found again, merged ones added up. */
export function likeBefore(
  { themes, rowsFrom = null }: Pick<FitJob, 'themes' | 'rowsFrom'>,
  words: Prepared,
): NonNullable<Extract<Start, { kind: 'fresh' }>['like']> {
  if (rowsFrom === null) return [];
  const sizes = expectedWords(rowsFrom);
  return themes.flatMap(({ id, absorbed }, theme) => {
    const rows = sourceRows(rowsFrom, [id, ...absorbed]);
    if (rows.length === 0) return [];
    const phi = new Float32Array(words.vocabulary.length);
    mixRows(rowsFrom, rows, sizes, words.vocabulary, phi);
    return [{ theme, phi }];
  });
}

function sourceRows(previous: PreviousFit, ids: readonly string[]): number[] {
  return ids.map((id) => previous.themes.indexOf(id)).filter((row) => row >= 0);
}

/** A stored distribution over another vocabulary: new words get none, the rest sums to 1 again. */
export function phiInVocabulary(
  previous: PreviousFit,
  row: number,
  vocabulary: readonly string[],
): Float32Array {
  const size = previous.words.vocabulary.length;
  if (sameVocabulary(previous.words.vocabulary, vocabulary)) {
    return previous.phi.slice(row * size, (row + 1) * size);
  }
  const into = new Float32Array(vocabulary.length);
  mixRows(previous, [row], [1], vocabulary, into);
  return into;
}

/** What is remembered of a theme, over another vocabulary; sums to 1. */
export function rememberedPhi(
  { theme, vocabulary, phi }: RememberedTheme,
  now: readonly string[],
): Float32Array {
  const into = new Float32Array(now.length);
  mixRows({ themes: [theme], words: { vocabulary }, phi }, [0], [1], now, into);
  return into;
}

function mixRows(
  previous: Pick<PreviousFit, 'themes' | 'phi'> & {
    readonly words: Pick<Prepared, 'vocabulary'>;
  },
  rows: readonly number[],
  sizes: ArrayLike<number>,
  vocabulary: readonly string[],
  into: Float32Array,
): void {
  const old = previous.words.vocabulary;
  // Asked of every theme: a map for each took about half of the time spent here.
  const places = sameVocabulary(old, vocabulary)
    ? null
    : new Map(old.map((form, index) => [form, index]));
  const mixed = new Float64Array(vocabulary.length);
  let sum = 0;
  vocabulary.forEach((form, word) => {
    const place = places === null ? word : places.get(form);
    if (place === undefined) return;
    rows.forEach((row, i) => {
      const weight = rows.length === 1 ? 1 : sizes[rows[i]];
      mixed[word] += weight * previous.phi[row * old.length + place];
    });
    sum += mixed[word];
  });
  for (let word = 0; word < mixed.length; word++) {
    into[word] = sum > 0 ? mixed[word] / sum : 1 / mixed.length;
  }
}

function proportions(
  sources: readonly (readonly number[])[],
  words: Prepared,
  previous: PreviousFit,
  given: readonly (readonly number[])[],
): Float32Array {
  const givenTo = new Map<number, number[]>();
  given.forEach((passages, theme) => {
    for (const passage of passages) {
      givenTo.set(passage, [...(givenTo.get(passage) ?? []), theme]);
    }
  });
  const places = new Map(
    previous.words.passages.map(({ transcript, start, end }, index) => [
      `${transcript} ${start} ${end}`,
      index,
    ]),
  );
  const themes = sources.length;
  const before = previous.themes.length;
  const theta = new Float32Array(words.passages.length * themes);
  words.passages.forEach(({ transcript, start, end }, passage) => {
    const old = places.get(`${transcript} ${start} ${end}`);
    const row = new Float64Array(themes);
    let sum = 0;
    sources.forEach((rows, theme) => {
      // A new theme gets an even part to begin with; it has no past to go by.
      if (rows.length === 0 || old === undefined) row[theme] = 1 / themes;
      else for (const source of rows) row[theme] += previous.theta[old * before + source];
      sum += row[theme];
    });
    const own = givenTo.get(passage) ?? [];
    const left = own.length > 0 ? 1 - mostOf : 1;
    for (let theme = 0; theme < themes; theme++) {
      const share = sum > 0 ? row[theme] / sum : 1 / themes;
      theta[passage * themes + theme] =
        left * share + (own.includes(theme) ? mostOf / own.length : 0);
    }
  });
  return theta;
}

/** Expected counted words of each theme in the stored fit, from its proportions. */
function expectedWords({ themes, words, theta }: PreviousFit): Float64Array {
  const sizes = new Float64Array(themes.length);
  words.passages.forEach(({ countedWords }, passage) => {
    for (let row = 0; row < themes.length; row++) {
      sizes[row] += countedWords * theta[passage * themes.length + row];
    }
  });
  return sizes;
}

/** The words of some passages, with a little of the average so that no word is out of reach. */
function wordsIn(
  words: Prepared,
  passages: readonly number[],
  average: Float32Array,
): Float32Array {
  const { offsets, indices, counts } = words.counts;
  const totals = new Float64Array(words.vocabulary.length);
  let sum = 0;
  for (const d of passages) {
    for (let j = offsets[d]; j < offsets[d + 1]; j++) {
      totals[indices[j]] += counts[j];
      sum += counts[j];
    }
  }
  if (sum === 0) return average;
  return average.map((share, w) => (1 - ownWords) * share + (ownWords * totals[w]) / sum);
}

function averageWords(words: Prepared): Float32Array {
  const totals = new Float64Array(words.vocabulary.length);
  let sum = 0;
  for (let i = 0; i < words.counts.indices.length; i++) {
    totals[words.counts.indices[i]] += words.counts.counts[i];
    sum += words.counts.counts[i];
  }
  return Float32Array.from(totals, (count) => count / sum);
}

function sameVocabulary(a: readonly string[], b: readonly string[]): boolean {
  if (a === b) return true;
  return a.length === b.length && a.every((form, index) => form === b[index]);
}
