import * as fs from 'node:fs';
import * as path from 'node:path';
import { describe, expect, test } from 'vitest';
import { methods } from '../../../main/api.ts';
import { createStudyFile, openStudyFile } from '../../../main/project/index.ts';
import { newFolder, newStudy, newTable, passageOf, seen, transcriptsOf } from './table.ts';

describe('a window without a study', () => {
  test('says so, whatever is asked of a study', async () => {
    const table = newTable();
    expect(await table.ask('overview', null)).toBeNull();
    expect(await table.refused('shapeView', null)).toBe('no study');
    expect(await table.refused('undo', null)).toBe('no study');
    expect(await table.refused('nameTheme', { theme: 'a', name: 'b' })).toBe('no study');
    expect(await table.refused('find', { text: 'a' })).toBe('no study');
    expect((await table.ask('about', null)).studiesFolder).toBe(table.folder);
    expect(await table.ask('closeStudy', null)).toBeNull();
  });

  test('answers every method of the api', () => {
    const { handlers } = newTable().session;
    expect(Object.keys(handlers).sort()).toEqual([...methods].sort());
  });
});

describe('starting a study', () => {
  test('makes its file at once, under a name that a drive takes', async () => {
    const table = newTable({ folder: path.join(newFolder(), 'Studies', 'of mine') });
    const started = await table.ask('startStudy', { name: ' What: now? ', path: null });
    const file = path.join(table.folder, 'What now.understory');
    expect(started).toMatchObject({
      study: { name: 'What: now?', path: file },
      readOnly: false,
      undo: null,
      reader: { name: 'Ada' },
      transcripts: 0,
    });
    expect(fs.existsSync(file)).toBe(true);
    expect(table.recent).toEqual([file]);
    expect(await table.ask('recentStudies', null)).toMatchObject([
      { path: file, name: 'What now', missing: false },
    ]);
  });

  test('goes to the path given, with the ending put on', async () => {
    const table = newTable();
    const given = path.join(table.folder, 'deep', 'er');
    const started = await table.ask('startStudy', { name: 'A', path: given });
    expect(started?.study.path).toBe(`${given}.understory`);
  });

  test('is refused where the name is taken or empty, and the study before stays open', async () => {
    const table = await newStudy(0);
    expect(await table.refused('startStudy', { name: 'Crossings', path: null })).toBe(
      'already there',
    );
    expect(await table.refused('startStudy', { name: '  ', path: null })).toBe('empty name');
    expect((await table.ask('overview', null))?.study.name).toBe('Crossings');
  });

  test('is refused where a file stands in the way of its folder', async () => {
    const table = newTable();
    fs.writeFileSync(path.join(table.folder, 'taken'), '');
    const inside = path.join(table.folder, 'taken', 'a.understory');
    expect(await table.refused('startStudy', { name: 'A', path: inside })).toBe('already there');
  });

  test('asks the system where to, and is given up where that is cancelled', async () => {
    const asked: string[] = [];
    const folder = newFolder();
    let answer: string | null = null;
    const table = newTable({
      folder,
      dialogs: {
        chooseStudy: async () => answer,
        placeStudy: async (name) => {
          asked.push(name);
          return answer;
        },
        chooseTranscripts: async () => null,
        placeFile: async () => null,
      },
    });
    expect(await table.ask('startStudy', { name: 'A/B', path: null })).toBeNull();
    expect(await table.ask('openStudy', { path: null, readOnly: false })).toBeNull();
    expect(await table.ask('chooseTranscripts', null).catch(String)).toContain('No study is open');
    answer = path.join(folder, 'mine');
    await table.ask('startStudy', { name: 'A/B', path: null });
    expect(asked).toEqual(['A B', 'A B']);
    expect(await table.ask('chooseTranscripts', null)).toBeNull();
    expect(await table.ask('saveFile', { fileName: 'a.csv', bytes: new Uint8Array(1) })).toBeNull();
  });

  test('closes the study that was open, whose file another window can then have', async () => {
    const table = await newStudy(0);
    await table.ask('startStudy', { name: 'Another', path: null });
    const other = newTable({ folder: table.folder });
    const opened = await other.ask('openStudy', { path: 'Crossings.understory', readOnly: false });
    expect(opened?.study.name).toBe('Crossings');
  });
});

describe('opening a study', () => {
  test('is refused in a sentence where there is no study to open', async () => {
    const table = newTable();
    const gone = path.join(table.folder, 'gone.understory');
    table.recent.push(gone);
    expect(await table.refused('openStudy', { path: gone, readOnly: false })).toBe('not found');
    // What is no more is not offered again.
    expect(await table.ask('recentStudies', null)).toEqual([]);
    expect(await table.refused('openStudy', { path: null, readOnly: false })).toBe('no dialog');
    const note = path.join(table.folder, 'note.understory');
    fs.writeFileSync(note, 'a shopping list');
    expect(await table.refused('openStudy', { path: note, readOnly: false })).toBe('not a study');
    fs.writeFileSync(note, '');
    expect(await table.refused('openStudy', { path: note, readOnly: false })).toBe('empty');
  });

  test('is refused where the trail is not one that can be followed, and the file is left free', async () => {
    const table = newTable();
    const place = path.join(table.folder, 'odd.understory');
    const file = await createStudyFile(place, { studyId: 'odd' });
    if (!file.ok) throw new Error(file.code);
    expect(file.value.append([], () => ({ at: '', by: '', edit: { kind: 'poemAdded' } })).ok).toBe(
      true,
    );
    file.value.close();
    expect(await table.refused('openStudy', { path: place, readOnly: false })).toBe(
      'newer decisions',
    );
    const again = await openStudyFile(place);
    if (!again.ok) throw new Error(again.code);
    again.value.close();

    const early = path.join(table.folder, 'early.understory');
    const begun = await createStudyFile(early, { studyId: 'early' });
    if (!begun.ok) throw new Error(begun.code);
    begun.value.close();
    expect(await table.refused('openStudy', { path: early, readOnly: false })).toBe(
      'unfinished trail',
    );
  });

  test('brings the window forward that has it open already', async () => {
    let forward = 0;
    const first = await newStudy(0, { comeForward: () => forward++ });
    const second = newTable({ folder: first.folder });
    const answer = await second.answer('openStudy', {
      path: 'Crossings.understory',
      readOnly: false,
    });
    expect(answer).toMatchObject({ code: 'open elsewhere' });
    expect('refused' in answer && answer.refused).toContain('brought forward');
    expect(forward).toBe(1);
    // Reading only, it can be opened all the same.
    const read = await second.ask('openStudy', { path: 'Crossings.understory', readOnly: true });
    expect(read).toMatchObject({ readOnly: true, undo: null });
  });

  test('a second time in the same window shows it again', async () => {
    const table = await newStudy(1);
    const before = await table.ask('overview', null);
    const again = await table.ask('openStudy', { path: 'Crossings.understory', readOnly: false });
    expect(again).toEqual(before);
  });

  test('for reading only lets everything be seen and nothing be decided', async () => {
    const writer = await newStudy(2, { fitted: true });
    const file = (await writer.ask('overview', null))!.study.path!;
    await writer.ask('closeStudy', null);
    const bytes = fs.readFileSync(file);
    const table = newTable({ folder: writer.folder });
    await table.ask('openStudy', { path: file, readOnly: true });
    expect((await table.ask('overview', null))!.readOnly).toBe(true);
    const { place } = await passageOf(table);
    const { themes } = await table.ask('shapeView', null);
    expect(themes).toHaveLength(2);
    for (const refused of [
      table.refused('markNone', { place, ...seen }),
      table.refused('nameTheme', { theme: themes[0].id, name: 'A' }),
      table.refused('renameStudy', { name: 'A' }),
      table.refused('nameReader', { name: 'Bo' }),
      table.refused('undo', null),
    ]) {
      expect(await refused).toBe('read only');
    }
    await table.ask('closeStudy', null);
    expect(fs.readFileSync(file).equals(bytes)).toBe(true);
  });

  test('a file handed over by the system opens, and the window is told', async () => {
    const first = await newStudy(1);
    const file = (await first.ask('overview', null))!.study.path!;
    await first.ask('closeStudy', null);
    const table = newTable();
    const told: string[] = [];
    table.session.on('changed', ({ study }) => told.push(study.name));
    table.session.on('closed', () => told.push('closed'));
    await table.session.openPath(file);
    await table.ask('closeStudy', null);
    expect(told).toEqual(['Crossings', 'closed']);
  });

  test('a study that is not closed leaves all its decisions in the file', async () => {
    const table = await newStudy(2);
    const { place } = await passageOf(table);
    await table.ask('markNone', { place, ...seen });
    const copy = path.join(newFolder(), 'copy.understory');
    fs.copyFileSync((await table.ask('overview', null))!.study.path!, copy);
    const other = newTable();
    await other.ask('openStudy', { path: copy, readOnly: false });
    expect([...(await transcriptsOf(other)).values()]).toEqual([
      ...(await transcriptsOf(table)).values(),
    ]);
  });
});

describe('who reads', () => {
  test('a name typed takes the place of the account’s, which has decided nothing yet', async () => {
    const table = await newStudy(1);
    const named = await table.ask('nameReader', { name: 'Bo' });
    expect(named.reader.name).toBe('Bo');
    const { place } = await passageOf(table);
    await table.ask('markNone', { place, ...seen });
    expect((await passageOf(table)).view.none?.reader).toBe('Bo');
    await table.ask('closeStudy', null);
    const again = newTable({ folder: table.folder });
    const opened = await again
      .ask('openStudy', { path: 'Crossings', readOnly: false })
      .catch(String);
    expect(opened).toContain('no file');
    const found = await again.ask('openStudy', { path: 'Crossings.understory', readOnly: false });
    expect(found?.reader).toEqual(named.reader);
  });

  test('whoever has decided stays beside the new name, and can be gone back to', async () => {
    const table = await newStudy(1);
    const { place } = await passageOf(table);
    await table.ask('markNone', { place, ...seen });
    const ada = (await table.ask('overview', null))!.reader;
    const bo = (await table.ask('nameReader', { name: 'Bo' })).reader;
    expect(bo.id).not.toBe(ada.id);
    expect((await passageOf(table)).view.none?.reader).toBe('Ada');
    expect((await table.ask('nameReader', { name: 'Ada' })).reader).toEqual(ada);
    expect(await table.refused('nameReader', { name: ' ' })).toBe('empty name');
    expect((await table.ask('nameReader', { name: 'Bo' })).reader).toEqual(bo);
    await table.ask('undo', null);
    expect((await table.ask('overview', null))!.reader).toEqual(ada);
  });

  test('another account is another reader, who joins with the first decision', async () => {
    const table = await newStudy(1);
    await table.ask('closeStudy', null);
    const other = newTable({ folder: table.folder, readerName: 'Cy' });
    const opened = await other.ask('openStudy', { path: 'Crossings.understory', readOnly: false });
    expect(opened?.reader.name).toBe('Cy');
    const { place } = await passageOf(other);
    const marked = await other.ask('markNone', { place, ...seen });
    expect(marked).toMatchObject({ reader: opened?.reader, undo: 'mark that no theme applies' });
    const undone = await other.ask('undo', null);
    expect(undone.overview).toMatchObject({
      reader: opened?.reader,
      revision: marked.revision + 2,
    });
  });
});
