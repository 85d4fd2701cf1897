import * as fs from 'node:fs';
import * as path from 'node:path';
import { describe, expect, test } from 'vitest';
import type { FitProgress } from '../../../main/api.ts';
import { newFolder, newTable, placeOf, seen, transcriptsOf, type Table } from './table.ts';

/** All that a person would look for after opening a study again. */
async function state(table: Table): Promise<unknown> {
  const overview = await table.ask('overview', null);
  const shape = await table.ask('shapeView', null);
  const transcripts = [...(await transcriptsOf(table)).values()];
  return {
    ...overview,
    study: { ...overview?.study, path: null },
    shape,
    decided: transcripts.flatMap(({ passages }) =>
      passages.filter(({ codings, none, memos }) => codings.length + memos.length > 0 || none),
    ),
  };
}

describe('the main job in a window, on the demo study', () => {
  test('runs from the first look to the report, and is all there afterwards', async () => {
    const folder = newFolder();
    const table = newTable({ folder });
    const points: FitProgress[] = [];
    const opened = await table.ask('openDemo', null, { onProgress: (point) => points.push(point) });
    expect(opened).toMatchObject({
      study: { name: 'Winter timetable' },
      transcripts: 12,
      fitted: true,
      stale: false,
      waiting: [],
      undo: null,
      reader: { name: 'Ada' },
    });
    expect(opened.unread).toBe(opened.passages);
    expect(points.at(-1)?.fraction).toBeLessThanOrEqual(1);
    expect(points.some(({ bound }) => bound !== null && bound < 0)).toBe(true);
    expect(table.recent).toEqual([path.join(folder, 'Winter timetable.understory')]);

    // Gather: who was understood to be who. Read off the files by eye.
    const gather = await table.ask('gatherView', null);
    const couple = gather.transcripts.find(({ name }) => name === 'P06 couple');
    expect(couple?.speakers.map(({ label, role }) => [label, role])).toEqual([
      ['Interviewer', 'interviewer'],
      ['Col', 'participant'],
      ['Edda', 'participant'],
    ]);
    // The table of attributes has this person's name with a slip in it.
    const misspelt = gather.transcripts.filter(({ needsLook }) => needsLook.length > 0);
    expect(misspelt.map(({ name, needsLook }) => [name, needsLook])).toEqual([
      ['P03 shopkeeper', ['No attributes for Ansel Pike']],
    ]);
    expect(gather.attributes).toContain('village');
    expect((await table.ask('counted', null))?.passages).toBe(opened.passages);

    // Shape: name, merge, pin, set aside, seed, shut out.
    const [first, second, third, fourth, fifth] = (await table.ask('shapeView', null)).themes;
    await table.ask('nameTheme', { theme: first.id, name: 'Getting across' });
    await table.ask('defineTheme', {
      theme: first.id,
      code: 'CROSS',
      brief: 'How people get to the mainland',
      full: '',
      whenToUse: '',
      whenNotToUse: '',
      examples: '',
    });
    await table.ask('mergeThemes', { into: second.id, from: [third.id] });
    await table.ask('pinTheme', { theme: first.id, pinned: true });
    await table.ask('setThemeAside', { theme: fourth.id, aside: true });
    await table.ask('seedWord', { theme: fifth.id, word: 'School', seeded: true });
    await table.ask('shutOutWord', { theme: fifth.id, word: fifth.words[0], shutOut: true });
    const { theme: byHand } = await table.ask('addTheme', {
      name: 'Asking favours',
      byHand: true,
      seeds: [],
    });
    const shaped = await table.ask('overview', null);
    expect(shaped?.waiting).toEqual([
      '1 merge',
      '1 theme set aside',
      '1 theme pinned',
      '1 word seeded',
      '1 word shut out',
    ]);

    // Read: confirm, reject, none, by hand, memos.
    const list = await table.ask('readingList', {
      kind: 'strongest first',
      theme: null,
      transcript: null,
      unreadOnly: true,
      count: 0,
      seed: 1,
    });
    const under = { drawnBy: list.name, seenSuggestion: true };
    const [one, two, three, four] = list.places;
    const suggested = async (place: typeof one): Promise<string> =>
      (await table.ask('passageView', { place })).suggestions[0].theme;
    const confirmed = await suggested(one);
    await table.ask('confirm', { place: one, theme: confirmed, memo: 'At last', ...under });
    await table.ask('reject', { place: two, theme: await suggested(two), memo: '', ...under });
    await table.ask('markNone', { place: three, ...under });
    await table.ask('codeByHand', {
      place: { ...four, end: four.start + 25 },
      theme: byHand,
      memo: '',
      ...under,
    });
    await table.ask('writeMemo', { on: { kind: 'passage', place: four }, text: 'Come back here' });

    // Re-fit: the decisions are taken up, and what moved is told.
    const refitted = await table.ask('fit', { kind: 're-fit', themes: null });
    expect(refitted.overview).toMatchObject({ waiting: [], stale: false, undo: 're-fit' });
    expect(refitted.moved?.compared).toBeGreaterThan(0);
    expect(refitted.moved?.gone.length).toBeGreaterThan(0);
    const after = await table.ask('shapeView', null);
    expect(after.fit?.kind).toBe('re-fit');
    expect(after.before).not.toBeNull();
    const pinned = await table.ask('themeView', { theme: first.id });
    expect(pinned.row).toMatchObject({ label: 'Getting across', pinned: true, modelled: true });
    expect(pinned.row.words).toEqual(first.words);
    const shut = await table.ask('themeView', { theme: fifth.id });
    expect(shut.words.map(({ form }) => form)).not.toContain(fifth.words[0]);

    // Report.
    const preview = await table.ask('reportPreview', {
      standings: ['confirmed', 'by hand'],
      themes: null,
      guard: true,
    });
    expect(preview.count).toBe(2);
    const report = await table.ask('report', {
      standings: ['confirmed', 'by hand'],
      themes: [confirmed],
      guard: true,
      format: 'csv',
    });
    expect(report.fileName).toBe('Winter timetable excerpts.csv');
    expect(new TextDecoder().decode(report.bytes).split('\r\n')).toHaveLength(3);

    const before = await state(table);
    const file = path.join(folder, 'Winter timetable.understory');
    // As if the program had been killed: the file as it is on the drive, opened by another one.
    const other = newFolder();
    fs.copyFileSync(file, path.join(other, 'Winter timetable.understory'));
    expect(await state(await opening(other))).toEqual(before);

    await table.ask('closeStudy', null);
    const again = newTable({ folder });
    // The demo study that has work in it is the one that is opened.
    await again.ask('openDemo', null);
    expect(await state(again)).toEqual(before);
    const studies = fs.readdirSync(folder).filter((name) => !name.startsWith('.'));
    expect(studies).toEqual(['Winter timetable.understory']);

    async function opening(where: string): Promise<Table> {
      const next = newTable({ folder: where });
      await next.ask('openStudy', { path: 'Winter timetable.understory', readOnly: false });
      return next;
    }
  });

  test('a demo that is stopped while it is made leaves nothing behind', async () => {
    const table = newTable();
    const stop = new AbortController();
    const answer = await table.session.handlers.openDemo(null, {
      signal: stop.signal,
      onProgress: () => stop.abort(),
    });
    expect(answer).toMatchObject({ code: 'stopped' });
    expect(fs.readdirSync(table.folder)).toEqual([]);
    expect(await table.ask('overview', null)).toBeNull();
  });

  test('what stands in the demo’s place and is no study is left alone', async () => {
    const table = newTable();
    const taken = path.join(table.folder, 'Winter timetable.understory');
    fs.writeFileSync(taken, 'something else');
    const { study } = await table.ask('openDemo', null);
    expect(study.path).toBe(path.join(table.folder, 'Winter timetable 2.understory'));
    expect(fs.readFileSync(taken, 'utf8')).toBe('something else');
    const transcripts = await transcriptsOf(table);
    const { id, passages } = transcripts.get('P02 crofter')!;
    await table.ask('markNone', { place: placeOf(id, passages[0]), ...seen });
  });
});
