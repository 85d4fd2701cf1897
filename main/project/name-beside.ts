import { createHash } from 'node:crypto';
import * as path from 'node:path';

/**
 * The name of a passing file of ours in a study's folder: 'open' is the owner note, 'new' a file that
 * is about to take the study's place, 'backup' a copy on its way to its name. Hashed, because the study's own name may already be as long as
 * the drive allows; always the same one, so that what a killed process left is found and removed.
 */
export function nameBeside(studyPath: string, purpose: 'open' | 'new' | 'backup'): string {
  const name = path.basename(studyPath).normalize('NFC');
  const short = createHash('sha256').update(name).digest('hex').slice(0, 16);
  return path.join(path.dirname(studyPath), `.understory-${purpose}-${short}`);
}
