import { compareCodeUnits } from '../numbers/index.ts';

/** How much of a theme comes from one person, or after one question. */
export interface Concentration {
  /** The group with most of the theme's expected words; null where the theme has no words. */
  readonly most: string | null;
  /** Its share of all the theme's expected words, 0 to 1. */
  readonly share: number;
  /** Groups with at least one passage that the theme leads. */
  readonly led: number;
}

/**
 * Over which groups (people, questions) each theme's expected words are spread. `groups` names the
 * group of each passage, null for none: its words count, but it is no group. `theta` is D x K by
 * rows, `words` the counted words and `leads` the leading theme of each passage.
 */
export function concentration(
  groups: readonly (string | null)[],
  words: ArrayLike<number>,
  theta: Float32Array,
  leads: ArrayLike<number>,
  themes: number,
): Concentration[] {
  const names = [...new Set(groups)]
    .filter((name): name is string => name !== null)
    .sort(compareCodeUnits);
  const places = new Map(names.map((name, i) => [name, i]));
  return Array.from({ length: themes }, (_, k) => {
    const expected = new Float64Array(names.length);
    const led = new Set<number>();
    let all = 0;
    groups.forEach((name, d) => {
      const own = words[d] * theta[d * themes + k];
      all += own;
      const place = name === null ? undefined : places.get(name);
      if (place === undefined) return;
      expected[place] += own;
      if (leads[d] === k) led.add(place);
    });
    let most = 0;
    for (let i = 1; i < expected.length; i++) if (expected[i] > expected[most]) most = i;
    const found = all > 0 && expected.length > 0 && expected[most] > 0;
    return {
      most: found ? names[most] : null,
      share: found ? expected[most] / all : 0,
      led: led.size,
    };
  });
}
