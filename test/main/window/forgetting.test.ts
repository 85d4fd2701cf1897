import { readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { backupStore } from '../../../main/backup-settings.ts';
import { openStudyFile } from '../../../main/project/index.ts';
import { newFolder, newStudy, passageOf, seen, type Table } from './table.ts';

const everything = { by: null, kind: null, since: null, theme: null } as const;

async function codedStudy(): Promise<Table> {
  const store = backupStore(`${newFolder()}/backups.json`);
  const table = await newStudy(3, { backups: store });
  const { theme } = await table.ask('addTheme', { name: 'Boats', byHand: true, seeds: [] });
  const { place } = await passageOf(table);
  await table.ask('codeByHand', { place, theme, memo: 'vexillology', ...seen });
  return table;
}

describe('a person is withdrawn in the window', () => {
  test('seen first, then gone: from the study, the file, its backups, the reach of undo', async () => {
    const table = await codedStudy();
    await table.ask('makeBackup', null);
    const request = {
      standings: ['by hand'],
      themes: null,
      guard: true,
      format: 'html',
    } as const;
    await table.ask('report', request);
    const { participants } = await table.ask('gatherView', null);
    const who = participants[0]!;
    const takes = { participant: who.id, names: [who.name] };
    expect(await table.ask('withdrawalView', takes)).toMatchObject({
      participant: who.name,
      transcripts: who.transcripts.length === 0 ? [] : [expect.any(String)],
      codings: 1,
      exported: [expect.stringMatching(/ excerpts\.html, 2026-03-01$/u)],
    });

    const done = await table.ask('withdrawParticipant', { ...takes, refit: true });
    expect(done).toMatchObject({ backupsLeft: [], refitted: false });
    expect(done.backupsRemoved).toBeGreaterThan(0);
    expect(done.overview.transcripts).toBe(2);
    const { path } = done.overview.study;
    expect(readFileSync(path!).includes('vexillology')).toBe(false);
    const { backups } = await table.ask('backupsView', null);
    expect(backups).toHaveLength(1);
    expect(readFileSync(backups[0]!.path).includes('vexillology')).toBe(false);

    expect(done.overview.undo).toBeNull();
    expect(await table.refused('undo', null)).toBe('erased for good');
    expect(await table.refused('withdrawalView', takes)).toBe('unknown participant');
    expect((await table.ask('gatherView', null)).participants).toHaveLength(2);
    // The study goes on: decisions are made and taken back as before.
    await table.ask('renameStudy', { name: 'Fewer crossings' });
    expect((await table.ask('undo', null)).did).toMatch(/rename/u);
    expect(await table.ask('verifyStudy', { head: null })).toMatchObject({ outcome: 'holds' });
  });

  test('is refused while the study is for reading only', async () => {
    const table = await codedStudy();
    const { study } = (await table.ask('overview', null))!;
    await table.ask('openStudy', { path: study.path, readOnly: true });
    const { participants } = await table.ask('gatherView', null);
    const takes = { participant: participants[0]!.id, names: [], refit: false };
    expect(await table.refused('withdrawParticipant', takes)).toBe('reading only');
  });
});

describe('originals are sealed in the window', () => {
  test('where there are any', async () => {
    const table = await codedStudy();
    expect(await table.ask('sealView', null)).toBeNull();
    expect(await table.refused('sealOriginals', { names: [], refit: false })).toBe(
      'nothing to seal',
    );
  });
});

describe('the trail in the window', () => {
  test('newest first, narrowed, and as files that carry the head of the chain', async () => {
    const table = await codedStudy();
    const trail = await table.ask('trailView', everything);
    expect(trail.lines).toHaveLength(trail.of);
    expect(trail.lines[0]).toMatchObject({ what: 'coding with Boats', by: 'Ada' });
    expect(trail.readers).toEqual(['Ada']);
    expect(trail.kinds).toContainEqual({ kind: 'codingMade', label: 'Coding made' });
    const coded = await table.ask('trailView', { ...everything, kind: 'codingMade' });
    expect(coded.lines).toHaveLength(1);
    for (const format of ['csv', 'markdown'] as const) {
      const file = await table.ask('trailFile', { ...everything, format });
      expect(new TextDecoder().decode(file.bytes)).toContain(trail.head);
    }
    const { study } = (await table.ask('overview', null))!;
    const opened = await openStudyFile(study.path!, { readOnly: true });
    expect(opened.ok && opened.value.head).toBe(trail.head);
    if (opened.ok) opened.value.close();
  });
});

describe('the study is checked in the window', () => {
  test('against a noted hash, which must be one', async () => {
    const table = await codedStudy();
    const { head } = await table.ask('trailView', everything);
    const found = await table.ask('verifyStudy', { head: ` ${head.slice(0, 20)}\n` });
    expect(found).toMatchObject({ outcome: 'holds', faults: [], head });
    expect(found.noted).toMatch(/last record/u);
    expect(await table.refused('verifyStudy', { head: 'Tuesday' })).toBe('no chain hash');
  });
});
