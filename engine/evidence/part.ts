import type { Counts, Priors } from '../model/index.ts';

/** Some passages of a study: the rows `kept`, ascending, renumbered from 0. */
export interface Part {
  readonly kept: Int32Array;
  readonly counts: Counts;
}

/** The passages of everybody but `out`; the vocabulary stays as it is. */
export function partWithout(counts: Counts, people: Int32Array, out: readonly number[]): Part {
  return partOf(counts, (d) => !out.includes(people[d]));
}

/** The passages of these people alone. */
export function partOfPeople(counts: Counts, people: Int32Array, whose: readonly number[]): Part {
  return partOf(counts, (d) => whose.includes(people[d]));
}

function partOf(counts: Counts, keep: (passage: number) => boolean): Part {
  const kept = Int32Array.from({ length: counts.passages }, (_, d) => d).filter(keep);
  const offsets = new Int32Array(kept.length + 1);
  kept.forEach((d, i) => {
    offsets[i + 1] = offsets[i] + counts.offsets[d + 1] - counts.offsets[d];
  });
  const indices = new Int32Array(offsets[kept.length]);
  const sizes = new Float32Array(offsets[kept.length]);
  kept.forEach((d, i) => {
    const [from, to] = [counts.offsets[d], counts.offsets[d + 1]];
    indices.set(counts.indices.subarray(from, to), offsets[i]);
    sizes.set(counts.counts.subarray(from, to), offsets[i]);
  });
  const { words } = counts;
  return { kept, counts: { passages: kept.length, words, offsets, indices, counts: sizes } };
}

/** Decisions on passages that are not there go; those on the others follow them. */
export function priorsOfPart(priors: Priors, { kept }: Part): Priors {
  const places = new Map(Array.from(kept, (d, i) => [d, i]));
  return {
    ...priors,
    passagePriors: priors.passagePriors.flatMap(({ passage, theme, value }) => {
      const place = places.get(passage);
      return place === undefined ? [] : [{ passage: place, theme, value }];
    }),
  };
}

/** The priors of passages on which nobody has decided anything. */
export function undecided(priors: Priors): Priors {
  return { ...priors, passagePriors: [] };
}
