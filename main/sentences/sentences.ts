import type { Refusal } from '../../engine/study/index.ts';
import type { FitRefused, SettingFault } from '../../engine/themes/index.ts';
import type { PlanRefusal } from '../decisions.ts';
import type { Format, ReadRefusal } from '../formats/index.ts';
import type { MissedFile } from '../gather/find-files.ts';
import type { ParsedPlan } from '../plan.ts';
import type { StudyFileFailure } from '../project/index.ts';
import { fileSentences } from './files.ts';
import { studySentences } from './study.ts';

/** What a person is told where a decision or a file operation was refused. */
export function sentenceFor(refusal: Refusal | StudyFileFailure): string {
  return 'path' in refusal
    ? fileSentences[refusal.code](refusal)
    : studySentences[refusal.code](refusal.subject);
}

/** A backup that nobody asked for could not be made. */
export function noBackup(failure: StudyFileFailure): string {
  return `Decisions are saved in the study, and no backup of it could be made: ${sentenceFor(failure)}`;
}

/** Why a file did not become a transcript. */
export type FileRefusal =
  ReadRefusal | { readonly code: MissedFile['code'] | 'duplicate' | 'unreadable' };

/** One sentence on a skipped file: what, why, and what to do. Does not repeat the file's name. */
export function sentenceForSkipped(refusal: FileRefusal): string {
  switch (refusal.code) {
    case 'empty file':
      return 'The file is empty; export the transcript again.';
    case 'not text':
      return `The file holds no readable text; ${saveAs}.`;
    case 'unknown encoding':
      return 'The letters in the file are stored in a way that is not recognised; save it again as UTF-8 text.';
    case 'unknown format':
      return sentenceForKind(refusal.format);
    case 'broken file':
      return `The file says that it is ${formatNames[refusal.format]} and is damaged${refusal.where === undefined ? '' : ` ${refusal.where}`}; open it in the program that made it and save it again.`;
    case 'locked file':
      return 'The file is locked with a password; save it without one, then try again.';
    case 'too large':
      return `The file holds ${refusal.megabytes === null ? 'more than the' : `about ${refusal.megabytes} MB, more than the`} ${refusal.limit} MB that can be read; divide it, or leave out its pictures.`;
    case 'scanned':
      return `The file holds ${refusal.pages === 1 ? 'a page' : `${refusal.pages} pages`} that were scanned, as pictures without text; have their text recognised first, or ask for the document that was printed.`;
    case 'too slow':
      return `The file was given up after ${refusal.seconds} seconds; open it in the program that made it and save it as plain text.`;
    case 'a table':
      return 'The file is a table of answers; say which of its columns hold text.';
    case 'no speech':
      return 'There is no speech in the file, only headings; check that it is the whole transcript.';
    case 'unreadable':
      return 'No sense could be made of the file; open it in the program that made it and save it as plain text.';
    case 'duplicate':
      return 'The same transcript is in the study already, so one copy was kept; remove this one.';
    case 'not found':
      return 'There is no such file or folder; check the name.';
    case 'not allowed':
      return 'This account is not allowed to read it; change its permissions.';
    case 'cannot read':
      return 'It could not be read; check that the drive is connected.';
  }
}

const saveAs = 'save the transcript as .txt, .docx, .odt, .rtf, .pdf, .vtt or .srt';

function sentenceForKind(format: string): string {
  if (format === 'qdc') {
    return 'The file is a codebook; add it with “Codebook” in Gather, or with --codebook.';
  }
  if (format === 'doc') {
    return 'Documents of this old kind (.doc) are not read; save it as .docx, .odt or .rtf.';
  }
  if (format === 'recording') {
    return 'The file is a recording, and only what was written down can be read; add its transcript.';
  }
  return `Files of this kind (${format}) are not read; ${saveAs}.`;
}

const formatNames: Record<Format, string> = {
  text: 'a text',
  vtt: 'a WebVTT file',
  srt: 'a SubRip file',
  docx: 'a .docx document',
  odt: 'an .odt document',
  rtf: 'an .rtf document',
  pdf: 'a .pdf document',
  html: 'a web page',
  csv: 'a table (.csv)',
  xlsx: 'a workbook (.xlsx)',
};

export function sentenceForFit(
  refusal:
    | FitRefused
    | {
        readonly code:
          | 'no fit to start from'
          | 'changed while fitting'
          | 'changed while refining'
          | 'refinement failed'
          | 'stopped';
      },
): string {
  switch (refusal.code) {
    case 'no words left':
      return 'No words are left to count, since every word is on a list, too rare or too common; add transcripts, or loosen the limits on words.';
    case 'more themes than passages':
      return `There are ${refusal.themes} themes and only ${refusal.passages} passages with counted words; ask for fewer themes, or add transcripts.`;
    case 'word without a theme':
      return `“${refusal.word ?? ''}” is shut out of every theme that is fitted, so its occurrences would belong nowhere; let it into one, or add it to the stop words.`;
    case 'does not split':
      return 'Nothing in this theme stands apart from the rest of it, so it was not split; look for seed words of the part that you have in mind, and add a theme with them.';
    case 'no themes':
      return 'There is no theme to fit; ask for at least one.';
    case 'no fit to start from':
      return 'There is no fit to start from yet; fit the study from scratch first.';
    case 'changed while fitting':
      return 'The transcripts or the set of themes changed while the fit ran, so its result was let go; fit again.';
    case 'changed while refining':
      return 'The transcripts, the set of themes or the fit on screen changed while the full answer was made, so it was let go and the quick answer stays; fit from scratch again when you like.';
    case 'refinement failed':
      return 'The full answer could not be made, so the quick answer stays; fit from scratch again.';
    case 'stopped':
      return 'The fit was stopped, so the study is as it was; fit again when you like.';
  }
}

export function sentenceForPlan(
  refusal: PlanRefusal | Exclude<ParsedPlan, { readonly ok: true }>,
): string {
  switch (refusal.code) {
    case 'plan is not JSON':
      return 'The plan is not valid JSON; check its commas, quotes and brackets.';
    case 'unknown plan key':
      return `The plan has a key that is not known: ${refusal.place}; remove it or correct its spelling.`;
    case 'plan value':
      return `The plan has a value that does not fit at ${refusal.place === '' ? 'its top' : refusal.place}: ${refusal.problem}; correct it.`;
    case 'plan names no theme':
      return `The plan speaks of a theme that is not in the study: “${refusal.subject}”; use a theme’s name or id from themes.csv.`;
    case 'plan names no transcript':
      return `The plan speaks of a transcript that is not in the study: “${refusal.subject}”; use a name from transcripts.`;
    case 'plan names no speaker':
      return `No transcript has a speaker “${refusal.subject}”; use the label as it stands in the transcript.`;
    case 'setting':
      return sentenceForSetting({ key: refusal.subject, must: refusal.must });
  }
}

export function sentenceForSetting({ key, must }: SettingFault): string {
  return must === 'is not a setting'
    ? `There is no setting “${key}”; check its spelling in README.md.`
    : `The setting “${key}” ${must}; correct it.`;
}
