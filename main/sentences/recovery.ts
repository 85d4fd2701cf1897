import type { Edit } from '../../engine/study/index.ts';
import type { Missing } from '../recovered.ts';
import { editInWords, type Names } from './edits.ts';
import { timeInWords } from './time.ts';

/** What is missing from a recovered study, by the decision that speaks of it where one does. */
export function missingInWords(missing: Missing): string {
  const { sequence, kind, of } = missing;
  const after = missing.after === null ? null : timeInWords(missing.after);
  const before = missing.before === null ? null : timeInWords(missing.before);
  const record = `record ${sequence}`;
  if (of !== null) return `${contentOf(of)} (${record})`;
  if (kind === 'seal') return `what was removed on purpose, and why (${record})`;
  if (kind === 'note') return `a note that no decision depends on (${record})`;
  const what = kind === 'blob' ? 'a text, or the numbers of a fit' : 'a decision';
  if (after !== null && before !== null)
    return `${what} between ${after} and ${before} (${record})`;
  if (after !== null) return `${what} after ${after} (${record})`;
  return `${what}${before === null ? '' : ` before ${before}`} (${record})`;
}

export function leftOutInWords(edit: Edit, at: string, names: Names): string {
  return `${editInWords(edit, names)} (${timeInWords(at)})`;
}

function contentOf(edit: Edit): string {
  switch (edit.kind) {
    case 'transcriptGathered':
    case 'transcriptRemoved':
      return `the text of ${edit.transcript.name}`;
    case 'textRevised':
      return 'a text after its correction';
    case 'modelFitted':
    case 'fitRemoved':
      return 'the numbers of a fit';
    default:
      return 'what a decision speaks of';
  }
}
