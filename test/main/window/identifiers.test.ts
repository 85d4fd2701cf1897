import { Buffer } from 'node:buffer';
import { describe, expect, it } from 'vitest';
import type { IdentifierRow } from '../../../main/api.ts';
import { newTable, type Table } from './table.ts';

const first = `Interviewer: Who helped you, Maren?
Maren: My sister Ruth did. Ruth and her friend Tordis came over on the Ruth, the boat I mean. You can ring her on 01632 960 417, or write to ruth@island.example.
Interviewer: And then?
Maren: Then on 3 May 1987 we moved to Skarvoy. RUTH was furious, of course, and so was Tordis. It is a small place and everybody knows everybody.`;
const second = `Interviewer: Do you know Ruth?
Tordis: Ruth is my oldest friend. I moved here on 9 June 2001.`;

function file(name: string, text: string) {
  return { name, bytes: new Uint8Array(Buffer.from(text, 'utf8')) };
}

async function started(...files: ReturnType<typeof file>[]): Promise<Table> {
  const table = newTable();
  await table.ask('startStudy', { name: 'Island', path: null });
  await table.ask('addTranscripts', { files });
  return table;
}

async function open(table: Table): Promise<Map<string, IdentifierRow>> {
  const { open: rows } = await table.ask('identifiers', null);
  return new Map(rows.map((row) => [row.key, row]));
}

async function textOf(table: Table, name: string): Promise<string> {
  const { transcripts } = await table.ask('gatherView', null);
  const { id } = transcripts.find((one) => one.name === name)!;
  return (await table.ask('transcriptView', { transcript: id })).text;
}

async function standIn(table: Table, key: string, replacement: string, elsewhere = true) {
  const settle = [{ key, decision: 'stand-in' as const, replacement, places: null }];
  return table.ask('settleIdentifiers', { settle, elsewhere });
}

describe('identifiers in the window', () => {
  it('are found over the study, with a stand-in offered that nobody in it is called', async () => {
    const table = await started(file('one.txt', first), file('two.txt', second));
    const rows = await open(table);
    expect(rows.get('person ruth')).toMatchObject({ kind: 'person', open: 5, transcripts: 2 });
    expect(rows.get('other name ruth')).toMatchObject({ open: 1 });
    expect(rows.get('telephone 01632960417')?.offered).toEqual({
      decision: 'generalised',
      replacement: '[telephone number]',
    });
    const offered = [...rows.values()].map(({ offered: { replacement } }) => replacement);
    expect(offered).not.toContain('Ruth');
    expect(await open(table)).toEqual(rows);
  });

  it('are replaced everywhere at once, speakers and participants with them, and back by one undo', async () => {
    const table = await started(file('one.txt', first), file('two.txt', second));
    await table.ask('writeMemo', { on: { kind: 'study' }, text: 'Ask Tordis about the boat.' });
    const before = await textOf(table, 'two');
    await table.ask('settleIdentifiers', {
      settle: [
        { key: 'person ruth', decision: 'stand-in', replacement: 'Anna', places: null },
        { key: 'person tordis', decision: 'stand-in', replacement: 'Berit', places: null },
      ],
      elsewhere: true,
    });
    expect(await textOf(table, 'two')).toBe(
      'Interviewer: Do you know Anna?\nBerit: Anna is my oldest friend. I moved here on 9 June 2001.',
    );
    expect(await textOf(table, 'one')).toContain('ANNA was furious');
    expect(await textOf(table, 'one')).toContain('on the Ruth, the boat');
    const view = await table.ask('gatherView', null);
    expect(view.participants.map(({ name }) => name)).toContain('Berit');
    expect(view.memos.map(({ text }) => text)).toEqual(['Ask Berit about the boat.']);
    const after = await open(table);
    expect([...after.keys()].filter((key) => /ruth|tordis|anna|berit/u.test(key))).toEqual([
      'other name ruth',
      'e-mail ruth@island.example',
    ]);
    await table.ask('undo', null);
    expect(await textOf(table, 'two')).toBe(before);
    expect((await open(table)).get('person ruth')?.open).toBe(5);
  });

  it('are offered the same stand-in in a transcript that comes later', async () => {
    const table = await started(file('one.txt', first));
    await standIn(table, 'person ruth', 'Anna');
    await table.ask('addTranscripts', { files: [file('two.txt', second)] });
    const row = (await open(table)).get('person ruth')!;
    expect(row).toMatchObject({
      open: 2,
      offered: { decision: 'stand-in', replacement: 'Anna' },
      before: ['Anna'],
    });
  });

  it('say so where somebody is really called what another’s stand-in is', async () => {
    const table = await started(file('one.txt', first));
    await standIn(table, 'person ruth', 'Anna');
    const later = 'Interviewer: And you?\nP09: My aunt Anna lives here, and Anna knows.';
    await table.ask('addTranscripts', { files: [file('three.txt', later)] });
    const row = (await open(table)).get('person anna')!;
    expect(row.open).toBe(2);
    expect(row.notes).toEqual(['Also a stand-in for somebody else: make sure who is meant.']);
  });

  it('can be settled place by place: two people of one name', async () => {
    const table = await started(file('one.txt', first), file('two.txt', second));
    const { places } = await table.ask('identifierPlaces', { key: 'person ruth' });
    const here = places.filter(({ transcriptName }) => transcriptName === 'two');
    await table.ask('settleIdentifiers', {
      settle: [
        {
          key: 'person ruth',
          decision: 'stand-in',
          replacement: 'Cora',
          places: here.map(({ transcript, start, end }) => ({ transcript, start, end })),
        },
      ],
      elsewhere: false,
    });
    expect(await textOf(table, 'two')).toContain('Cora is my oldest friend');
    await standIn(table, 'person ruth', 'Anna', false);
    expect(await textOf(table, 'one')).toContain('My sister Anna did.');
  });

  it('can be left, and looked at again', async () => {
    const table = await started(file('one.txt', first));
    const settle = [
      { key: 'place skarvoy', decision: 'left' as const, replacement: null, places: null },
    ];
    await table.ask('settleIdentifiers', { settle, elsewhere: false });
    expect((await open(table)).has('place skarvoy')).toBe(false);
    const { settled } = await table.ask('identifiers', null);
    expect(settled).toMatchObject([{ decision: 'left', canReopen: true }]);
    await table.ask('reopenIdentifier', { identifier: settled[0]!.id });
    expect((await open(table)).has('place skarvoy')).toBe(true);
  });

  it('move dates by one number of days, the same in later transcripts', async () => {
    const table = await started(file('one.txt', first));
    await table.ask('moveDates', null);
    const one = await textOf(table, 'one');
    expect(one).not.toContain('3 May 1987');
    await table.ask('addTranscripts', { files: [file('two.txt', second)] });
    await table.ask('moveDates', null);
    const dayOf = (text: string): number =>
      Date.parse(`${/\d{1,2} [A-Z][a-z]+ \d{4}/u.exec(text)![0]} UTC`) / 86_400_000;
    const moved = dayOf(one) - dayOf('3 May 1987');
    expect(Math.abs(moved)).toBeGreaterThanOrEqual(28);
    expect(dayOf(await textOf(table, 'two')) - dayOf('9 June 2001')).toBe(moved);
    expect(await table.refused('moveDates', null)).toBe('no dates to move');
  });

  it('keep codings on their words', async () => {
    const table = await started(file('one.txt', first));
    const { theme } = await table.ask('addTheme', { name: 'Help', byHand: true, seeds: [] });
    const { transcripts } = await table.ask('gatherView', null);
    const text = await textOf(table, 'one');
    const start = text.indexOf('RUTH was furious');
    const place = { transcript: transcripts[0]!.id, start, end: start + 16 };
    await table.ask('codeByHand', {
      place,
      theme,
      memo: '',
      drawnBy: 'in order',
      seenSuggestion: false,
    });
    await standIn(table, 'person ruth', 'Annamaria');
    const view = await table.ask('transcriptView', { transcript: place.transcript });
    const { span } = view.passages.flatMap(({ codings }) => codings)[0]!;
    expect(view.text.slice(span.start, span.end)).toBe('ANNAMARIA was furious');
  });

  it('are kept in a key file that opens with its password alone', async () => {
    const table = await started(file('one.txt', first));
    expect(await table.refused('identifierKey', { password: 'long enough' })).toBe('no stand-ins');
    await standIn(table, 'person ruth', 'Anna');
    expect(await table.refused('identifierKey', { password: 'short' })).toBe('key password');
    const { bytes } = await table.ask('identifierKey', { password: 'long enough' });
    expect(Buffer.from(bytes).toString('utf8')).not.toMatch(/Ruth|Anna/u);

    const other = await started(file('two.txt', second));
    const wrong = { name: 'key.json', bytes, password: 'wrong enough' };
    expect(await other.refused('readIdentifierKey', wrong)).toBe('key stays closed');
    const torn = { ...wrong, bytes: bytes.slice(9) };
    expect(await other.refused('readIdentifierKey', torn)).toBe('no key file');
    await other.ask('readIdentifierKey', { ...wrong, password: 'long enough' });
    expect((await open(other)).get('person ruth')?.before).toEqual(['Anna']);
  });

  it('read well behind an article', async () => {
    const talk = 'Interviewer: Where?\nP01: I do the books for the Skarvoy Fishing Trust, I do.';
    const table = await started(file('four.txt', talk));
    const key = 'organisation skarvoy fishing trust';
    const settle = [
      { key, decision: 'generalised' as const, replacement: 'an organisation', places: null },
    ];
    await table.ask('settleIdentifiers', { settle, elsewhere: false });
    expect(await textOf(table, 'four')).toContain('books for the organisation, I do');
    expect(await table.ask('identifierPlaces', { key })).toEqual({ places: [], elsewhere: [] });
  });

  it('refuse a stand-in of nothing, and what is no longer there', async () => {
    const table = await started(file('one.txt', first));
    const one = { key: 'person ruth', decision: 'stand-in' as const, places: null };
    const empty = { settle: [{ ...one, replacement: ' ' }], elsewhere: false };
    expect(await table.refused('settleIdentifiers', empty)).toBe('no replacement');
    const gone = { settle: [{ ...one, key: 'person x', replacement: 'A' }], elsewhere: false };
    expect(await table.refused('settleIdentifiers', gone)).toBe('identifier gone');
  });
});
