import * as fs from 'node:fs';
import * as path from 'node:path';
import { describe, expect, it } from 'vitest';
import { openStudyFile } from '../../main/project/index.ts';
import { missingInWords } from '../../main/sentences/recovery.ts';
import { interviews, newStudy, newTable, type Table } from './window/table.ts';

/** A study of two transcripts and a fit, closed; and its records. */
async function closedStudy(given: Parameters<typeof newStudy>[1] = {}) {
  const table = await newStudy(2, given);
  const study = (await table.ask('overview', null))?.study.path ?? '';
  await table.ask('closeStudy', null);
  const opened = await openStudyFile(study, { readOnly: true });
  if (!opened.ok) throw new Error(opened.code);
  const file = opened.value;
  const edits = [...file.edits()].map(({ sequence, json }) => ({
    sequence,
    edit: (json as { edit: { kind: string; [key: string]: unknown } }).edit,
  }));
  const records = [...file.records];
  file.close();
  return { table, study, edits, records };
}

function damage(study: string, at: { readonly offset: number }): void {
  const handle = fs.openSync(study, 'r+');
  fs.writeSync(handle, Buffer.from('damage!'), 0, 7, at.offset + 112);
  fs.closeSync(handle);
}

async function recovered(table: Table, study: string) {
  expect(await table.answer('openStudy', { path: study, readOnly: false })).toMatchObject({
    code: 'damaged',
    path: study,
  });
  const before = fs.readFileSync(study);
  const view = await table.ask('recoverStudy', { path: study, to: null });
  expect(fs.readFileSync(study).equals(before)).toBe(true);
  expect(view.path).toBe(path.join(table.folder, 'Crossings recovered.understory'));
  expect(view.overview.study.path).toBe(view.path);
  return view;
}

describe('a damaged study, recovered in a window', () => {
  it('lacks the transcript whose text is damaged, and says which', async () => {
    const { table, study, edits, records } = await closedStudy();
    const gathered = edits.filter(({ edit }) => edit.kind === 'transcriptGathered');
    const { text, name } = gathered[0].edit['transcript'] as {
      text: { sequence: number };
      name: string;
    };
    damage(study, records[text.sequence - 1]);
    const view = await recovered(table, study);
    expect(view.missing).toEqual([`the text of ${name} (record ${text.sequence})`]);
    expect(view.leftOut[0]).toContain(`adding of ${name}`);
    expect(view.overview.transcripts).toBe(1);
    expect((await table.ask('gatherView', null)).transcripts).toHaveLength(1);
    // It can be worked in, and opened again.
    await table.ask('addTranscripts', { files: interviews(1) });
    await table.ask('closeStudy', null);
    const again = await table.ask('openStudy', { path: view.path, readOnly: false });
    expect(again?.transcripts).toBe(2);
  });

  it('lacks a damaged decision and what rests on it, and nothing else', async () => {
    const { table, study, edits, records } = await closedStudy();
    const added = edits.find(({ edit }) => edit.kind === 'participantAdded');
    damage(study, records[(added?.sequence ?? 0) - 1]);
    const view = await recovered(table, study);
    expect(view.missing).toHaveLength(1);
    expect(view.missing[0]).toMatch(/^a decision between .+ and .+ \(record \d+\)$/u);
    expect(view.overview.study.name).toBe('Crossings');
    const left = view.leftOut.length;
    expect(view.kept).toBe(records.length - 1);
    expect(left).toBeLessThan(records.length / 2);
  });

  it('forgets a fit whose numbers are damaged, and keeps what was decided', async () => {
    const { table, study, edits, records } = await closedStudy({ fitted: true });
    const fitted = edits.find(({ edit }) => edit.kind === 'modelFitted');
    const { result } = fitted?.edit['fit'] as { result: { sequence: number } };
    damage(study, records[result.sequence - 1]);
    const view = await recovered(table, study);
    expect(view.missing).toEqual([`the numbers of a fit (record ${result.sequence})`]);
    expect(view.leftOut).toEqual([]);
    expect(view.overview).toMatchObject({ fitted: false, transcripts: 2 });
    await table.ask('fit', { kind: 'from scratch', themes: null });
  });

  it('is refused where there is nothing of a study, and leaves nothing behind', async () => {
    const table = newTable();
    const at = path.join(table.folder, 'a.understory');
    for (const bytes of ['', 'not a study of ours', '\0'.repeat(4096)]) {
      fs.writeFileSync(at, bytes);
      expect(['empty', 'not a study']).toContain(
        await table.refused('recoverStudy', { path: at, to: null }),
      );
    }
    expect(fs.readdirSync(table.folder)).toEqual(['a.understory']);
  });
});

describe('what is missing, in words', () => {
  const nothing = { sequence: 7, of: null, after: null, before: null } as const;
  it.each([
    [{ ...nothing, kind: 'edit' as const }, 'a decision (record 7)'],
    [{ ...nothing, kind: null, after: 'Monday' }, 'a decision after Monday (record 7)'],
    [
      { ...nothing, kind: 'blob' as const, before: 'Friday' },
      'a text, or the numbers of a fit before Friday (record 7)',
    ],
    [{ ...nothing, kind: 'note' as const }, 'a note that no decision depends on (record 7)'],
    [{ ...nothing, kind: 'seal' as const }, 'what was removed on purpose, and why (record 7)'],
  ])('names what can be told (%#)', (missing, words) => {
    expect(missingInWords(missing)).toBe(words);
  });
});
