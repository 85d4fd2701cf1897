import type { CodedExcerpt } from './coded-excerpts.ts';
import { clock } from './format.ts';

/** One theme's part of an excerpt book. */
export interface BookPart {
  readonly theme: string;
  readonly excerpts: readonly CodedExcerpt[];
  readonly participants: number;
}

/** Excerpts under their themes, in the order given. */
export function bookParts(excerpts: readonly CodedExcerpt[]): BookPart[] {
  const parts = new Map<string, CodedExcerpt[]>();
  for (const excerpt of excerpts) {
    const part = parts.get(excerpt.themeId);
    if (part === undefined) parts.set(excerpt.themeId, [excerpt]);
    else part.push(excerpt);
  }
  return [...parts.values()].map((part) => ({
    theme: part[0].theme,
    excerpts: part,
    participants: new Set(part.map(({ participant }) => participant)).size,
  }));
}

/** The line under an excerpt: who, where, how it stands. */
export function attribution(excerpt: CodedExcerpt): string {
  const time = clock(excerpt.startTime).slice(0, 8);
  const place = excerpt.passage === null ? '' : `passage ${excerpt.passage}`;
  const strength = excerpt.strength === null ? '' : `strength ${excerpt.strength.toFixed(2)}`;
  return [
    excerpt.participant,
    excerpt.transcript === excerpt.participant ? '' : excerpt.transcript,
    place,
    time,
    excerpt.standing,
    excerpt.standing === 'suggested' ? strength : '',
  ]
    .filter((part) => part !== '')
    .join(' · ');
}

export const bookCautions = [
  'Read every excerpt for what could identify a person before you share it: stand-ins are ' +
    'pseudonyms, not anonymity. The consent given, the ethics board’s decision and local law come first.',
  'Suggestions come from a model that counts words; they are for reading, never findings.',
] as const;

/** By which `verify --head` finds the state of the study that a report was made from. */
export function headSentence(head: string): string {
  return `Made from the study whose chain ends in ${head}.`;
}

/** What a report was asked to hold; every output states it. */
export interface ReportFilter {
  readonly standings: readonly string[];
  /** Names of the themes asked for; null for all. */
  readonly themes: readonly string[] | null;
}

/** What the report holds, in words. */
export function filterSentence({ standings, themes }: ReportFilter, count: number): string {
  const chosen = themes === null ? '' : `; themes: ${themes.join(', ') || 'none'}`;
  return `${count} coded ${count === 1 ? 'excerpt' : 'excerpts'}; standing: ${standings.join(', ')}${chosen}.`;
}
