import { beforeAll, describe, expect, test } from 'vitest';
import { planWithdrawal, withdraw } from '../../../main/forgetting/withdrawal.ts';
import { verify } from '../../../main/verify.ts';
import {
  context,
  deskOn,
  foundIn,
  planted,
  plantedStudy,
  readAgain,
  type Planted,
} from './study.ts';

const request = { participant: 'person-z', names: ['Zebedea Quillfeather', 'x'] };
const traces = [...Object.values(planted), 'Quillfeather', 'xylophon', 'hash-of-alone'];

describe('before a withdrawal a person is told', () => {
  let study: Planted;
  beforeAll(async () => {
    study = await plantedStudy();
  });

  test('what goes', () => {
    const plan = planWithdrawal(study.desk, request);
    expect(plan).toMatchObject({
      ok: true,
      value: {
        participant: { name: planted.name },
        transcripts: ['alone'],
        shared: ['both'],
        codings: 2,
        memos: 1,
        fits: 1,
        exported: [{ fileName: 'Planted excerpts.docx' }],
        // A single letter stands everywhere.
        names: ['Zebedea Quillfeather'],
      },
    });
  });

  test('where else the names stand that were given', () => {
    const plan = planWithdrawal(study.desk, request);
    const mentions = plan.ok ? plan.value.mentions : [];
    expect(mentions).toEqual([
      { where: 'transcript', on: 'other', count: 8 },
      { where: 'name of a theme', on: 'Silence of Zebedea Quillfeather', count: 1 },
      { where: 'codebook entry', on: 'Silence of Zebedea Quillfeather', count: 1 },
      { where: 'memo', on: 'the study', count: 1 },
      expect.objectContaining({ where: 'the trail' }),
    ]);
  });

  test('that there is no such person', () => {
    expect(planWithdrawal(study.desk, { participant: 'nobody', names: [] })).toMatchObject({
      code: 'unknown participant',
    });
  });
});

describe('after a withdrawal', () => {
  let study: Planted;
  let head: string;
  beforeAll(async () => {
    study = await plantedStudy();
    ({ head } = study.file);
    expect(foundIn(study.file.path, traces)).toEqual(traces);
    const done = await withdraw(study.file, study.desk, context, request, { refit: true });
    expect(done).toMatchObject({ ok: true, value: { fits: 1, refitted: true } });
  });

  test('nothing of the person can be found in the file', () => {
    expect(foundIn(study.file.path, traces)).toEqual([]);
  });

  test('a tombstone stays, and the study of everybody else', async () => {
    const { study: left } = await readAgain(study.file);
    expect([...left.withdrawn]).toEqual([
      ['person-z', { transcripts: ['alone'], shared: ['both'] }],
    ]);
    expect([...left.transcripts.keys()].sort()).toEqual(['both', 'other']);
    expect([...left.participants.keys()].sort()).toEqual(['person-b', 'person-c']);
    expect([...(left.codings.get('both')?.keys() ?? [])]).toEqual(['coding-3']);
    expect([...(left.codings.get('other')?.keys() ?? [])]).toEqual(['coding-4']);
    expect(left.codings.has('alone')).toBe(false);
    expect([...left.memos.keys()]).toEqual(['memo-2']);
    expect(left.memos.get('memo-2')?.text).toBe('Ring [withdrawn] again');
    expect(left.themes.get('by-hand')?.name).toBe('Silence of [withdrawn]');
  });

  test('their turns among others stand empty, and everybody else’s words are what they were', async () => {
    const desk = await readAgain(study.file);
    const both = desk.study.transcripts.get('both')!;
    const text = desk.text('both');
    const theirs = both.turns.filter(({ speaker }) => speaker === '[withdrawn]');
    expect(theirs.length).toBeGreaterThan(2);
    expect(new Set(theirs.map(({ start, end }) => text.slice(start, end)))).toEqual(
      new Set(['[withdrawn]']),
    );
    expect(both.speakers.find(({ label }) => label === '[withdrawn]')).toEqual({
      label: '[withdrawn]',
      role: 'other',
      participant: null,
    });
    const before = (await plantedStudy()).desk;
    const said = (one: typeof desk, of: string, label: string): string[] =>
      one.study.transcripts
        .get(of)!
        .turns.filter(({ speaker }) => speaker === label)
        .map(({ start, end }) => one.text(of).slice(start, end));
    expect(said(desk, 'both', 'C')).toEqual(said(before, 'both', 'C'));
    expect(said(desk, 'other', 'INT')).toEqual(said(before, 'other', 'INT'));
    const coding = desk.study.codings.get('both')!.get('coding-3')!;
    const turn = both.turns[3]!;
    expect(coding.span).toEqual({ start: turn.start, end: turn.end });
  });

  test('the chain verifies, and goes on from where it was', async () => {
    expect([...study.file.chain()].map(({ hash }) => hash)).toContain(head);
    const verified = await verify(study.file);
    expect(verified).toMatchObject({ outcome: 'holds', faults: [] });
    expect(verified.fits.map(({ found }) => found.code)).toEqual(['sealed', 'sealed before']);
  });

  test('named themes kept their words, since the study was fitted again first', async () => {
    const desk = await readAgain(study.file);
    expect(desk.study.fits.size).toBe(1);
    const fitted = desk.fitted(desk.study.fit);
    const named = [...desk.study.themes.values()].find(({ name }) => name === 'Kept by name');
    expect(fitted?.fit.themes).toContain(named?.id);
    expect(fitted?.words.passages.some(({ transcript }) => transcript === 'alone')).toBe(false);
    expect(fitted?.words.vocabulary.some((word) => word.startsWith('xylo'))).toBe(false);
  });

  test('there is nothing to undo', () => {
    const desk = deskOn(study.file);
    expect([desk.undo(), desk.redo()]).toEqual([null, null]);
  });

  test('nobody can be withdrawn twice, and somebody else can be after', async () => {
    const desk = deskOn(study.file);
    const again = await withdraw(study.file, desk, context, request, { refit: false });
    expect(again).toMatchObject({ ok: false, code: 'unknown participant' });
    const next = { participant: 'person-c', names: ['P-c'] };
    const done = await withdraw(study.file, desk, context, next, { refit: false });
    expect(done).toMatchObject({ ok: true, value: { refitted: false } });
    expect(foundIn(study.file.path, ['P-c', ...traces])).toEqual([]);
    const { study: left } = await readAgain(study.file);
    expect([...left.transcripts.keys()]).toEqual(['other']);
    expect(left.fit).toBeNull();
    expect(await verify(study.file)).toMatchObject({ outcome: 'holds' });
  });
});

describe('a withdrawal that is stopped while it fits again', () => {
  test('changes nothing', async () => {
    const { file, desk } = await plantedStudy();
    const { head } = file;
    const signal = AbortSignal.abort();
    const done = await withdraw(file, desk, context, request, { refit: true, fit: { signal } });
    expect(done).toEqual({ ok: false, code: 'stopped' });
    expect(file.head).toBe(head);
    expect(foundIn(file.path, traces)).toEqual(traces);
  });
});
