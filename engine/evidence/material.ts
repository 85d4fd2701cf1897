import type { Counts, FitSettings, Priors, Start } from '../model/index.ts';

/** A model that is fitted from scratch: priors with the decisions in them, and where it begins. */
export interface Asked {
  readonly priors: Priors;
  readonly leanings: Start['leanings'];
  readonly seed: number;
  readonly settings: FitSettings;
}

/** All that evidence about a fit is a function of. Plain data and typed arrays: it travels. */
export interface Material extends Asked {
  readonly counts: Counts;
  /** Whose words each passage holds: D numbers from 0 on, in order of first appearance. */
  readonly people: Int32Array;
  /** Themes of the fit in question, K x V by rows, f32 as stored. */
  readonly phi: Float32Array;
}

/**
 * Material of a fit. Pins are let go: a pinned theme would be found again in every re-fit because it
 * may not move, and its steadiness would say nothing about what people said. All other decisions stay.
 * Evidence keeps no history of its many fits, so the bound is not evaluated on the way.
 */
export function materialOf(
  fit: Asked & Pick<Material, 'counts' | 'phi'>,
  participants: readonly string[],
): Material {
  const numbers = new Map<string, number>();
  const people = Int32Array.from(participants, (name) => {
    const number = numbers.get(name) ?? numbers.size;
    numbers.set(name, number);
    return number;
  });
  return {
    ...fit,
    priors: { ...fit.priors, frozen: [] },
    settings: { ...fit.settings, boundEvery: 0 },
    people,
  };
}

/** Numbers of the people who say at least one counted word, ascending. */
export function peopleHeard({ counts, people }: Pick<Material, 'counts' | 'people'>): number[] {
  const heard = new Set<number>();
  for (let d = 0; d < counts.passages; d++) {
    if (counts.offsets[d + 1] > counts.offsets[d]) heard.add(people[d]);
  }
  return [...heard].sort((a, b) => a - b);
}
