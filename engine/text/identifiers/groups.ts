import { compareCodeUnits } from '../../numbers/index.ts';
import type { IdentifierKind, Span } from '../../spans/index.ts';
import { nameKeyOf } from './lists.ts';
import type { Occurrence } from './names.ts';

/** One thing that could tell who somebody is, in all the ways in which it is written. */
export interface IdentifierGroup {
  /** Stays the same from one search to the next. */
  readonly key: string;
  readonly kind: IdentifierKind;
  /** The commonest way of writing it. */
  readonly name: string;
  readonly forms: readonly { readonly form: string; readonly occurrences: number }[];
  /** In the order of transcripts and places. */
  readonly places: readonly (Span & { readonly transcript: string; readonly form: string })[];
}

/**
 * Occurrences that are the same thing: the same name in other letters ("Ruth", "RUTH"), a short form
 * of it ("Ruthie") where both occur, the same number with other spaces. Largest groups first.
 */
export function groupIdentifiers(
  occurrences: readonly Occurrence[],
  textOf: (transcript: string) => string,
): IdentifierGroup[] {
  const groups = new Map<
    string,
    { kind: IdentifierKind; places: IdentifierGroup['places'][number][] }
  >();
  for (const { transcript, kind, start, end } of occurrences) {
    const form = textOf(transcript).slice(start, end);
    const key = `${kind} ${keyOf(kind, form)}`;
    const group = groups.get(key) ?? { kind, places: [] };
    groups.set(key, group);
    group.places.push({ transcript, start, end, form });
  }
  for (const key of [...groups.keys()].sort(compareCodeUnits)) {
    const target = baseOf(key, groups);
    if (target === null) continue;
    const moved = groups.get(key)!;
    groups.get(target)!.places.push(...moved.places);
    groups.delete(key);
  }
  const order = new Map<string, number>();
  for (const { transcript } of occurrences) {
    if (!order.has(transcript)) order.set(transcript, order.size);
  }
  return [...groups]
    .map(([key, { kind, places }]): IdentifierGroup => {
      places.sort(
        (a, b) => order.get(a.transcript)! - order.get(b.transcript)! || a.start - b.start,
      );
      const counts = new Map<string, number>();
      for (const { form } of places) counts.set(form, (counts.get(form) ?? 0) + 1);
      const forms = [...counts]
        .map(([form, count]) => ({ form, occurrences: count }))
        .sort((a, b) => b.occurrences - a.occurrences || compareCodeUnits(a.form, b.form));
      const written = forms.find(({ form }) => form !== form.toUpperCase()) ?? forms[0]!;
      return { key, kind, name: written.form, forms, places };
    })
    .sort((a, b) => b.places.length - a.places.length || compareCodeUnits(a.key, b.key));
}

/** What two ways of writing the same thing have in common. */
export function keyOf(kind: IdentifierKind, form: string): string {
  if (kind === 'telephone' || kind === 'number' || kind === 'postcode') {
    return form.toLowerCase().replace(/[\s().,/-]/gu, '');
  }
  const key = nameKeyOf(form.replace(/\s+/gu, ' '));
  // Marks are often left off: "José" and "Jose" are one.
  return kind === 'person' ? key.normalize('NFD').replace(/\p{M}/gu, '') : key;
}

/** The group of the full name that a short form belongs to ("ruthie" -> "ruth"), or null. */
function baseOf(key: string, groups: ReadonlyMap<string, unknown>): string | null {
  if (!key.startsWith('person ')) return null;
  const match = /^(.{2,}?)(?:ie|ey|y|ito|ita|chen|i)$/u.exec(key.slice('person '.length));
  const candidates: string[] = [];
  if (match !== null) {
    const stem = match[1]!;
    candidates.push(stem, `${stem}e`);
    // "Tommy", "Bobby": the consonant is doubled.
    if (/(.)\1$/u.test(stem)) candidates.push(stem.slice(0, -1));
  }
  // "the Mackays" are the Mackays that there are.
  if (/.{3}s$/u.test(key)) candidates.push(key.slice('person '.length, -1));
  const base = candidates.find((each) => each.length >= 3 && groups.has(`person ${each}`));
  return base === undefined ? null : `person ${base}`;
}
