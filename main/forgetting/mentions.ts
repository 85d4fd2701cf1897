import type { Entry, Study } from '../../engine/study/index.ts';
import type { Desk } from '../desk.ts';
import { reworded } from './redact.ts';
import { nameFinder, type NameFinder } from './words.ts';

/** A place outside what goes anyway where one of the names stands. */
export interface Mention {
  readonly where:
    | 'name of the study'
    | 'name of a transcript'
    | 'file name'
    | 'line before the first turn'
    | 'transcript'
    | 'speaker'
    | 'name of a participant'
    | 'attribute'
    | 'name of a theme'
    | 'codebook entry'
    | 'heading'
    | 'seed word'
    | 'word shut out'
    | 'memo'
    | 'memo on a coding'
    | 'setting'
    | 'stand-in'
    | 'field note'
    | 'interviewer'
    | 'question of the guide'
    | 'name of a draw'
    | 'name of a fit'
    | 'file name of a report'
    | 'the trail';
  /** What it stands in or on, as a person calls it. */
  readonly on: string;
  readonly count: number;
}

/**
 * Everywhere that names stand in a study as it is, other than in the transcripts `except`. Whole words
 * in any case; a nickname, an initial or a misspelling is not found.
 */
export function mentionsOf(
  desk: Pick<Desk, 'study' | 'text' | 'entries' | 'store'>,
  names: readonly string[],
  except: ReadonlySet<string>,
): Mention[] {
  const { study } = desk;
  const finder = nameFinder(names.map((name) => ({ name, mark: '' })));
  if (finder === null) return [];
  const found: Mention[] = [];
  const look = (where: Mention['where'], on: string, ...texts: readonly string[]): void => {
    const count = texts.reduce((sum, each) => sum + [...each.matchAll(finder.pattern)].length, 0);
    if (count > 0) found.push({ where, on, count });
  };
  look('name of the study', study.name, study.name);
  for (const transcript of study.transcripts.values()) {
    const { id, name, source, details, speakers, facts } = transcript;
    if (except.has(id)) continue;
    look('name of a transcript', name, name);
    look('file name', name, source.fileName);
    look('line before the first turn', name, ...details.flatMap((one) => [one.name, one.value]));
    look('speaker', name, ...speakers.map(({ label }) => label ?? ''));
    look('interviewer', name, facts?.interviewedBy ?? '');
    look('transcript', name, desk.text(id));
  }
  for (const { name, attributes } of study.participants.values()) {
    look('name of a participant', name, name);
    look('attribute', name, ...Object.entries(attributes).flat());
  }
  for (const { name, definition, seeds, shutOut, mergedInto } of study.themes.values()) {
    const title = name ?? 'a candidate';
    if (mergedInto === null) look('name of a theme', title, name ?? '');
    look('codebook entry', title, ...Object.values(definition).map(String));
    look('seed word', title, ...seeds);
    look('word shut out', title, ...shutOut);
  }
  for (const { name } of study.headings.values()) look('heading', name, name);
  for (const { text: memo, subject } of study.memos.values()) {
    if ('transcript' in subject && except.has(subject.transcript)) continue;
    look('memo', subjectInWords(study, subject), memo);
  }
  for (const [transcript, codings] of study.codings) {
    if (except.has(transcript)) continue;
    const name = study.transcripts.get(transcript)?.name ?? '';
    look('memo on a coding', name, ...[...codings.values()].map(({ memo }) => memo));
  }
  for (const [key, value] of Object.entries(study.settings)) {
    look('setting', key, ...[value].flat().map(String));
  }
  for (const { forms, replacement } of study.identifiers.values()) {
    look('stand-in', replacement ?? 'a name that was left', ...forms, replacement ?? '');
  }
  for (const { name, transcript, source, text } of study.fieldNotes.values()) {
    if (transcript !== null && except.has(transcript)) continue;
    const note = Buffer.from(desk.store.readBlob(text.sequence)).toString('utf8');
    look('field note', name, name, source.fileName, note);
  }
  for (const { text: question } of study.guide) look('question of the guide', question, question);
  for (const { name } of study.draws.values()) look('name of a draw', name, name);
  for (const { name } of study.fits.values()) look('name of a fit', name ?? '', name ?? '');
  for (const { fileName } of study.exported) look('file name of a report', fileName, fileName);
  const earlier = [...desk.entries].filter((entry) => speaksOf(entry, finder)).length;
  if (earlier > 0) found.push({ where: 'the trail', on: 'earlier decisions', count: earlier });
  return found;
}

function speaksOf({ edit }: Entry, finder: NameFinder): boolean {
  const plain = JSON.stringify(edit);
  return plain.search(finder.pattern) >= 0 && JSON.stringify(reworded(edit, finder)) !== plain;
}

function subjectInWords(study: Study, subject: { readonly kind: string }): string {
  if ('transcript' in subject) {
    return study.transcripts.get(subject.transcript as string)?.name ?? 'a transcript';
  }
  if ('theme' in subject) return study.themes.get(subject.theme as string)?.name ?? 'a theme';
  return 'the study';
}
