import type { IdentifierKind, Span, Turn } from '../../spans/index.ts';
import { compareCodeUnits } from '../../numbers/index.ts';
import { isRoleWord } from '../role-words.ts';
import { capitalRuns, type Run } from './capitals.ts';
import { cuesOf } from './cues.ts';
import { nameKeyOf, type NameLists } from './lists.ts';
import { shapedIdentifiers, type Shaped } from './patterns.ts';
import { evidenceFor, RunReader, type Evidence } from './run-reader.ts';

/** One transcript as it is searched; language as ISO 639-3. */
export interface SearchedText {
  readonly id: string;
  readonly text: string;
  readonly turns: readonly Turn[];
  readonly language: string;
}

/** What a text alone says, to be kept until it changes. */
export interface Scanned {
  readonly id: string;
  readonly shaped: readonly Shaped[];
  readonly runs: readonly Run[];
  /** How often each word is written small. */
  readonly small: ReadonlyMap<string, number>;
  /** Words of the labels of speakers that name somebody, as keys. */
  readonly labels: readonly string[];
}

/** One place where something stands that could tell who somebody is. */
export interface Occurrence extends Span {
  readonly transcript: string;
  readonly kind: IdentifierKind;
}

export function scanText({ id, text, turns, language }: SearchedText): Scanned {
  const labels = new Set(turns.flatMap(({ speaker }) => speaker ?? []));
  const cues = cuesOf(language);
  const words = [...labels]
    .filter(namesSomebody)
    .flatMap((label) => label.split(/[\s.]+/u))
    .filter((word) => word.length > 1)
    .map(nameKeyOf)
    .filter((key) => !cues.titles.has(key));
  return {
    id,
    shaped: shapedIdentifiers(text),
    ...capitalRuns(text, turns, language),
    labels: [...new Set(words)].sort(compareCodeUnits),
  };
}

/** "Ruth" and "Ruth Mackay" do; "Interviewer 2", "P07" and "INT" do not. */
function namesSomebody(label: string): boolean {
  return (
    /\p{L}{2}/u.test(label) &&
    !/\d/u.test(label) &&
    !isRoleWord(label) &&
    !/^\p{Lu}{1,3}$/u.test(label)
  );
}

/**
 * Every name, contact, date and number in the texts that could tell who somebody is, in order of
 * transcripts and places. What a word is in one place is decided by what stands around it there, by
 * what stands around it elsewhere in the study, and by the lists, in this order.
 */
export function findIdentifiers(scanned: readonly Scanned[], lists: NameLists): Occurrence[] {
  const small = new Map<string, number>();
  for (const each of scanned) {
    for (const [key, count] of each.small) small.set(key, (small.get(key) ?? 0) + count);
  }
  const readers = new Map<string, RunReader>();
  const readerFor = (language: string): RunReader => {
    const known = readers.get(language) ?? new RunReader(language, lists, small);
    readers.set(language, known);
    return known;
  };
  const evidence = new Map<string, Evidence>();
  for (const { labels, runs, shaped } of scanned) {
    for (const key of labels) evidenceFor(evidence, key).person++;
    const behind = behindPostcodes(shaped);
    for (const run of runs) {
      const reader = readerFor(run.language);
      reader.behindPostcodes(behind);
      reader.weigh(run, evidence);
    }
  }
  return scanned.flatMap(({ id, shaped, runs }) => {
    const found: Occurrence[] = shaped.map(({ kind, start, end }) => ({
      transcript: id,
      kind,
      start,
      end,
    }));
    let next = 0;
    const behind = behindPostcodes(shaped);
    for (const run of runs) {
      const reader = readerFor(run.language);
      reader.behindPostcodes(behind);
      for (const { kind, start, end } of reader.read(run, evidence)) {
        while (next < shaped.length && shaped[next]!.end <= start) next++;
        const taken = shaped[next];
        if (taken !== undefined && taken.start < end) continue;
        found.push({ transcript: id, kind, start, end });
      }
    }
    return found.sort((a, b) => a.start - b.start || a.end - b.end);
  });
}

/** Where a word begins that stands behind a postcode with one space or a comma between. */
function behindPostcodes(shaped: readonly Shaped[]): ReadonlySet<number> {
  return new Set(
    shaped.flatMap(({ kind, end }) => (kind === 'postcode' ? [end + 1, end + 2] : [])),
  );
}
