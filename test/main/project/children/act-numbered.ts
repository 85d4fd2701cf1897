import type { Act } from '../../../../main/project/index.ts';

/** What the appending process writes when the next sequence number is `number`: known to both sides. */
export function actNumbered(number: number): Act[] {
  const blobs = [...Array(number % 4).keys()].map((index) => {
    return new Uint8Array((number * 7919 + index * 104729) % 30_000).fill(number % 251);
  });
  const acts: Act[] = [{ blobs, edit: (sequences) => ({ type: 'act', number, sequences }) }];
  if (number % 5 === 0) acts.push({ edit: (_, own) => ({ type: 'second', own }) });
  return acts;
}
