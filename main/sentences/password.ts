import type { BackupsRewritten } from '../project/index.ts';
import { sentenceFor } from './sentences.ts';

/** To be read before a password is set. */
export const beforeSetting =
  'Nobody can open the study without its password, and nobody can bring it back; write it down where it is safe.\n' +
  'Copies that you or a sync service made elsewhere stay as they are. The file’s name, and how many records it holds and how large they are, can be seen without it.';

/** To be read before one is taken away. */
export const beforeRemoving =
  'Without a password whoever gets the file can read all of it. Copies that you or a sync service made elsewhere still open with the password.';

/** What became of the backups when a password was set, changed or removed: each in a sentence. */
export function backupsInWords({ removed, left, made, failed }: BackupsRewritten): string[] {
  const notes: string[] = [];
  if (removed.length > 0) {
    const counted = removed.length === 1 ? 'One backup' : `${removed.length} backups`;
    notes.push(
      `${counted} from before ${removed.length === 1 ? 'was' : 'were'} removed` +
        (made === null ? '.' : ', and one of the study as it is now took the place.'),
    );
  }
  if (failed !== null) notes.push(`No new backup could be made. ${sentenceFor(failed)}`);
  for (const failure of left) {
    notes.push(
      `Something from before could not be removed and can be read as it could before. ${sentenceFor(failure)}`,
    );
  }
  return notes;
}
