import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import type { Coding, Edit } from '../../engine/study/index.ts';
import { withdraw } from '../../main/forgetting/withdrawal.ts';
import { openStudyFile, type StudyFile } from '../../main/project/index.ts';
import { planTakeIn, takeIn, type Choice } from '../../main/taking-in.ts';
import { verify } from '../../main/verify.ts';
import { temporaryFolder } from './commands/run.ts';
import { context, deskOn, made, now, plantedStudy } from './forgetting/study.ts';
import type { Desk } from '../../main/desk.ts';

const files: StudyFile[] = [];
afterEach(() => {
  for (const file of files.splice(0)) file.close();
});

interface Copies {
  readonly mine: StudyFile;
  readonly desk: Desk;
  readonly theirs: StudyFile;
  readonly their: Desk;
}

let copies: Copies;

/** A study and a copy of it that somebody else goes on in. */
beforeEach(async () => {
  const { file: mine, desk } = await plantedStudy();
  const path = join(temporaryFolder(), 'copy.understory');
  const copied = await mine.saveCopy(path);
  if (!copied.ok) throw new Error(copied.code);
  const opened = await openStudyFile(path);
  if (!opened.ok) throw new Error(opened.code);
  files.push(opened.value);
  const their = deskOn(opened.value);
  made(their, { kind: 'readerAdded', reader: { id: 'reader-bo', name: 'Bo' } });
  copies = { mine, desk, theirs: opened.value, their };
});

function coding(desk: Desk, id: string, changes: Partial<Coding> = {}): Edit {
  const known = desk.study.codings.get('other')!.get('coding-4')!;
  const { start, end } = desk.study.transcripts.get('other')!.turns[3]!;
  const under = { ...known.under, reader: 'reader-bo' };
  return { kind: 'codingMade', coding: { ...known, id, span: { start, end }, under, ...changes } };
}

function taken(choices: Record<string, Choice> = {}) {
  const { desk, mine, theirs } = copies;
  return takeIn(desk, mine, theirs, new Map(Object.entries(choices)));
}

const plan = () => planTakeIn(copies.desk, copies.mine, copies.theirs);

describe('taking in brings', () => {
  test('another copy’s codings, marks, memos and readers, as one gesture that undo takes back', () => {
    const { desk, their, mine } = copies;
    const none = {
      id: 'none-bo',
      transcript: 'other',
      span: their.study.transcripts.get('other')!.turns[5]!,
      under: {
        reader: 'reader-bo',
        at: now(),
        drawnBy: 'in order',
        seenSuggestion: false,
        fit: null,
      },
    };
    made(
      their,
      coding(their, 'coding-bo'),
      {
        kind: 'noneMarked',
        none: { ...none, span: { start: none.span.start, end: none.span.end } },
      },
      {
        kind: 'memoWritten',
        memo: {
          id: 'memo-bo',
          subject: { kind: 'study' },
          text: 'Hm',
          reader: 'reader-bo',
          at: now(),
        },
      },
    );
    const before = desk.study;
    expect(plan()).toMatchObject({
      ok: true,
      value: { readers: ['Bo'], codings: 1, nones: 1, memos: 1, left: 0, conflicts: [] },
    });
    expect(taken().ok).toBe(true);
    expect(desk.study.codings.get('other')?.get('coding-bo')?.under.reader).toBe('reader-bo');
    expect(desk.study.readers.get('reader-bo')?.name).toBe('Bo');
    expect(desk.study.memos.get('memo-bo')?.text).toBe('Hm');
    expect(desk.study.takenIn).toHaveLength(1);
    expect(mine.readBlob(desk.study.takenIn[0]!.branch!.sequence).length).toBeGreaterThan(100);
    desk.undo();
    expect(desk.study.codings).toEqual(before.codings);
    expect(desk.study.takenIn).toEqual([]);
  });

  test('nothing the second time, and only what is new the third', () => {
    const { desk, their } = copies;
    made(their, coding(their, 'coding-bo'));
    expect(taken().ok).toBe(true);
    const { head } = copies.mine;
    expect(taken()).toEqual({ ok: false, code: 'nothing new' });
    expect(copies.mine.head).toBe(head);
    made(their, coding(their, 'coding-bo-2', { memo: 'later' }));
    expect(plan()).toMatchObject({ ok: true, value: { codings: 1 } });
    expect(taken().ok).toBe(true);
    expect(desk.study.codings.get('other')?.size).toBe(3);
  });

  test('what they removed, where it is as it was', () => {
    const { desk, their } = copies;
    const known = their.study.codings.get('other')!.get('coding-4')!;
    made(their, { kind: 'codingRemoved', coding: known });
    expect(plan()).toMatchObject({ ok: true, value: { removed: 1, conflicts: [] } });
    taken();
    expect(desk.study.codings.has('other')).toBe(false);
  });

  test('the fits that codings were made under stay known, though they are not here', async () => {
    const { desk, their } = copies;
    made(their, coding(their, 'coding-bo'));
    taken();
    expect(await verify(copies.mine)).toMatchObject({ outcome: 'holds' });
    expect(deskOn(copies.mine).study.codings).toEqual(desk.study.codings);
  });
});

describe('where both decided', () => {
  const revised = (desk: Desk, memo: string): Edit => {
    const { theme, standing, span, memo: was } = desk.study.codings.get('other')!.get('coding-4')!;
    const from = { theme, standing, span, memo: was };
    return {
      kind: 'codingRevised',
      transcript: 'other',
      coding: 'coding-4',
      from,
      to: { ...from, memo },
    };
  };

  beforeEach(() => {
    made(copies.desk, revised(copies.desk, 'mine'));
    made(copies.their, revised(copies.their, 'theirs'));
  });

  test('a person has to choose', () => {
    expect(plan()).toMatchObject({
      ok: true,
      value: {
        codings: 0,
        conflicts: [
          {
            id: 'coding-4',
            mine: expect.stringContaining('mine'),
            theirs: expect.stringContaining('theirs'),
            both: true,
          },
        ],
      },
    });
    expect(taken()).toEqual({ ok: false, code: 'choose first' });
  });

  test.each([
    ['mine', ['mine']],
    ['theirs', ['theirs']],
    ['both', ['mine', 'theirs']],
  ] as const)('%s', (choice, memos) => {
    expect(taken({ 'coding-4': choice }).ok).toBe(true);
    const left = [...copies.desk.study.codings.get('other')!.values()].map(({ memo }) => memo);
    expect(left).toEqual(memos);
    expect(taken({ 'coding-4': choice })).toEqual({ ok: false, code: 'nothing new' });
  });
});

describe('what does not come back', () => {
  test('codings of somebody who was withdrawn here', async () => {
    const { mine, their } = copies;
    const { start, end } = their.study.transcripts.get('alone')!.turns[3]!;
    const among = their.study.transcripts.get('both')!.turns[5]!;
    made(
      their,
      coding(their, 'coding-bo', { transcript: 'alone', span: { start, end } }),
      coding(their, 'coding-bo-2', {
        transcript: 'both',
        span: { start: among.start, end: among.end },
      }),
      coding(their, 'coding-bo-3'),
    );
    const request = { participant: 'person-z', names: [] };
    await withdraw(mine, copies.desk, context, request, { refit: false });
    copies = { ...copies, desk: deskOn(mine) };
    expect(plan()).toMatchObject({ ok: true, value: { codings: 1, left: 2 } });
    expect(taken().ok).toBe(true);
    const { study } = copies.desk;
    expect(study.codings.has('alone')).toBe(false);
    const ids = [...study.codings.values()].flatMap((each) => [...each.keys()]);
    expect(ids).toContain('coding-bo-3');
    expect(ids).not.toContain('coding-bo-2');
    const there = study.codings.get('other')!.get('coding-bo-3')!;
    expect(copies.desk.text('other').slice(there.span.start, there.span.end).length).toBe(
      there.span.end - there.span.start,
    );
  });
});

describe('taking in is refused', () => {
  test('of another study, and of the same state', async () => {
    const { desk, mine } = copies;
    expect(planTakeIn(desk, mine, mine)).toEqual({ ok: false, code: 'nothing new' });
    const other = { ...copies.theirs, studyId: 'another' } as StudyFile;
    expect(planTakeIn(desk, mine, other)).toEqual({ ok: false, code: 'another study' });
  });
});
