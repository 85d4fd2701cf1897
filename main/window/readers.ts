import { nameKey, type Entry, type Reader, type Study } from '../../engine/study/index.ts';

/**
 * Who sits at the window, as far as the study can tell: the reader of this account's name, or the
 * one that this reader went on under ("nameReader" leaves that in the trail); null for a newcomer.
 */
export function knownReader(
  study: Study,
  trail: Iterable<Entry>,
  accountName: string,
): Reader | null {
  let id: string | null = null;
  let known: Reader | null = null;
  for (const { by, edit } of trail) {
    if (edit.kind !== 'readerAdded') continue;
    const { reader } = edit;
    if (nameKey(reader.name) === nameKey(accountName) || (id !== null && by === id)) {
      id = reader.id;
      known = study.readers.get(id) ?? known;
    }
  }
  return known;
}
