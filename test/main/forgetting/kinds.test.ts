import { beforeAll, describe, expect, test } from 'vitest';
import type { Edit, FieldNote, Identifier } from '../../../engine/study/index.ts';
import { movedDates } from '../../../main/identifying/standing.ts';
import { rewordingDrafts } from '../../../main/identifying/revising.ts';
import { planSeal, seal } from '../../../main/forgetting/sealing.ts';
import { planWithdrawal, withdraw } from '../../../main/forgetting/withdrawal.ts';
import type { Desk } from '../../../main/desk.ts';
import {
  backupFolderBeside,
  listBackups,
  makeBackup,
  rewriteBackups,
  type BackupPlaces,
} from '../../../main/project/index.ts';
import { verify } from '../../../main/verify.ts';
import {
  context,
  foundIn,
  made,
  now,
  planted,
  plantedStudy,
  readAgain,
  type Planted,
} from './study.ts';

const name = 'Zebedea Quillfeather';

function kept(desk: Desk, id: string, transcript: string | null, words: string): void {
  made(desk, {
    blobs: [Buffer.from(words, 'utf8')],
    edit: ([text]) => ({
      kind: 'fieldNoteKept',
      note: {
        id,
        name: `Note ${id}`,
        transcript,
        source: { fileName: `${id}.txt`, format: 'text', hash: `hash-of-note-${id}` },
        text,
        length: words.length,
      },
    }),
  });
}

function settled(desk: Desk, to: Pick<Identifier, 'id' | 'forms' | 'replacement' | 'putIn'>): void {
  made(desk, {
    kind: 'identifierSettled',
    identifier: to.id,
    from: null,
    to: { kind: 'date', decision: 'stand-in', places: null, ...to },
  });
}

function noteOf(desk: Desk, id: string): FieldNote {
  return desk.study.fieldNotes.get(id)!;
}

/** The second place lies half in words that are replaced afterwards: that edit names it by its order. */
function leftInTwoPlaces(desk: Desk): void {
  const places = ['alone', 'other'].map((transcript) => {
    const { start } = desk.study.transcripts.get(transcript)!.turns[1]!;
    return { transcript, span: { start: start + 2, end: start + 9 } };
  });
  const to: Identifier = {
    ...{ id: 'left', kind: 'other name', forms: ['heron'], decision: 'left' },
    ...{ replacement: null, putIn: [], places },
  };
  made(desk, { kind: 'identifierSettled', identifier: 'left', from: null, to });
  const other = desk.study.transcripts.get('other')!;
  const start = other.turns[1]!.start;
  const rewordings = [{ start, end: start + 4, words: 'So then' }];
  made(desk, ...rewordingDrafts(desk.study, other, desk.text('other'), rewordings));
}

/** Words that nobody else says, in every kind of edit that holds any. */
async function fullStudy(): Promise<Planted> {
  const study = await plantedStudy();
  const { desk } = study;
  kept(desk, 'tied', 'alone', 'She keeps an orrery-one.');
  kept(desk, 'untied', 'alone', `What ${name} said of an almanac.`);
  kept(desk, 'loose', null, `Nothing, and ${name}.`);
  kept(desk, 'shared', 'both', 'zebedea quillfeather laughed.');
  kept(desk, 'gone', null, 'An orrery-two.');
  kept(desk, 'plain', null, 'The room was cold.');
  const described = (id: string, transcript: string | null): Edit => {
    const from = { name: `Note ${id}`, transcript: noteOf(desk, id).transcript };
    return { kind: 'fieldNoteDescribed', note: id, from, to: { ...from, transcript } };
  };
  made(desk, described('untied', null), described('gone', 'alone'));
  made(desk, { kind: 'fieldNoteLetGo', note: noteOf(desk, 'gone') });
  for (const id of ['alone', 'both', 'other']) {
    const { source, details } = desk.study.transcripts.get(id)!;
    const from = { fileName: source.fileName, details, facts: null };
    made(desk, {
      kind: 'transcriptDescribed',
      transcript: id,
      from,
      to: {
        fileName: id === 'alone' ? 'orrery-three.txt' : `${name}.txt`,
        details: [
          { name: 'With', value: { alone: 'orrery-four', both: planted.label }[id] ?? name },
        ],
        facts: { interviewedBy: id === 'alone' ? 'orrery-five' : name },
      },
    });
  }
  settled(desk, {
    id: 'village',
    forms: [planted.word],
    replacement: 'musician',
    putIn: ['alone'],
  });
  settled(desk, { id: 'person', forms: [name], replacement: 'Anna', putIn: ['alone', 'other'] });
  settled(desk, {
    id: 'dates',
    forms: ['-271828'],
    replacement: movedDates,
    putIn: ['alone', 'other'],
  });
  leftInTwoPlaces(desk);
  made(
    desk,
    { kind: 'guideRevised', from: [], to: [{ id: 'q', text: `What of ${name}?` }] },
    { kind: 'turnsTagged', transcript: 'alone', changes: [{ turn: 0, from: null, to: 'q' }] },
    {
      kind: 'drawMade',
      draw: {
        id: 'draw',
        kind: 'random draw',
        name: `Without ${name}`,
        seed: 1,
        count: 2,
        unreadOnly: false,
        places: ['alone', 'other'].map((transcript) => {
          const { start, end } = desk.study.transcripts.get(transcript)!.turns[1]!;
          return { transcript, span: { start, end } };
        }),
        reader: 'reader-ada',
        at: now(),
        scored: null,
      },
    },
    { kind: 'fitRenamed', fit: desk.study.fit!, from: null, to: `Before ${name}` },
    {
      kind: 'settingsChanged',
      changes: [{ key: 'text.stopWords', from: null, to: [name] }],
    },
  );
  made(desk, { kind: 'drawRemoved', draw: desk.study.draws.get('draw')! });
  made(desk, {
    kind: 'reportExported',
    report: {
      what: 'docx',
      fileName: `${name}.docx`,
      transcripts: ['alone'],
      participants: ['person-z'],
      at: now(),
      reader: 'reader-ada',
    },
  });
  return study;
}

/** The same in what is decoded: every edit and every blob that is left. */
function foundDecoded({ file }: Pick<Planted, 'file'>, words: readonly string[]): string[] {
  const all = [
    ...[...file.edits()].map(({ json }) => JSON.stringify(json)),
    ...file.records.flatMap(({ kind, removed, sequence }) =>
      kind === 'blob' && !removed ? [Buffer.from(file.readBlob(sequence)).toString('utf8')] : [],
    ),
  ];
  return words.filter((word) =>
    all.some((text) => text.toLowerCase().includes(word.toLowerCase())),
  );
}

describe('after a withdrawal from a study with edits of every kind', () => {
  const traces = [
    ...['orrery', 'Quillfeather', 'hash-of-note-tied', 'hash-of-note-loose', 'hash-of-other'],
    ...Object.values(planted),
  ];
  let study: Planted;
  let backups: BackupPlaces;
  beforeAll(async () => {
    study = await fullStudy();
    expect(foundDecoded(study, traces)).toEqual(traces);
    backups = { folder: backupFolderBeside(study.file.path), keep: 3, earlier: [] };
    expect(makeBackup(study.file, backups)).toMatchObject({ ok: true });
    const request = { participant: 'person-z', names: [name] };
    const plan = planWithdrawal(study.desk, request);
    const places = plan.ok ? plan.value.mentions.map(({ where }) => where) : [];
    expect(places).toEqual(
      expect.arrayContaining([
        ...['field note', 'interviewer', 'question of the guide', 'name of a fit'],
        ...['file name', 'file name of a report', 'setting', 'stand-in'],
      ]),
    );
    const done = await withdraw(study.file, study.desk, context, request, { refit: false });
    expect(done).toMatchObject({ ok: true });
  });

  test('nothing of the person is in raw bytes, edits or blobs', () => {
    expect(foundIn(study.file.path, traces)).toEqual([]);
    expect(foundDecoded(study, traces)).toEqual([]);
  });

  test('nor in a backup, once backups are made anew', () => {
    const [before] = listBackups(study.file, backups);
    expect(foundIn(before!.path, traces)).toEqual(traces);
    expect(rewriteBackups(study.file, backups)).toMatchObject({ failed: null, left: [] });
    const after = listBackups(study.file, backups);
    expect(after.map(({ path }) => foundIn(path, traces))).toEqual([[]]);
  });

  test('field notes on their transcripts went, and others lost the name alone', async () => {
    const desk = await readAgain(study.file);
    expect([...desk.study.fieldNotes.keys()].sort()).toEqual([
      'loose',
      'plain',
      'shared',
      'untied',
    ]);
    expect(desk.noteText('loose')).toBe('Nothing, and [withdrawn].');
    expect(desk.noteText('shared')).toBe('[withdrawn] laughed.');
    expect(desk.noteText('plain')).toBe('The room was cold.');
    expect(noteOf(desk, 'plain').source.hash).toBe('hash-of-note-plain');
    expect(noteOf(desk, 'shared').transcript).toBe('both');
  });

  test('what was settled stays settled for the others', async () => {
    const { study: left } = await readAgain(study.file);
    expect(left.identifiers.get('village')).toMatchObject({ forms: [], replacement: 'musician' });
    expect(left.identifiers.get('dates')).toMatchObject({ forms: ['-271828'], putIn: ['other'] });
    const other = left.transcripts.get('other')!.turns[1]!;
    expect(left.identifiers.get('left')?.places).toEqual([
      { transcript: 'alone', span: { start: 0, end: 1 } },
      { transcript: 'other', span: { start: other.start, end: other.start + 12 } },
    ]);
    expect(left.guide).toEqual([{ id: 'q', text: 'What of [withdrawn]?' }]);
    expect(await verify(study.file)).toMatchObject({ outcome: 'holds', faults: [] });
  });
});

describe('after a seal of a study with edits of every kind', () => {
  const traces = ['Quillfeather', '-271828', 'hash-of-note-loose', 'hash-of-other', 'orrery-two'];
  let study: Planted;
  beforeAll(async () => {
    study = await fullStudy();
    expect(foundDecoded(study, traces)).toEqual(traces);
    const plan = planSeal(study.file, study.desk);
    // The number of days stands for nothing that could be put in a text.
    expect(plan.ok && plan.value.names.map((each) => each.name)).toEqual([planted.word, name]);
    const done = await seal(study.file, study.desk, context, { names: [name] }, { refit: false });
    expect(done).toMatchObject({ ok: true });
  });

  test('no original that was chosen is in raw bytes, edits or blobs', () => {
    expect(foundIn(study.file.path, traces)).toEqual([]);
    expect(foundDecoded(study, traces)).toEqual([]);
  });

  test('field notes have the stand-in, and it is known whose dates were moved', async () => {
    const desk = await readAgain(study.file);
    expect(desk.noteText('loose')).toBe('Nothing, and Anna.');
    expect(noteOf(desk, 'tied').transcript).toBe('alone');
    expect(desk.study.identifiers.get('dates')).toMatchObject({
      forms: [],
      replacement: movedDates,
      putIn: ['alone', 'other'],
    });
    expect(await verify(study.file)).toMatchObject({ outcome: 'holds', faults: [] });
  });
});
