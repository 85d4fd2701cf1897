import type { Coding, Definition, Entry, Theme } from '../../engine/study/index.ts';
import type { DefinitionView, WordingView } from '../api.ts';
import { KeptEach } from './kept.ts';
import type { OpenStudy } from './open-study.ts';

/** One wording of a codebook entry, as the trail has it. */
interface Wording {
  readonly version: number;
  readonly at: string;
  readonly by: string;
  readonly definition: Definition;
}

const kept = new WeakMap<OpenStudy, KeptEach<string, readonly Wording[]>>();

/** Every wording of a theme's codebook entry that stands, oldest first. */
function wordingsOf(open: OpenStudy, { id, version, definition }: Theme): readonly Wording[] {
  const each = kept.get(open) ?? new KeptEach();
  kept.set(open, each);
  return each.get(id, [definition, version], () => {
    const found = new Map<number, Wording>();
    for (const entry of open.now.trail.values()) {
      const { edit } = entry;
      if (edit.kind !== 'themeDefined' || edit.theme !== id) continue;
      const { from, to } = edit;
      if (found.size === 0) found.set(from.version, { ...from, at: '', by: '' });
      // What was taken back stands no more; going back to a wording is not writing it.
      for (const later of found.keys()) if (later > to.version) found.delete(later);
      const known = found.get(to.version);
      if (known === undefined || !isSame(known.definition, to.definition)) {
        const { at, by } = firstMade(open, entry);
        found.set(to.version, { ...to, at, by });
      }
    }
    if (found.size === 0) found.set(version, { version, definition, at: '', by: '' });
    return [...found.values()].sort((a, b) => a.version - b.version);
  });
}

/** What was taken back and done again was written when it was first made. */
function firstMade({ now: { trail } }: OpenStudy, entry: Entry): Entry {
  let first = entry;
  for (let at: number | undefined = entry.undoes; at !== undefined; at = first.undoes) {
    const earlier = trail.get(at);
    if (earlier === undefined) break;
    first = earlier;
  }
  return first;
}

export function wordingViews(open: OpenStudy, theme: Theme): WordingView[] {
  const counts = new Map<number, number>();
  for (const coding of codingsOf(open, theme)) {
    counts.set(coding.codebookVersion, (counts.get(coding.codebookVersion) ?? 0) + 1);
  }
  return wordingsOf(open, theme).map(({ version, at, by, definition }) => ({
    version,
    at,
    reader: open.study.readers.get(by)?.name ?? by,
    definition: definitionView(definition),
    codings: counts.get(version) ?? 0,
  }));
}

/**
 * Codings that were made under a wording which told otherwise when to use the theme: another code or
 * other examples leave them as they are. Codings of a theme that was merged into this one were made
 * under another entry altogether and are not among them.
 */
export function earlierCodings(open: OpenStudy, theme: Theme): Coding[] {
  const wordings = new Map(wordingsOf(open, theme).map((one) => [one.version, one.definition]));
  return codingsOf(open, theme).filter(({ codebookVersion }) => {
    const then = wordings.get(codebookVersion);
    return (
      codebookVersion < theme.version &&
      (then === undefined || !saysTheSame(then, theme.definition))
    );
  });
}

export function definitionView(definition: Definition): DefinitionView {
  const { code = '', brief, full, whenToUse, whenNotToUse, examples } = definition;
  return { code, brief, full, whenToUse, whenNotToUse, examples };
}

function codingsOf({ study }: OpenStudy, { id }: Theme): Coding[] {
  return [...study.codings.values()].flatMap((codings) =>
    [...codings.values()].filter(({ theme }) => theme === id),
  );
}

function saysTheSame(a: Definition, b: Definition): boolean {
  return (['brief', 'full', 'whenToUse', 'whenNotToUse'] as const).every(
    (part) => a[part] === b[part],
  );
}

function isSame(a: Definition, b: Definition): boolean {
  return saysTheSame(a, b) && a.examples === b.examples && (a.code ?? '') === (b.code ?? '');
}
