import type { EditKind } from '../../engine/study/index.ts';

/** What decisions of a kind are called together: the kind's own words, apart. */
export function kindInWords(kind: EditKind): string {
  const words = kind.replace(/[A-Z]/gu, (letter) => ` ${letter.toLowerCase()}`);
  return `${words.slice(0, 1).toUpperCase()}${words.slice(1)}`;
}
