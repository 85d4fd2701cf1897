import * as fs from 'node:fs';
import * as path from 'node:path';
import { describe, expect, test } from 'vitest';
import { file, interviews, newFolder, newStudy, newTable, transcriptsOf } from './table.ts';

describe('adding transcripts', () => {
  test('takes bytes, skips what cannot be read with a sentence each, and is one decision', async () => {
    const table = await newStudy(0);
    const outcome = await table.ask('addTranscripts', {
      files: [
        ...interviews(2),
        file('empty.txt', ''),
        file('copy of P1.txt', new TextDecoder().decode(interviews(1)[0].bytes)),
        {
          name: 'photo.png',
          bytes: Uint8Array.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]),
        },
        file('who.csv', 'participant,village\nP1,Skell\nP7,Brae\n'),
      ],
    });
    expect(outcome.gathered).toEqual(['P1', 'P2']);
    expect(outcome.skipped.map(({ file: name }) => name)).toEqual([
      'empty.txt',
      'copy of P1.txt',
      'photo.png',
    ]);
    for (const { sentence } of outcome.skipped) expect(sentence).toMatch(/^[A-Z].*\.$/u);
    expect(outcome.attributes).toEqual({ described: 1, unmatched: ['P7'] });
    const { undo } = (await table.ask('overview', null))!;
    expect(undo).toBe('adding of 2 transcripts');
    expect((await table.ask('undo', null)).overview.transcripts).toBe(0);
  });

  test('can be asked for twice at the same time without taking anything in twice', async () => {
    const table = await newStudy(0);
    const [one, two] = await Promise.all([
      table.ask('addTranscripts', { files: interviews(2) }),
      table.ask('addTranscripts', { files: interviews(3) }),
    ]);
    expect([one.gathered, two.gathered]).toEqual([['P1', 'P2'], ['P3']]);
    expect(await table.refused('addTranscripts', { files: [] })).toBe('no files');
  });

  test('takes files and folders that the system’s dialog gives', async () => {
    const folder = newFolder();
    for (const { name, bytes } of interviews(2)) fs.writeFileSync(path.join(folder, name), bytes);
    const chosen = [folder, path.join(folder, 'not there.txt')];
    const table = newTable({
      dialogs: {
        chooseStudy: async () => null,
        placeStudy: async () => path.join(folder, 'a.understory'),
        chooseTranscripts: async () => chosen,
        placeFile: async () => null,
      },
    });
    await table.ask('startStudy', { name: 'A', path: path.join(newFolder(), 'a') });
    const outcome = await table.ask('chooseTranscripts', null);
    expect(outcome?.gathered).toEqual(['P1', 'P2']);
    expect(outcome?.skipped).toHaveLength(1);
  });

  test('a label that asks in every transcript so far asks in the next one', async () => {
    const table = await newStudy(0);
    const talk = 'Kim: Go on.\nLee: The ferry was late and we all went home again in the rain.\n';
    await table.ask('addTranscripts', { files: [file('1.txt', talk)] });
    const [{ id }] = (await table.ask('gatherView', null)).transcripts;
    const assign = { transcript: id, label: 'Kim', participant: null, everywhere: false } as const;
    await table.ask('assignSpeaker', { ...assign, role: 'interviewer' });
    await table.ask('addTranscripts', { files: [file('2.txt', `${talk}Kim: Thank you.\n`)] });
    const [, second] = (await table.ask('gatherView', null)).transcripts;
    expect(second.speakers.map(({ role }) => role)).toEqual(['interviewer', 'participant']);
  });
});

describe('what was understood', () => {
  test('is said of each transcript: who speaks how much, and what to look at', async () => {
    const table = await newStudy(0);
    await table.ask('addTranscripts', {
      files: [
        file('alone.txt', 'Ann: I walked down to the pier.\nAnn: It was cold.\n'),
        file(
          'slip.txt',
          'Interviewer: And then?\nMaria: It rained.\nMaira: All day.\nMaria: Yes.\n',
        ),
        file('codes.txt', 'Interviewer: And then?\nP07: It rained.\nP08: All day long.\n'),
      ],
    });
    const { transcripts, participants } = await table.ask('gatherView', null);
    expect(transcripts.map(({ name, needsLook }) => [name, needsLook])).toEqual([
      ['alone', ['Only one speaker was found']],
      ['codes', []],
      ['slip', ['“Maira” may be a slip for “Maria”']],
    ]);
    const slip = transcripts[2];
    expect(slip.speakers.map(({ label, turns, words }) => [label, turns, words])).toEqual([
      ['Interviewer', 1, 2],
      ['Maria', 2, 3],
      ['Maira', 1, 2],
    ]);
    expect(slip.words).toBe(5);
    expect(participants.map(({ name, words }) => [name, words])).toEqual([
      ['Ann', 9],
      ['Maira', 2],
      ['Maria', 3],
      ['P07', 2],
      ['P08', 3],
    ]);
  });

  test('the slip is mended by giving both labels to one person', async () => {
    const table = await newStudy(0);
    await table.ask('addTranscripts', {
      files: [
        file('slip.txt', 'Interviewer: So?\nMaria: It rained.\nMaira: All day.\nMaria: Yes.\n'),
      ],
    });
    const [{ id }] = (await table.ask('gatherView', null)).transcripts;
    await table.ask('assignSpeaker', {
      transcript: id,
      label: 'Maira',
      role: 'participant',
      participant: 'maria',
      everywhere: false,
    });
    const { participants } = await table.ask('gatherView', null);
    expect(participants.map(({ name, words }) => [name, words])).toEqual([['Maria', 5]]);
  });

  test('nothing is counted of a transcript in which nobody is a participant', async () => {
    const table = await newStudy(1);
    const [{ id, words }] = (await table.ask('gatherView', null)).transcripts;
    expect(words).toBeGreaterThan(100);
    const assign = { transcript: id, label: 'P1', participant: null, everywhere: false } as const;
    await table.ask('assignSpeaker', { ...assign, role: 'other' });
    const { transcripts, participants } = await table.ask('gatherView', null);
    expect(transcripts[0].words).toBe(0);
    expect(transcripts[0].needsLook[0]).toContain('Nobody');
    expect(participants).toEqual([]);
    expect(await table.ask('counted', null)).toEqual({
      passages: 0,
      words: 0,
      forms: 0,
      tooShort: 0,
    });
    await table.ask('assignSpeaker', { ...assign, role: 'participant' });
    expect((await table.ask('gatherView', null)).participants[0].name).toBe('P1');
  });

  test('what the model would see follows the settings', async () => {
    const table = await newStudy(2);
    const before = (await table.ask('counted', null))!;
    await table.ask('changeSettings', {
      settings: { 'text.extraStopWords': ['ferry', 'Teacher'] },
    });
    const after = (await table.ask('counted', null))!;
    expect(after.forms).toBe(before.forms - 2);
    expect(after.passages).toBe(before.passages);
    expect(after.words).toBeLessThan(before.words);
  });
});

describe('decisions in Gather that cannot be made', () => {
  test('are refused in sentences', async () => {
    const table = await newStudy(2);
    const [{ id }] = (await table.ask('gatherView', null)).transcripts;
    const participant = (await table.ask('gatherView', null)).participants[0].id;
    expect(await table.refused('renameTranscript', { transcript: id, name: 'P2' })).toBe(
      'name taken',
    );
    expect(await table.refused('renameTranscript', { transcript: id, name: ' ' })).toBe(
      'empty name',
    );
    expect(await table.refused('renameTranscript', { transcript: 'x', name: 'A' })).toBe(
      'unknown transcript',
    );
    expect(await table.refused('removeTranscript', { transcript: 'x' })).toBe('unknown transcript');
    expect(await table.refused('transcriptView', { transcript: 'x' })).toBe('unknown transcript');
    const assign = { label: 'P1', participant: '', everywhere: true } as const;
    expect(
      await table.refused('assignSpeaker', { ...assign, transcript: id, role: 'participant' }),
    ).toBe('empty name');
    expect(
      await table.refused('assignSpeaker', { ...assign, transcript: 'x', role: 'other' }),
    ).toBe('unknown transcript');
    expect(
      await table.refused('assignSpeaker', {
        ...assign,
        transcript: id,
        label: 'Z',
        role: 'other',
      }),
    ).toBe('no speaker');
    const describe = { name: 'P2', attributes: {} };
    expect(await table.refused('describeParticipant', { participant, ...describe })).toBe(
      'name taken',
    );
    expect(await table.refused('describeParticipant', { participant: 'x', ...describe })).toBe(
      'unknown participant',
    );
    expect(await table.refused('changeSettings', { settings: { themes: 0 } })).toBe('setting');
    expect(await table.refused('changeSettings', { settings: { colour: 'red' } })).toBe('setting');
    expect(
      await table.refused('changeSettings', { settings: { 'text.passageMinimumWords': 60 } }),
    ).toBe('passage limits');
    expect(await table.refused('addAttributes', file('a.csv', 'name,age\nP1,3\n'))).toBe(
      'no attribute table',
    );
    expect(await table.refused('addAttributes', file('a.csv', ''))).toBe('empty file');
  });

  test('what is so already is let be', async () => {
    const table = await newStudy(1);
    const before = (await table.ask('overview', null))!;
    const { transcripts, participants } = await table.ask('gatherView', null);
    const [{ id, name }] = transcripts;
    await table.ask('renameTranscript', { transcript: id, name: ` ${name} ` });
    await table.ask('renameStudy', { name: 'Crossings' });
    await table.ask('changeSettings', { settings: { themes: 2, 'text.stemming': false } });
    await table.ask('describeParticipant', {
      participant: participants[0].id,
      name: 'P1',
      attributes: { ' ': 'a', b: ' ' },
    });
    await table.ask('assignSpeaker', {
      transcript: id,
      label: 'P1',
      role: 'participant',
      participant: 'p1',
      everywhere: true,
    });
    expect((await table.ask('overview', null))!.revision).toBe(before.revision);
  });

  test('a transcript that carries decisions stays until they are removed', async () => {
    const table = await newStudy(2);
    const { id } = (await transcriptsOf(table)).get('P1')!;
    await table.ask('writeMemo', { on: { kind: 'transcript', transcript: id }, text: 'Keep' });
    expect(await table.refused('removeTranscript', { transcript: id })).toBe('memos remain');
    await table.ask('undo', null);
    const removed = await table.ask('removeTranscript', { transcript: id });
    expect(removed.transcripts).toBe(1);
    expect((await table.ask('gatherView', null)).participants.map(({ name }) => name)).toEqual([
      'P2',
    ]);
  });
});
