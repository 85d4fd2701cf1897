import { beforeEach, describe, expect, test } from 'vitest';
import type { Api, SearchRequest, SearchResult } from '../../../main/api.ts';
import { file, newStudy, seen, type Table } from './table.ts';

const talks = [
  file(
    'A.txt',
    [
      'Interviewer: Which boat do you take?',
      'P1: The small boat, mostly. My sister’s boat is bigger, and the boats at the pier are not ours.',
      'Interviewer: And then?',
      'P1: Then we wait. My sister waits too, on the old pier, at 9 o’clock.',
      '',
    ].join('\n'),
  ),
  file(
    'B.txt',
    [
      'Interviewer: And you?',
      'P2: A boating man I am not. The pier is cold; my brother waits there for a boat.',
      '',
    ].join('\n'),
  ),
];

// A new study for each: sessions are closed after every test.
let table: Table;
const found = (changes: Partial<Api['search']['takes']>): Promise<SearchResult> =>
  table.ask('search', {
    text: 'boat',
    mode: 'words',
    within: 5,
    order: 'place',
    from: 0,
    count: 100,
    ...changes,
  });
const matches = async (text: string, mode: SearchRequest['mode'], within = 5): Promise<string[]> =>
  (await found({ text, mode, within })).shown.map(({ match }) => match);

describe('looking for words', () => {
  beforeEach(async () => {
    table = await newStudy(0);
    await table.ask('addTranscripts', { files: talks });
    // Every answer is a passage of its own.
    await table.ask('changeSettings', {
      settings: { 'text.passageMinimumWords': 5, 'text.passageMaximumWords': 20 },
    });
  });

  test('finds whole words as typed, in what participants say', async () => {
    expect(await matches('boat', 'words')).toEqual(['boat', 'boat', 'boat']);
    expect(await matches('Boat', 'words')).toHaveLength(3);
    expect(await matches('boat*', 'words')).toEqual(['boat', 'boat', 'boats', 'boating', 'boat']);
    expect(await matches('9', 'words')).toEqual(['9']);
    // The interviewer's words are not looked through.
    expect(await matches('which', 'words')).toEqual([]);
  });

  test('finds all forms of a word', async () => {
    const stems = await matches('boat', 'stems');
    expect(stems).toEqual(['boat', 'boat', 'boats', 'boating', 'boat']);
    expect(await matches('waiting', 'stems')).toEqual(['wait', 'waits', 'waits']);
  });

  test('finds phrases, word for word, over an apostrophe and a line', async () => {
    expect(await matches('my sister', 'phrase')).toEqual(['My sister', 'My sister']);
    expect(await matches('sister my', 'phrase')).toEqual([]);
    expect(await matches('old pier', 'phrase')).toEqual(['old pier']);
  });

  test('finds words near each other, in either order, never over two passages', async () => {
    expect(await matches('pier wait', 'near', 5)).toEqual([
      'waits too, on the old pier',
      'pier is cold; my brother waits',
    ]);
    expect(await matches('wait pier', 'near', 4)).toEqual([]);
  });

  test('several words as typed have to be said in one passage', async () => {
    const { lines, shown } = await found({ text: 'boat sister', mode: 'words' });
    expect(lines).toBe(shown.length);
    expect(new Set(shown.map(({ participant }) => participant))).toEqual(new Set(['P1']));
  });

  test('sorts by what stands before or after', async () => {
    const right = (await found({ mode: 'stems', order: 'right' })).shown;
    const next = right.map(({ after }) => /[\p{L}]+/u.exec(after)?.[0].toLowerCase() ?? '');
    expect(next).toEqual([...next].sort());
    const left = (await found({ mode: 'stems', order: 'left' })).shown;
    const last = left.map(({ before }) => /([\p{L}’]+)\W*$/u.exec(before)?.[1].toLowerCase() ?? '');
    expect(last[0]).toBe('a');
    expect(last).toContain('small');
  });

  test('says how much there is, shows it part by part, and names what nobody says', async () => {
    const all = await found({ mode: 'stems' });
    expect(all).toMatchObject({ lines: 5, people: 2, unheard: [] });
    const parts = await Promise.all(
      [0, 2, 4].map((from) => found({ mode: 'stems', from, count: 2 })),
    );
    expect(parts.flatMap(({ shown }) => shown)).toEqual(all.shown);
    expect(await found({ text: 'boat zeppelin' })).toMatchObject({
      lines: 0,
      unheard: ['zeppelin'],
    });
    const search = { text: ' – ', mode: 'words', within: 5, order: 'place' } as const;
    expect(await table.refused('search', { ...search, from: 0, count: 9 })).toBe(
      'nothing to search',
    );
  });

  test('gives a reading list of its passages, under a name that says how', async () => {
    const search = { text: 'wait', mode: 'stems', within: 5, order: 'place' } as const;
    const request = {
      kind: 'keyword in context',
      theme: null,
      transcript: null,
      unreadOnly: false,
      count: 60,
      seed: 1,
      search,
    } as const;
    const list = await table.ask('readingList', request);
    expect(list.name).toBe('keyword in context: “wait” in all forms');
    expect(list.places.length).toBeGreaterThan(1);
    expect(new Set(list.places.map(({ start, transcript }) => `${transcript} ${start}`)).size).toBe(
      list.places.length,
    );
    await table.ask('markNone', { place: list.places[0], ...seen });
    const unread = await table.ask('readingList', { ...request, unreadOnly: true });
    expect(unread.places).toEqual(list.places.slice(1));
    await table.ask('undo', null);
    const { search: sought, ...without } = request;
    expect(sought).toEqual(search);
    expect(await table.refused('readingList', without)).toBe('nothing to search');
  });

  test('follows when a transcript comes and goes', async () => {
    const more = file('C.txt', 'Interviewer: So?\nP3: My boat sank in the harbour last winter.\n');
    await table.ask('addTranscripts', { files: [more] });
    expect(await matches('boat', 'words')).toHaveLength(4);
    await table.ask('undo', null);
    expect(await matches('boat', 'words')).toHaveLength(3);
  });
});
