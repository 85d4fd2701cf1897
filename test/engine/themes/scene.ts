import { emptyStudy, type Fit, type Study, type Theme } from '../../../engine/study/index.ts';
import type { Prepared, PreparedPassage } from '../../../engine/text/index.ts';
import type { Fitted, PreviousFit } from '../../../engine/themes/index.ts';
import { fit } from '../study/scene.ts';

/** A study with these themes, as a fit or a plan would have left them. */
export function studyOf(themes: readonly Theme[], fits: readonly Fit[] = []): Study {
  return {
    ...emptyStudy,
    themes: new Map(themes.map((one) => [one.id, one])),
    fits: new Map(fits.map((one) => [one.id, one])),
    fit: fits.at(-1)?.id ?? null,
  };
}

/**
 * Counted words out of rows: a passage a row, named by its transcript, said by a person of that name,
 * its words one after the other, each ten letters wide.
 */
export function wordsOf(rows: Readonly<Record<string, readonly string[]>>): Prepared {
  const vocabulary = [...new Set(Object.values(rows).flat())].sort();
  const place = (word: string): number => vocabulary.indexOf(word);
  const passages: PreparedPassage[] = [];
  const offsets = [0];
  const indices: number[] = [];
  const counts: number[] = [];
  const wordOffsets = [0];
  const words: number[] = [];
  for (const [transcript, said] of Object.entries(rows)) {
    const end = Math.max(10, said.length * 10);
    passages.push({
      transcript,
      participant: `person of ${transcript}`,
      speaker: 'P',
      number: 1,
      start: 0,
      end,
      segments: [{ start: 0, end }],
      questionBefore: null,
      startTime: null,
      words: said.length,
      countedWords: said.length,
    });
    const own = [...new Set(said)].sort();
    for (const word of own) {
      indices.push(place(word));
      counts.push(said.filter((other) => other === word).length);
    }
    said.forEach((word, i) => words.push(i * 10, i * 10 + word.length, place(word)));
    offsets.push(indices.length);
    wordOffsets.push(words.length / 3);
  }
  return {
    passages,
    vocabulary,
    counts: {
      passages: passages.length,
      words: vocabulary.length,
      offsets: Int32Array.from(offsets),
      indices: Int32Array.from(indices),
      counts: Float32Array.from(counts),
    },
    occurrences: { offsets: Int32Array.from(wordOffsets), words: Int32Array.from(words) },
    surfaces: vocabulary.map((form) => [{ form, occurrences: 1 }]),
    leftOut: [{ form: 'the', occurrences: 9, reason: 'stop word' }],
  };
}

export function previousOf(
  themes: readonly string[],
  words: Prepared,
  theta: readonly (readonly number[])[],
  phi: readonly (readonly number[])[],
): PreviousFit {
  return {
    themes,
    words,
    theta: Float32Array.from(theta.flat()),
    phi: Float32Array.from(phi.flat()),
  };
}

export function fittedOf(previous: PreviousFit, changes: Partial<Fit> = {}): Fitted {
  const { themes, words, theta, phi } = previous;
  const themeWords = new Float64Array(themes.length);
  words.passages.forEach(({ countedWords }, passage) => {
    themes.forEach((_, row) => {
      themeWords[row] += countedWords * theta[passage * themes.length + row];
    });
  });
  return {
    fit: fit('a-fit', { themes, ...changes }),
    words,
    theta,
    phi,
    themeWords,
    unexplained: new Float32Array(words.passages.length),
  };
}
