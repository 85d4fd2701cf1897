import type { ReadingListKind } from '../../../main/api.ts';

/** The lists in the order of their numbers in storage: append only. */
export const kinds = [
  'in order',
  'strongest first',
  'nearest the edge',
  'unexplained',
  'random draw',
  'one theme',
  'earlier wording',
] as const satisfies readonly ReadingListKind[];

/** Where a reader stopped. Only numbers are kept, so that nothing of a study lies outside its file. */
export interface Stopped {
  readonly kind: ReadingListKind;
  readonly unreadOnly: boolean;
  readonly count: number;
  readonly seed: number;
  /** Places in the codebook and in the order of gathering; -1 for none. */
  readonly theme: number;
  readonly only: number;
  readonly transcript: number;
  readonly start: number;
}

const keyOf = (study: string): string => `understory.stopped.${study}`;

export function stoppedAt(storage: Pick<Storage, 'getItem'>, study: string): Stopped | null {
  const numbers = (storage.getItem(keyOf(study)) ?? '').split(' ').map(Number);
  if (numbers.length !== 8 || !numbers.every(Number.isSafeInteger)) return null;
  const [kind, unreadOnly, count, seed, theme, only, transcript, start] = numbers as [
    number,
    number,
    number,
    number,
    number,
    number,
    number,
    number,
  ];
  const name = kinds[kind];
  if (name === undefined) return null;
  return { kind: name, unreadOnly: unreadOnly === 1, count, seed, theme, only, transcript, start };
}

export function keepStopped(
  storage: Pick<Storage, 'setItem'>,
  study: string,
  { kind, unreadOnly, count, seed, theme, only, transcript, start }: Stopped,
): void {
  const numbers = [
    kinds.indexOf(kind),
    Number(unreadOnly),
    count,
    seed,
    theme,
    only,
    transcript,
    start,
  ];
  storage.setItem(keyOf(study), numbers.join(' '));
}
