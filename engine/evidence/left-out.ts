import { createGenerator } from '../numbers/index.ts';

/** A re-fit leaves out one person in so many, at least one. README.md says what was compared. */
export const oneIn = 5;

/** Fewer people than this cannot be left out in turn. */
export const fewestPeople = 4;

/** How many people each re-fit leaves out. */
export function leftOutEach(people: number): number {
  return Math.max(1, Math.round(people / oneIn));
}

/**
 * Who is left out of each of `samples` re-fits, ascending. Everybody is left out as often as anybody
 * else, to within one time: the draws go round the people in a new random order each time. Takes at
 * least two people.
 */
export function leftOut(people: readonly number[], samples: number, seed: number): number[][] {
  if (people.length < 2) {
    throw new Error(`leftOut: people.length is ${people.length}; must be 2 or more`);
  }
  const chance = createGenerator(seed, 1);
  const each = leftOutEach(people.length);
  const queue: number[] = [];
  return Array.from({ length: samples }, () => {
    const out: number[] = [];
    while (out.length < each) {
      // Where one round ends within a sample, the next must not bring the same person again.
      let next = queue.findIndex((person) => !out.includes(person));
      if (next < 0) {
        queue.push(...chance.shuffle([...people]));
        next = queue.findIndex((person) => !out.includes(person));
      }
      out.push(...queue.splice(next, 1));
    }
    return out.sort((a, b) => a - b);
  });
}

/** The people in `groups` groups that are as equal as can be, so that each is held out once. */
export function dealt(people: readonly number[], groups: number, seed: number): number[][] {
  const order = createGenerator(seed, 2).shuffle([...people]);
  return Array.from({ length: groups }, (_, group) =>
    order.filter((_person, i) => i % groups === group).sort((a, b) => a - b),
  );
}
