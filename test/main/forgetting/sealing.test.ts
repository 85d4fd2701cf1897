import { beforeAll, describe, expect, test } from 'vitest';
import { spansLost, type Edit } from '../../../engine/study/index.ts';
import { mapSpan } from '../../../engine/spans/index.ts';
import { planSeal, seal } from '../../../main/forgetting/sealing.ts';
import { fit } from '../../../main/fitting.ts';
import { verify } from '../../../main/verify.ts';
import { wordLists } from '../../../main/word-lists.ts';
import {
  context,
  deskOn,
  foundIn,
  made,
  planted,
  plantedStudy,
  readAgain,
  type Planted,
} from './study.ts';

const traces = ['xylophonist', 'hash-of-alone', 'hash-of-other'];
const original = 'Zebedea Quillfeather';

/** Puts a stand-in where a word stands in a transcript, as Gather does. */
function standIn({ desk }: Planted, id: string, word: string, replacement: string): void {
  const { turns, length, text } = desk.study.transcripts.get(id)!;
  const before = desk.text(id);
  const replacements = [...before.matchAll(new RegExp(word, 'gu'))].map(({ index, 0: found }) => ({
    start: index,
    end: index + found.length,
    inserted: replacement.length,
  }));
  const after = before.replaceAll(new RegExp(word, 'gu'), replacement);
  made(desk, {
    blobs: [Buffer.from(after, 'utf8')],
    edit: ([blob]): Edit => ({
      kind: 'textRevised',
      transcript: id,
      from: { text, length, turns },
      to: { text: blob!, length: after.length, turns: turns.map((t) => mapSpan(t, replacements)) },
      replacements,
      placed: [],
      lost: spansLost(desk.study, { transcript: id, replacements, placed: [] }),
    }),
  });
}

/** Two names replaced in two transcripts, after the first fit. */
async function replacedStudy(): Promise<Planted> {
  const study = await plantedStudy();
  for (const id of ['alone', 'both']) standIn(study, id, planted.word, 'musician');
  standIn(study, 'other', 'Zebedea {2}Quillfeather', 'Anna');
  made(
    study.desk,
    ...(
      [
        ['one', 'organisation', [planted.word], 'musician'],
        ['two', 'person', ['Zebedea  Quillfeather'], 'Anna'],
      ] as const
    ).map(([id, kind, forms, replacement]) => ({
      kind: 'identifierSettled' as const,
      identifier: id,
      from: null,
      to: {
        id,
        kind: kind as 'person',
        forms,
        decision: 'stand-in' as const,
        replacement,
        putIn: ['alone', 'both'],
        places: null,
      },
    })),
  );
  return study;
}

describe('before a seal a person is told', () => {
  let study: Planted;
  beforeAll(async () => {
    study = await replacedStudy();
  });

  test('what goes', () => {
    expect(planSeal(study.file, study.desk)).toMatchObject({
      ok: true,
      value: {
        transcripts: ['alone', 'both', 'other'],
        wordings: 3,
        originals: 2,
        fits: 1,
        exported: [{ fileName: 'Planted excerpts.docx' }],
      },
    });
  });

  test('where else originals stand', () => {
    const plan = planSeal(study.file, study.desk);
    const names = plan.ok ? plan.value.names : [];
    expect(names.map(({ name, mark }) => [name, mark])).toEqual([[original, 'Anna']]);
    expect(names[0]?.mentions.map(({ where }) => where)).toEqual([
      'name of a transcript',
      'name of a participant',
      'name of a theme',
      'codebook entry',
      'memo',
      'stand-in',
      'the trail',
    ]);
  });

  test('that there is nothing to seal', async () => {
    const { file, desk } = await plantedStudy();
    expect(planSeal(file, desk)).toEqual({ ok: false, code: 'nothing to seal' });
    expect(await seal(file, desk, context, { names: [] }, { refit: false })).toMatchObject({
      code: 'nothing to seal',
    });
  });
});

describe('after a seal', () => {
  let study: Planted;
  beforeAll(async () => {
    study = await replacedStudy();
    expect(foundIn(study.file.path, traces)).toEqual(traces);
    const done = await seal(
      study.file,
      study.desk,
      context,
      { names: [original] },
      { refit: true },
    );
    expect(done).toMatchObject({ ok: true, value: { fits: 1, refitted: true } });
  });

  test('no original can be found in the file', () => {
    expect(foundIn(study.file.path, [...traces, 'Quillfeather'])).toEqual([]);
  });

  test('stand-ins are in their places, and every decision is', async () => {
    const desk = await readAgain(study.file);
    expect(desk.text('alone')).toContain('I am a musician.');
    expect(desk.study.codings.get('alone')?.size).toBe(1);
    expect(desk.study.codings.get('both')?.size).toBe(2);
    expect(desk.study.transcripts.get('alone')?.name).toBe('Anna');
    expect(desk.study.themes.get('by-hand')?.name).toBe('Silence of Anna');
    expect(desk.study.memos.get('memo-2')?.text).toBe('Ring Anna again');
    expect(desk.study.identifiers.get('one')).toMatchObject({ forms: [], replacement: 'musician' });
    expect([...desk.study.sealed].sort()).toEqual(['alone', 'both', 'other']);
  });

  test('the chain verifies, and fits of before say that they were sealed', async () => {
    const verified = await verify(study.file);
    expect(verified).toMatchObject({ outcome: 'holds', faults: [] });
    expect(verified.fits.map(({ found }) => found.code)).toEqual(['sealed', 'sealed before']);
    const desk = deskOn(study.file);
    expect((await fit(desk, 'from scratch', wordLists, { themes: 3 })).ok).toBe(true);
    const later = await verify(study.file);
    expect(later.fits.at(-1)?.found.code).toBe('holds');
  });

  test('there is nothing to undo, and nothing more to seal', () => {
    const desk = deskOn(study.file);
    expect(planSeal(study.file, desk)).toEqual({ ok: false, code: 'nothing to seal' });
  });

  test('without names chosen, what people typed stays as it is', async () => {
    const other = await replacedStudy();
    await seal(other.file, other.desk, context, { names: [] }, { refit: false });
    const desk = await readAgain(other.file);
    expect(desk.study.memos.get('memo-2')?.text).toBe('Ring zebedea quillfeather again');
    expect(foundIn(other.file.path, traces)).toEqual([]);
    expect(desk.study.fit).toBeNull();
  });
});
