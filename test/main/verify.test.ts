import { copyFileSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import {
  createStudyFile,
  openStudyFile,
  type Act,
  type StudyRecord,
} from '../../main/project/index.ts';
import { fittedStudy } from './commands/fitted-study.ts';
import { run, temporaryFolder, top, type Ended } from './commands/run.ts';

const folder = temporaryFolder();
const study = 'verified.understory';
const at = (name: string): string => join(folder, name);

/** Made once by `theme` and `refit` on another day, and never made again: see its neighbour. */
const golden = join(top, 'test', 'golden', 'golden.understory');

beforeAll(async () => {
  await fittedStudy(folder, study, 4);
  writeFileSync(at('more.json'), JSON.stringify({ themes: [{ name: 'Bees', seed: ['bees'] }] }));
  const refitted = await run(folder, [
    ...['refit', study, '--plan', 'more.json', '--out', 'out refit'],
  ]);
  if (refitted.code !== 0) throw new Error(refitted.err);
});

async function records(): Promise<{ bytes: Buffer; records: readonly StudyRecord[] }> {
  const opened = await openStudyFile(at(study), { readOnly: true });
  if (!opened.ok) throw new Error(opened.code);
  opened.value.close();
  return { bytes: readFileSync(at(study)), records: opened.value.records };
}

/** Verifies the study with its bytes changed. */
async function verifyChanged(change: (bytes: Buffer) => Buffer): Promise<Ended> {
  writeFileSync(at('changed.understory'), change((await records()).bytes));
  return run(folder, ['verify', 'changed.understory']);
}

/** A record's frame: its head and its payload. */
async function frame(sequence: number): Promise<{ from: number; to: number }> {
  const { offset, length } = (await records()).records[sequence - 1]!;
  return { from: offset, to: offset + 112 + length };
}

/** The study written anew by somebody who knows the format, one record changed: its chain holds. */
async function forged(
  name: string,
  change: (kind: 'edit' | 'blob', sequence: number, bytes: Uint8Array) => Uint8Array,
): Promise<void> {
  const opened = await openStudyFile(at(study), { readOnly: true });
  if (!opened.ok) throw new Error(opened.code);
  const created = await createStudyFile(at(name), { studyId: opened.value.studyId });
  if (!created.ok) throw new Error(created.code);
  const acts: Act[] = [];
  let blobs: Uint8Array[] = [];
  for (const { sequence, kind } of opened.value.records) {
    if (kind === 'blob') {
      blobs.push(change('blob', sequence, Uint8Array.from(opened.value.readBlob(sequence))));
      continue;
    }
    const json = Buffer.from(JSON.stringify(opened.value.readEdit(sequence)), 'utf8');
    const edit: unknown = JSON.parse(Buffer.from(change('edit', sequence, json)).toString('utf8'));
    acts.push({ blobs, edit: () => edit });
    blobs = [];
  }
  const written = created.value.appendAll(acts);
  if (!written.ok) throw new Error(written.code);
  created.value.close();
  opened.value.close();
}

describe('verify', () => {
  test('makes every fit again and says of each that it holds', async () => {
    const { code, out } = await run(folder, ['verify', study]);
    expect(out).toMatch(/^fit from scratch of 4 themes \(record \d+, 2026-\S+\): holds\n/u);
    expect(out).toMatch(/\nre-fit of 5 themes \(record \d+, 2026-\S+\): holds\n/u);
    expect(out).toMatch(/2 of 2 fits came out the same, bit for bit\.\nHead: [0-9a-f]{64}\n$/u);
    expect(code).toBe(0);
  });

  test('changes nothing', async () => {
    const before = readFileSync(at(study));
    await run(folder, ['verify', study]);
    expect(readFileSync(at(study)).equals(before)).toBe(true);
  });

  test('checks the last hash against one that was noted', async () => {
    const opened = await openStudyFile(at(study), { readOnly: true });
    if (!opened.ok) throw new Error(opened.code);
    const { head } = opened.value;
    const earlier = [...opened.value.chain()][4]!.hash;
    opened.value.close();
    const last = await run(folder, ['verify', study, '--head', head.toUpperCase()]);
    expect(last).toMatchObject({ code: 0, out: expect.stringContaining('of the last record') });
    const went = await run(folder, ['verify', study, '--head', earlier.slice(0, 16)]);
    expect(went).toMatchObject({
      code: 0,
      out: expect.stringContaining('record 5: the study went'),
    });
    const other = await run(folder, ['verify', study, '--head', 'ab'.repeat(32)]);
    expect(other).toMatchObject({ code: 1, out: expect.stringContaining('nowhere in the chain') });
  });

  test('shows by a noted hash that whole records were cut off the end', async () => {
    const { bytes, records: all } = await records();
    const opened = await openStudyFile(at(study), { readOnly: true });
    if (!opened.ok) throw new Error(opened.code);
    opened.value.close();
    const cut = all.findLast(({ kind }, index) => kind === 'edit' && index < all.length - 3)!;
    writeFileSync(at('cut.understory'), bytes.subarray(0, cut.offset + 112 + cut.length));
    expect(await run(folder, ['verify', 'cut.understory'])).toMatchObject({ code: 0 });
    const noted = ['verify', 'cut.understory', '--head', opened.value.head];
    expect(await run(folder, noted)).toMatchObject({ code: 1 });
  });
});

describe('verify finds and names', () => {
  test('a flipped byte, wherever it is', async () => {
    const { records: all } = await records();
    for (const record of [all[0]!, all[2]!, all.at(-1)!]) {
      for (const place of [record.offset + 30, record.offset + 112 + 5]) {
        const { code, out } = await verifyChanged((bytes) => {
          bytes[place] ^= 4;
          return bytes;
        });
        expect(out).toContain(`Record ${record.sequence}, at byte ${record.offset}, `);
        expect(code).toBe(1);
      }
    }
  });

  test('a record that was removed', async () => {
    const { from, to } = await frame(3);
    const { code, out } = await verifyChanged((bytes) =>
      Buffer.concat([bytes.subarray(0, from), bytes.subarray(to)]),
    );
    expect(out).toMatch(/^Record 3, at byte \d+, is another one: records were removed/u);
    expect(code).toBe(1);
  });

  test('two records that were swapped', async () => {
    const [a, b] = [await frame(3), await frame(4)];
    const { code, out } = await verifyChanged((bytes) =>
      Buffer.concat([
        bytes.subarray(0, a.from),
        bytes.subarray(b.from, b.to),
        bytes.subarray(a.from, a.to),
        bytes.subarray(b.to),
      ]),
    );
    expect(out).toMatch(/^Record 3, /u);
    expect(code).toBe(1);
  });

  test('a record that was inserted', async () => {
    const { from, to } = await frame(3);
    const { code, out } = await verifyChanged((bytes) =>
      Buffer.concat([bytes.subarray(0, to), bytes.subarray(from, to), bytes.subarray(to)]),
    );
    expect(out).toMatch(/^Record 4, /u);
    expect(code).toBe(1);
  });

  test('a content that was taken out by hand, though the chain holds', async () => {
    const opened = await openStudyFile(at(study), { readOnly: true });
    if (!opened.ok) throw new Error(opened.code);
    const first = [...opened.value.edits()].find(
      ({ json }) => (json as { edit: { kind: string } }).edit.kind === 'settingsChanged',
    )!.sequence;
    opened.value.close();
    copyFileSync(at(study), at('emptied.understory'));
    const writing = await openStudyFile(at('emptied.understory'));
    if (!writing.ok) throw new Error(writing.code);
    expect((await writing.value.compact([first])).ok).toBe(true);
    writing.value.close();
    const { code, out } = await run(folder, ['verify', 'emptied.understory']);
    expect(out).toContain(`The content of record ${first} was taken out, and no seal tells of it.`);
    expect(code).toBe(1);
  });

  test('a result that was changed and chained anew', async () => {
    const { records: all } = await records();
    const result = all.findLast(({ kind }) => kind === 'blob')!.sequence;
    await forged('result.understory', (_, sequence, bytes) => {
      if (sequence === result) bytes[bytes.length - 9]! ^= 1;
      return bytes;
    });
    const { code, out } = await run(folder, ['verify', 'result.understory']);
    expect(out).toMatch(/re-fit of 5 themes .*: differs: the stored result is not the one that/u);
    expect(code).toBe(1);
  });

  test('a decision that was changed and chained anew', async () => {
    await forged('decision.understory', (kind, _, bytes) =>
      kind === 'edit'
        ? Buffer.from(Buffer.from(bytes).toString('utf8').replaceAll('"bees"', '"ward"'), 'utf8')
        : bytes,
    );
    const { code, out } = await run(folder, ['verify', 'decision.understory']);
    expect(out).toMatch(
      /re-fit of 5 themes .*: differs: the decisions in the trail lead to other/u,
    );
    expect(code).toBe(1);
  });

  test('an edit that does not follow from those before', async () => {
    await forged('edit.understory', (kind, _, bytes) => {
      const text = Buffer.from(bytes).toString('utf8');
      return kind === 'edit' ? Buffer.from(text.replace('"themeAdded"', '"themePinned"')) : bytes;
    });
    const { code, out } = await run(folder, ['verify', 'edit.understory']);
    expect(out).toMatch(/^The edit in record \d+ does not follow from those before it/u);
    expect(code).toBe(1);
  });
});

describe('verify cannot tell', () => {
  test('of a file that is not there, or that it cannot read: exit code 3', async () => {
    expect(await run(folder, ['verify', 'none.understory'])).toMatchObject({ code: 3 });
    writeFileSync(at('letter.txt'), 'Dear all');
    const ended = await run(folder, ['verify', 'letter.txt']);
    expect(ended).toMatchObject({
      code: 3,
      err: expect.stringContaining('not an Understory study'),
    });
  });

  test('what it was asked: exit code 2', async () => {
    for (const words of [
      ['verify'],
      ['verify', study, '--head', 'xyz'],
      ['verify', study, '--all'],
    ]) {
      expect(await run(folder, words), words.join(' ')).toMatchObject({ code: 2 });
    }
  });
});

describe('a study that was made once, on one machine', () => {
  test('verifies here', async () => {
    const { code, out } = await run(folder, ['verify', golden]);
    expect(out).toMatch(/: holds\n.*: holds\n/u);
    expect(code).toBe(0);
  });
});
