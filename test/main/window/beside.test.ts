import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { file, interviews, newStudy } from './table.ts';

const made = (name: string): { name: string; bytes: Uint8Array } => ({
  name,
  bytes: new Uint8Array(readFileSync(join(import.meta.dirname, '../formats/files', name))),
});

describe('field notes', () => {
  test('are kept, read, tied to a transcript, renamed and removed; nothing counts them', async () => {
    const table = await newStudy(1);
    const before = await table.ask('counted', null);
    const [{ id, name }] = (await table.ask('gatherView', null)).transcripts;
    const outcome = await table.ask('addFieldNotes', {
      files: [file('walk.txt', 'We walked to the pier.'), file('empty.txt', '')],
      transcript: null,
    });
    expect(outcome.kept).toEqual(['walk']);
    expect(outcome.skipped.map((one) => one.file)).toEqual(['empty.txt']);
    const [note] = (await table.ask('gatherView', null)).fieldNotes;
    expect(note).toMatchObject({ name: 'walk', transcript: null, words: 5 });
    await table.ask('describeFieldNote', { note: note.id, name: 'Walk', transcript: id });
    expect(await table.ask('fieldNoteView', { note: note.id })).toMatchObject({
      name: 'Walk',
      text: 'We walked to the pier.',
      transcript: { id, name },
    });
    expect((await table.ask('transcriptView', { transcript: id })).fieldNotes).toHaveLength(1);
    expect(await table.ask('counted', null)).toEqual(before);
    await table.ask('removeFieldNote', { note: note.id });
    expect((await table.ask('gatherView', null)).fieldNotes).toEqual([]);
    expect(await table.refused('fieldNoteView', { note: note.id })).toBe('unknown field note');
    expect((await table.ask('undo', null)).did).toBe('removal of field note Walk');
  });

  test('hold the comments and footnotes of a document, and go with its transcript', async () => {
    const table = await newStudy(0);
    await table.ask('addTranscripts', { files: [made('skell.docx')] });
    const view = await table.ask('gatherView', null);
    expect(view.fieldNotes).toMatchObject([{ name: 'Beside skell' }]);
    const { text } = await table.ask('fieldNoteView', { note: view.fieldNotes[0].id });
    expect(text).toBe(
      'Footnote: The crossing of 12 January.\n\nComment by Kim: Check the year against the log.',
    );
    await table.ask('removeTranscript', { transcript: view.transcripts[0].id });
    expect((await table.ask('gatherView', null)).fieldNotes).toEqual([]);
    await table.ask('undo', null);
    expect((await table.ask('gatherView', null)).fieldNotes).toHaveLength(1);
  });
});

describe('a table of answers', () => {
  test('waits for a person’s word, then is a transcript with its people and attributes', async () => {
    const table = await newStudy(0);
    const outcome = await table.ask('addTranscripts', { files: [made('answers.xlsx')] });
    expect(outcome.gathered).toEqual([]);
    const [offer] = outcome.tables;
    const [sheet] = offer.sheets;
    expect(sheet.rows).toBe(3);
    const of = (part: string): string[] =>
      sheet.columns.filter(({ guess }) => guess === part).map(({ heading }) => heading);
    expect(of('participant')).toEqual(['Respondent']);
    expect(of('text')).toHaveLength(2);
    const plan = { table: offer.table, sheet: sheet.name, participant: 'Respondent' };
    expect(await table.refused('addTable', { ...plan, text: ['Nothing'], attributes: [] })).toBe(
      'no answers',
    );
    const taken = await table.ask('addTable', {
      ...plan,
      text: of('text'),
      attributes: ['Village'],
    });
    expect(taken.gathered).toEqual(['answers']);
    const view = await table.ask('gatherView', null);
    expect(view.participants.map(({ name, attributes }) => [name, attributes])).toEqual([
      ['R01', { Village: 'Skell' }],
      ['R02', { Village: 'Brae' }],
      ['R03', { Village: 'Skell' }],
    ]);
    expect(view.transcripts[0].speakers[0]).toMatchObject({
      label: 'Question',
      role: 'interviewer',
    });
    expect(await table.refused('addTable', { ...plan, text: of('text'), attributes: [] })).toBe(
      'no such table',
    );
  });

  test('of attributes alone is taken for one, from a workbook as from .csv', async () => {
    const table = await newStudy(2);
    const outcome = await table.ask('addTranscripts', {
      files: [file('who.csv', 'participant,village\nP1,Skell\nP2,Brae\n')],
    });
    expect(outcome).toMatchObject({ tables: [], attributes: { described: 2, unmatched: [] } });
  });
});

describe('a file of a known name with other words', () => {
  const talk = 'Kim: Go on.\nLee: The fery was late and we all went home again in the rain.\n';
  const better = talk.replace('fery', 'ferry').replace('Go on.', 'Go on, please.');

  test('waits; taken instead, its words come in and codings stay on theirs', async () => {
    const table = await newStudy(0);
    await table.ask('addTranscripts', { files: [file('1.txt', talk)] });
    const { theme } = await table.ask('addTheme', { name: 'Sea', byHand: true, seeds: [] });
    const [{ id }] = (await table.ask('gatherView', null)).transcripts;
    const view = await table.ask('transcriptView', { transcript: id });
    const start = view.text.indexOf('The fery');
    const end = view.text.indexOf(' again');
    await table.ask('codeByHand', {
      place: { transcript: id, start, end },
      theme,
      memo: '',
      drawnBy: 'in order',
      seenSuggestion: false,
    });
    const outcome = await table.ask('addTranscripts', { files: [file('1.txt', better)] });
    expect(outcome.gathered).toEqual([]);
    const [double] = outcome.doubles;
    expect(double).toMatchObject({ file: '1.txt', transcriptName: '1', codings: 1 });
    const choices = [{ double: double.double, choice: 'replace' }] as const;
    expect((await table.ask('settleDoubles', { choices })).gathered).toEqual(['1']);
    const after = await table.ask('transcriptView', { transcript: id });
    expect(after.text).toBe(better);
    const span = after.passages.flatMap(({ codings }) => codings)[0].span;
    expect(after.text.slice(span.start, span.end)).toBe('The ferry was late and we all went home');
    await table.ask('undo', null);
    expect((await table.ask('transcriptView', { transcript: id })).text).toBe(talk);
  });

  test('is left out, or kept beside the other under a name of its own', async () => {
    const table = await newStudy(0);
    await table.ask('addTranscripts', { files: [file('1.txt', talk)] });
    const again = async (choice: 'skip' | 'keep both') => {
      const { doubles } = await table.ask('addTranscripts', { files: [file('1.txt', better)] });
      const choices = [{ double: doubles[0].double, choice }];
      return (await table.ask('settleDoubles', { choices })).gathered;
    };
    expect(await again('skip')).toEqual([]);
    expect(await again('keep both')).toEqual(['1.txt']);
  });

  test('with the same words is left out and said so', async () => {
    const table = await newStudy(0);
    await table.ask('addTranscripts', { files: interviews(1) });
    const { bytes, name } = interviews(1)[0];
    const crlf = new TextDecoder().decode(bytes).replaceAll('\n', '\r\n');
    const outcome = await table.ask('addTranscripts', { files: [file(name, crlf)] });
    expect(outcome.doubles).toEqual([]);
    expect(outcome.skipped).toHaveLength(1);
  });
});

describe('a codebook from elsewhere', () => {
  test('is shown, then taken in as themes by hand or with seeds', async () => {
    const table = await newStudy(2);
    const book = file('codes.csv', 'name,definition,words\nSea,All of it,ferry\nWork,Any,\n');
    const offer = await table.ask('readCodebook', book);
    expect(offer.entries.map(({ name, taken }) => [name, taken])).toEqual([
      ['Sea', false],
      ['Work', false],
    ]);
    const { added } = await table.ask('addCodebook', { ...book, names: ['Sea'], byHand: false });
    expect(added).toBe(1);
    expect((await table.ask('readCodebook', book)).entries[0].taken).toBe(true);
    expect(await table.refused('addCodebook', { ...book, names: ['Sea'], byHand: true })).toBe(
      'nothing to take in',
    );
    const { themes } = await table.ask('shapeView', null);
    expect(themes).toMatchObject([{ name: 'Sea', origin: 'asked for' }]);
    expect(await table.refused('readCodebook', file('a.csv', 'x,y\n1,2\n'))).toBe('no codebook');
  });
});
