import type { Replacement, Span } from '../../engine/spans/index.ts';

/** What stands where somebody's words or name stood. */
export const withdrawnMark = '[withdrawn]';

/** The fewest letters of a name that is looked for: initials stand everywhere. */
export const leastNameLetters = 2;

/** A name that has to go, and what stands in its place. */
export interface GoneName {
  readonly name: string;
  readonly mark: string;
}

/** How names are compared: whatever their case and the spaces between their parts. */
export function nameKeyOf(name: string): string {
  return name.normalize('NFC').trim().replace(/\s+/gu, ' ').toLowerCase();
}

/** Names as they can be looked for: each once, none too short. */
export function searchable(names: readonly string[]): string[] {
  const seen = new Map<string, string>();
  for (const name of names) {
    const letters = name.match(/[\p{L}\p{N}]/gu)?.length ?? 0;
    if (letters >= leastNameLetters) {
      seen.set(nameKeyOf(name), name.normalize('NFC').trim().replace(/\s+/gu, ' '));
    }
  }
  return [...seen.values()];
}

/** Finds names in texts and puts their marks there; null for no names. */
export interface NameFinder {
  readonly pattern: RegExp;
  readonly markOf: (found: string) => string;
}

/**
 * Whole words, in any case and with any spaces between their parts; an underscore joins words in file
 * names. The longest come first, so that a full name is found before its first part.
 */
export function nameFinder(names: readonly GoneName[]): NameFinder | null {
  if (names.length === 0) return null;
  const parts = [...names]
    .sort((a, b) => b.name.length - a.name.length)
    .map(({ name }) =>
      name
        .split(' ')
        .map((word) => word.replace(/[.*+?^${}()|[\]\\/]/gu, '\\$&'))
        .join('\\s+'),
    );
  const marks = new Map(names.map(({ name, mark }) => [nameKeyOf(name), mark]));
  return {
    pattern: new RegExp(`(?<![\\p{L}\\p{N}])(?:${parts.join('|')})(?![\\p{L}\\p{N}])`, 'giu'),
    markOf: (found) => marks.get(nameKeyOf(found)) ?? withdrawnMark,
  };
}

/** One stretch of a text and what is put there. */
export interface Marking extends Replacement {
  readonly mark: string;
}

/** Where a text says one of the names, with the mark to be put there. */
export function namesIn(text: string, { pattern, markOf }: NameFinder): Marking[] {
  return [...text.matchAll(pattern)].map(({ index, 0: found }) =>
    marking({ start: index, end: index + found.length }, markOf(found)),
  );
}

export function marking({ start, end }: Span, mark = withdrawnMark): Marking {
  return { start, end, inserted: mark.length, mark };
}

/** A text with each mark in its stretch; the stretches are in order and apart. */
export function marked(text: string, markings: readonly Marking[]): string {
  let result = '';
  let from = 0;
  for (const { start, end, mark } of markings) {
    result += text.slice(from, start) + mark;
    from = end;
  }
  return result + text.slice(from);
}

/** Several lists as one: what overlaps a stretch before it is joined to that one. */
export function joined(lists: readonly (readonly Marking[])[]): Marking[] {
  const all = lists.flat().sort((a, b) => a.start - b.start || b.end - a.end);
  const result: Marking[] = [];
  for (const each of all) {
    const last = result.at(-1);
    if (last !== undefined && each.start < last.end) {
      result[result.length - 1] = { ...last, end: Math.max(last.end, each.end) };
    } else result.push(each);
  }
  return result;
}
