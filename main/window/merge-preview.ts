import { apply, type Edit } from '../../engine/study/index.ts';
import type { Api, MergePreview, Refused } from '../api.ts';
import { give } from './answers.ts';
import type { OpenStudy } from './open-study.ts';
import { codedByTheme, themeRows } from './theme-rows.ts';
import { mixedWords } from './theme-words.ts';

const wordsShown = 12;

/** What a merge would bring together; refused where the merge itself would be. */
export function mergePreview(
  open: OpenStudy,
  { into, from: asked }: Api['mergePreview']['takes'],
): { readonly value: MergePreview } | Refused {
  const { study, now } = open;
  const from = [...new Set(asked)];
  const edit: Edit = { kind: 'themesMerged', into, from };
  const tried = apply(study, {
    sequence: study.sequence + 1,
    at: '',
    by: open.reader.id,
    edit,
  });
  if (!tried.ok) return open.refusal(tried);

  const ids = [into, ...from];
  const rows = themeRows(open).filter(({ id }) => ids.includes(id));
  const shares = rows.flatMap(({ share }) => share ?? []);
  const coded = codedByTheme(open);
  const people = new Set(ids.flatMap((id) => [...(coded.get(id)?.people ?? [])]));
  const columns = ids.flatMap((id) => now.themes.columnOf.get(id) ?? []);
  return give({
    label: now.label(into),
    joins: from.map((id) => now.label(id)),
    share: shares.length === 0 ? null : shares.reduce((sum, share) => sum + share, 0),
    people: people.size,
    codings: rows.reduce((sum, { codings }) => sum + codings, 0),
    codedTwice: codedTwice(open, new Set(ids)),
    suggestions: rows.reduce((sum, { suggestions }) => sum + suggestions, 0),
    words: mixedWords(
      now.themes,
      columns.flatMap((column) => now.themes.rows[column]),
      wordsShown,
    ).map(({ surface }) => surface),
  });
}

/** Passages that carry codings of two or more of the themes. */
function codedTwice({ now }: OpenStudy, themes: ReadonlySet<string>): number {
  let count = 0;
  for (const { id } of now.transcripts) {
    for (const { codings } of now.decidedIn(id).passages) {
      const met = new Set(
        codings.flatMap(({ theme, standing }) =>
          standing === 'rejected' ? [] : [now.themeOf(theme) ?? theme],
        ),
      );
      if ([...met].filter((theme) => themes.has(theme)).length > 1) count++;
    }
  }
  return count;
}
