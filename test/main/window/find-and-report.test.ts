import * as fs from 'node:fs';
import * as path from 'node:path';
import { describe, expect, test } from 'vitest';
import type { Api } from '../../../main/api.ts';
import { file, newFolder, newStudy, passageOf, seen } from './table.ts';

describe('finding', () => {
  const talk = [
    'Interviewer: Were there boats?',
    'P1: We don’t miss the boat. The boating club has two boats; a boatman too, sometimes.',
    'Interviewer: What about the hospital, then, and getting there?',
    'P1: Half past two at the hospital, no boat. Grand service, that.',
    'Interviewer: Does anybody else say so too?',
    'P2: İstanbul has a BOAT for everything, and my mother’s café is open.',
    '',
  ].join('\n');

  async function found(text: string) {
    const table = await newStudy(0);
    await table.ask('addTranscripts', { files: [file('harbour.txt', talk)] });
    await table.ask('addTheme', { name: 'Missing the boat', byHand: true, seeds: [] });
    return table.ask('find', { text });
  }

  test('goes by stems, over capitals and signs, and shows what was found', async () => {
    const { passages } = await found('boats');
    expect(passages.map(({ match }) => match.toLowerCase())).toEqual(['boat', 'boat', 'boat']);
    expect(passages[1]).toMatchObject({
      transcriptName: 'harbour',
      after: '. Grand service, that.',
    });
  });

  test('finds the beginning of a word that is still being typed', async () => {
    expect((await found('hosp')).passages.map(({ match }) => match)).toEqual(['hospital']);
    expect((await found('grand serv')).passages.map(({ match }) => match)).toEqual([
      'Grand service',
    ]);
  });

  test('looks for all words typed, as a phrase first', async () => {
    const { passages } = await found('no boat');
    expect(passages.map(({ match }) => match)).toEqual(['no boat']);
    expect((await found('service boat')).passages).toHaveLength(1);
    expect((await found('boat submarine')).passages).toEqual([]);
  });

  test('knows straight and curved apostrophes as the same', async () => {
    expect((await found("don't")).passages.map(({ match }) => match)).toEqual(['don’t']);
    expect((await found('mother’s')).passages).toHaveLength(1);
    expect((await found('cafe')).passages).toEqual([]);
    expect((await found('café')).passages).toHaveLength(1);
  });

  test('finds themes and transcripts by their names, and nothing for nothing', async () => {
    const table = await found('boat');
    expect(table.themes.map(({ label }) => label)).toEqual(['Missing the boat']);
    expect((await found('harb')).transcripts.map(({ name }) => name)).toEqual(['harbour']);
    expect(await found('  ')).toEqual({ themes: [], words: [], transcripts: [], passages: [] });
    expect((await found('?')).passages).toHaveLength(0);
  });

  test('gives counted words by how often they are said, and at most fifty passages', async () => {
    const table = await newStudy(8, { fitted: true });
    const { words, passages } = await table.ask('find', { text: 'te' });
    expect(words.map(({ form }) => form)).toContain('teacher');
    expect(passages).toEqual([]);
    const all = await table.ask('find', { text: 'the' });
    expect(all.passages).toHaveLength(50);
  });
});

const request: Api['reportPreview']['takes'] = {
  standings: ['confirmed', 'by hand'],
  themes: null,
  guard: true,
};

describe('reporting', () => {
  async function decided() {
    const table = await newStudy(3, { fitted: true });
    const { theme } = await table.ask('addTheme', { name: '=Shame', byHand: true, seeds: [] });
    const one = await passageOf(table, 'P1', 0);
    const two = await passageOf(table, 'P2', 0);
    const suggested = one.view.suggestions[0].theme;
    await table.ask('confirm', { place: one.place, theme: suggested, memo: 'Look', ...seen });
    await table.ask('codeByHand', { place: two.place, theme, memo: '', ...seen });
    await table.ask('reject', {
      place: two.place,
      theme: two.view.suggestions[0].theme,
      memo: '',
      ...seen,
    });
    return { table, theme, suggested };
  }

  test('shows what is ticked before it is saved, and says its filter', async () => {
    const { table, theme, suggested } = await decided();
    const preview = await table.ask('reportPreview', request);
    expect(preview).toMatchObject({ count: 2, people: 2 });
    expect(preview.filter).toContain('confirmed, by hand');
    expect(preview.themes.find(({ id }) => id === theme)).toMatchObject({ count: 1, people: 1 });
    expect(preview.excerpts).toHaveLength(2);
    expect(preview.excerpts[0].question).toMatch(/\?$/u);
    const only = await table.ask('reportPreview', { ...request, themes: [suggested] });
    expect(only).toMatchObject({ count: 1, people: 1 });
    expect(only.filter).toContain('themes: ');
    // What can be ticked does not depend on what is ticked.
    expect(only.themes).toEqual(preview.themes);
    const none = await table.ask('reportPreview', { ...request, standings: [] });
    expect(none).toMatchObject({ count: 0, excerpts: [] });
    const unread = await table.ask('reportPreview', {
      ...request,
      standings: ['suggested', 'rejected'],
    });
    expect(unread.count).toBeGreaterThan(10);
    expect(unread.cautions.length).toBeGreaterThan(preview.cautions.length);
    expect(await table.refused('reportPreview', { ...request, themes: ['x'] })).toBe(
      'unknown theme',
    );
  });

  test('warns where attributes may say who somebody is', async () => {
    const { table } = await decided();
    const before = await table.ask('reportPreview', request);
    await table.ask('addAttributes', file('a.csv', 'participant,village\nP1,Skell\nP2,Brae\n'));
    const after = await table.ask('reportPreview', request);
    expect(after.cautions.length).toBe(before.cautions.length + 1);
  });

  test('gives every format as a named file', async () => {
    const { table, suggested } = await decided();
    const text = async (format: Api['report']['takes']['format'], more = {}) => {
      const { fileName, bytes } = await table.ask('report', { ...request, ...more, format });
      return [fileName, Buffer.from(bytes).toString('utf8')];
    };
    const [csvName, csv] = await text('csv');
    expect(csvName).toBe('Crossings excerpts.csv');
    expect(csv.split('\r\n')).toHaveLength(4);
    expect(csv).toContain("'=Shame");
    expect((await text('csv', { guard: false }))[1]).not.toContain("'=Shame");
    expect((await text('csv', { themes: [suggested] }))[1].split('\r\n')).toHaveLength(3);
    const [, json] = await text('json');
    expect(JSON.parse(json).excerpts).toHaveLength(2);
    expect((await text('html'))[1]).toContain('<!doctype html>');
    const [docxName, docx] = await text('docx');
    expect([docxName, docx.slice(0, 2)]).toEqual(['Crossings excerpts.docx', 'PK']);
    const [themesName, themes] = await text('themes csv');
    expect(themesName).toBe('Crossings themes.csv');
    expect(themes).toContain('theme_id,theme,share');
    expect((await text('methods'))[1]).toContain('Blei, Ng & Jordan 2003');
  });

  test('has no methods to tell before the first fit', async () => {
    const table = await newStudy(1);
    expect(await table.refused('report', { ...request, format: 'methods' })).toBe('no fit');
    expect((await table.ask('report', { ...request, format: 'csv' })).bytes.length).toBeGreaterThan(
      0,
    );
  });

  test('saves where the system’s dialog says, or says why not', async () => {
    const folder = newFolder();
    let to: string | null = path.join(folder, 'a.csv');
    const table = await newStudy(0, {
      dialogs: {
        chooseStudy: async () => null,
        placeStudy: async () => path.join(folder, 's'),
        chooseTranscripts: async () => null,
        placeFile: async () => to,
      },
    });
    const named = { fileName: 'a.csv', bytes: Uint8Array.from([1, 2, 3]) };
    expect(await table.ask('saveFile', named)).toBe(to);
    expect([...fs.readFileSync(to)]).toEqual([1, 2, 3]);
    // A file of the same name gives way: the dialog has asked.
    await table.ask('saveFile', { ...named, bytes: Uint8Array.from([4]) });
    expect([...fs.readFileSync(to)]).toEqual([4]);
    to = path.join(folder, 'not there', 'a.csv');
    expect(await table.refused('saveFile', named)).toBe('not found');
    expect(fs.readdirSync(folder).filter((name) => name.startsWith('a.'))).toEqual(['a.csv']);
    to = null;
    expect(await table.ask('saveFile', named)).toBeNull();
    expect(await (await newStudy(0)).refused('saveFile', named)).toBe('no dialog to save');
  });
});
