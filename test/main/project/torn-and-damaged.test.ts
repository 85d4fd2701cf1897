import * as fs from 'node:fs';
import { describe, expect, it } from 'vitest';
import { openStudyFile, recoverStudyFile, type StudyRecord } from '../../../main/project/index.ts';
import {
  appendSamples,
  contents,
  countedSalts,
  create,
  look,
  newPath,
  quickStorage,
  reopen,
  valueOf,
} from './study-folder.ts';

const quick = { storage: quickStorage };

interface Sample {
  readonly at: string;
  readonly bytes: Buffer;
  readonly records: readonly StudyRecord[];
  readonly seen: readonly string[];
  readonly headerLength: number;
  readonly head: string;
}

/** A small study: edits alone, edits with blobs, two edits in one act. */
async function sample(edits = 4): Promise<Sample> {
  const at = newPath();
  const file = await create(at, quick);
  const headerLength = file.size;
  appendSamples(file, edits);
  valueOf(
    file.appendAll([{ edit: () => ({ type: 'first' }) }, { edit: () => ({ type: 'second' }) }]),
  );
  const { records, head } = file;
  const seen = contents(file);
  file.close();
  return { at, bytes: fs.readFileSync(at), records, seen, headerLength, head };
}

/** What is left of a study cut at `length` bytes: the records up to the last whole edit. */
function prefix({ records, seen, headerLength }: Sample, length: number) {
  let kept = 0;
  let size = headerLength;
  for (const { sequence, kind, offset, length: payload } of records) {
    const end = offset + 112 + payload;
    if (kind === 'edit' && end <= length) {
      kept = sequence;
      size = end;
    }
  }
  return { seen: seen.slice(0, kept), size };
}

describe('a study cut short', () => {
  it('at any byte gives back its longest run of whole edits, and goes on from there', async () => {
    const study = await sample(2);
    const cut = newPath();
    for (let length = 0; length <= study.bytes.length; length++) {
      fs.writeFileSync(cut, study.bytes.subarray(0, length));
      if (length < study.headerLength) {
        expect(await look(cut)).toBe(length === 0 ? 'empty' : 'damaged');
        continue;
      }
      const left = prefix(study, length);
      expect(await look(cut), `read-only at ${length}`).toEqual(left.seen);
      expect(fs.statSync(cut).size).toBe(length);

      const file = await reopen(cut, quick);
      expect(file.leftOver).toBe(length - left.size);
      expect(fs.statSync(cut).size).toBe(left.size);
      expect(contents(file)).toEqual(left.seen);
      if (length % 16 === 0) appendSamples(file, 1);
      const after = contents(file);
      file.close();
      expect(await look(cut)).toEqual(after);
    }
  });

  it('with blobs whose edit never came loses them too', async () => {
    const study = await sample(2);
    const lastBlobEnd = Math.max(
      ...study.records.filter(({ kind }) => kind === 'blob').map((r) => r.offset + 112 + r.length),
    );
    fs.writeFileSync(study.at, study.bytes.subarray(0, lastBlobEnd));
    expect(await look(study.at)).toEqual(study.seen.slice(0, 1));
  });

  it.each([600, 5000])(
    'and filled up with %i zeros, as some drives leave it, opens',
    async (zeros) => {
      const study = await sample();
      const third = study.records[2]?.offset ?? 0;
      for (const length of [third, third + 1, third + 60, third + 113, study.bytes.length]) {
        fs.writeFileSync(
          study.at,
          Buffer.concat([study.bytes.subarray(0, length), Buffer.alloc(zeros)]),
        );
        expect(await look(study.at), `at ${length}`).toEqual(prefix(study, length).seen);
      }
    },
  );

  it('is not mistaken for one when only a few zeros follow', async () => {
    const study = await sample();
    fs.writeFileSync(study.at, Buffer.concat([study.bytes, Buffer.alloc(113)]));
    const sectors =
      Math.ceil((study.bytes.length + 113) / 512) - Math.ceil(study.bytes.length / 512);
    expect(await look(study.at)).toEqual(sectors > 0 ? study.seen : 'damaged');
  });
});

describe('a damaged study', () => {
  it('is not taken for an unfinished one because its end was never filled', async () => {
    const study = await sample();
    const second = study.records[1]?.offset ?? 0;
    for (const at of [second + 10, second + 113]) {
      const bytes = Buffer.concat([study.bytes, Buffer.alloc(2000)]);
      bytes[at] = (bytes[at] ?? 0) ^ 1;
      fs.writeFileSync(study.at, bytes);
      expect(await openStudyFile(study.at)).toMatchObject({ code: 'damaged', sequence: 2 });
      expect(fs.readFileSync(study.at).equals(bytes)).toBe(true);
    }
  });

  it('is refused whichever byte of it is another, and never changed', async () => {
    const study = await sample(2);
    for (const flip of [0x01, 0xff]) {
      for (let at = 0; at < study.bytes.length; at++) {
        const bytes = Buffer.from(study.bytes);
        bytes[at] = (bytes[at] ?? 0) ^ flip;
        fs.writeFileSync(study.at, bytes);
        const result = await openStudyFile(study.at, { readOnly: at % 2 === 0 });
        const where = `byte ${at} with ${flip}`;
        expect(result.ok, where).toBe(false);
        if (result.ok) continue;
        expect(result.code, where).toBe(at < 8 ? 'not a study' : 'damaged');
        if (at >= study.headerLength) {
          const record = study.records.findLast(({ offset }) => offset <= at);
          expect(result, where).toMatchObject({
            offset: record?.offset,
            sequence: record?.sequence,
          });
        } else if (at >= 8) {
          expect(result, where).toMatchObject({ offset: 0, sequence: 0, reason: 'header' });
        }
        expect(fs.readFileSync(study.at).equals(bytes)).toBe(true);
      }
    }
  });

  it('names the place where a record was taken out, put in, doubled or swapped', async () => {
    const study = await sample();
    const frames = study.records.map(({ offset, length }) =>
      study.bytes.subarray(offset, offset + 112 + length),
    );
    const header = study.bytes.subarray(0, study.headerLength);
    const arranged = async (order: readonly number[]) => {
      fs.writeFileSync(
        study.at,
        Buffer.concat([header, ...order.map((n) => frames[n - 1] ?? header)]),
      );
      return openStudyFile(study.at, { readOnly: true });
    };
    const all = study.records.map(({ sequence }) => sequence);
    expect((await arranged(all)).ok).toBe(true);
    expect(await reopened(study.at)).toBe(study.head);
    expect(await arranged(all.filter((n) => n !== 4))).toMatchObject({
      code: 'damaged',
      sequence: 4,
      reason: 'order',
    });
    expect(await arranged([1, 3, 2, ...all.slice(3)])).toMatchObject({
      sequence: 2,
      reason: 'order',
    });
    expect(await arranged([1, 2, 2, ...all.slice(2)])).toMatchObject({
      sequence: 3,
      reason: 'order',
    });
    expect(await arranged([...all, 1])).toMatchObject({
      sequence: all.length + 1,
      reason: 'order',
    });
  });

  it('names a record that belongs to another study', async () => {
    const study = await sample();
    const other = newPath();
    const file = await create(other, { randomBytes: countedSalts(500) });
    appendSamples(file, 1);
    const [first] = file.records;
    file.close();
    const [ours] = study.records;
    const length = 112 + (ours?.length ?? 0);
    expect(first?.length).toBe(ours?.length);
    const foreign = fs
      .readFileSync(other)
      .subarray(study.headerLength, study.headerLength + length);
    foreign.copy(study.bytes, study.headerLength);
    fs.writeFileSync(study.at, study.bytes);
    // The record is whole and first of its own study, so the one after it does not follow.
    expect(await openStudyFile(study.at)).toMatchObject({
      code: 'damaged',
      sequence: 2,
      reason: 'chain',
    });
  });

  it('is told from a cut one when rubbish follows', async () => {
    const study = await sample();
    fs.appendFileSync(study.at, Buffer.alloc(300, 'rubbish '));
    expect(await openStudyFile(study.at)).toMatchObject({
      code: 'damaged',
      offset: study.bytes.length,
      sequence: study.records.length + 1,
    });
  });
});

describe('recovery', () => {
  it('refuses to write over a file, and leaves the damaged one as it is', async () => {
    const study = await sample();
    fs.writeFileSync(study.at, study.bytes.fill(7, 200, 260));
    expect(await recoverStudyFile(study.at, study.at)).toMatchObject({ code: 'already there' });
    expect(await recoverStudyFile(newPath(), newPath('b'))).toMatchObject({ code: 'not found' });
    const rubbish = newPath();
    fs.writeFileSync(rubbish, Buffer.alloc(5000, 'rubbish'));
    expect(await recoverStudyFile(rubbish, newPath('b'))).toMatchObject({ code: 'not a study' });
    expect(fs.readFileSync(study.at).equals(study.bytes)).toBe(true);
  });

  it('of a whole study gives the same bytes', async () => {
    const study = await sample();
    const to = newPath('new.understory');
    expect(valueOf(await recoverStudyFile(study.at, to, quick))).toEqual({
      studyId: 'a study of ours',
      studyIdLost: false,
      kept: study.records.length,
      rebuilt: 0,
      missing: [],
      leftOver: 0,
      head: study.head,
      headKept: true,
    });
    expect(fs.readFileSync(to).equals(study.bytes)).toBe(true);
  });

  it('brings over all but the record of a flipped byte, whichever byte it is', async () => {
    const study = await sample(2);
    const to = newPath('new.understory');
    let lost = 0;
    for (let at = 0; at < study.bytes.length; at++) {
      const bytes = Buffer.from(study.bytes);
      bytes[at] = (bytes[at] ?? 0) ^ 0x10;
      fs.writeFileSync(study.at, bytes);
      const where = `byte ${at}`;
      const found = valueOf(await recoverStudyFile(study.at, to, quick));
      const record = study.records.findLast(({ offset }) => offset <= at);
      const inPayload = record !== undefined && at >= record.offset + 112;
      const inSalt =
        record !== undefined && !inPayload && at >= record.offset + 24 && at < record.offset + 40;
      if (inPayload || inSalt) {
        lost += 1;
        const { sequence, kind, offset } = record;
        expect(found, where).toMatchObject({
          missing: [{ sequence, kind, offset }],
          headKept: true,
        });
        const expected = [...study.seen];
        expected[sequence - 1] = `${sequence} ${kind} removed`;
        expect(await look(to), where).toEqual(expected);
      } else if (found.leftOver === 0) {
        expect(found.missing, where).toEqual([]);
        expect(await look(to), where).toEqual(study.seen);
      } else {
        // The last record's own chain hash is all that could prove it.
        expect(record?.sequence, where).toBe(study.records.length);
        expect(at - (record?.offset ?? 0), where).toBeGreaterThanOrEqual(72);
        expect(await look(to), where).toEqual(study.seen.slice(0, -1));
      }
      if (at >= study.headerLength && found.leftOver === 0)
        expect(found.head, where).toBe(study.head);
      fs.rmSync(to);
    }
    expect(lost).toBeGreaterThan(6 * 16);
  });

  it('finds its way again after bytes were overwritten, taken out or put in', async () => {
    const study = await sample(8);
    const to = newPath('new.understory');
    const [second, fifth] = [study.records[1], study.records[4]];
    const [from, until] = [(second?.offset ?? 0) + 50, (fifth?.offset ?? 0) + 20];
    const { bytes } = study;
    const holes = {
      overwritten: Buffer.concat([
        bytes.subarray(0, from),
        Buffer.alloc(until - from, 0xa5),
        bytes.subarray(until),
      ]),
      'taken out': Buffer.concat([bytes.subarray(0, from), bytes.subarray(until)]),
      'put in': Buffer.concat([
        bytes.subarray(0, until),
        Buffer.alloc(700, 0xa5),
        bytes.subarray(until),
      ]),
    };
    for (const [how, damaged] of Object.entries(holes)) {
      fs.writeFileSync(study.at, damaged);
      expect(await openStudyFile(study.at), how).toMatchObject({ code: 'damaged' });
      const found = valueOf(await recoverStudyFile(study.at, to, quick));
      const seen = await look(to);
      const gone = how === 'put in' ? [5] : [2, 3, 4, 5];
      expect(
        found.missing.map(({ sequence }) => sequence),
        how,
      ).toEqual(gone);
      expect(found.headKept, how).toBe(false);
      const expected = study.seen.map((line, index) =>
        gone.includes(index + 1) ? `${index + 1} note` : line,
      );
      expect(seen, how).toEqual(expected);
      // The new file is a study like any other.
      const file = await reopen(to, quick);
      appendSamples(file, 2);
      file.close();
      fs.rmSync(to);
    }
  });

  it('of bytes put into one payload loses that record alone', async () => {
    const study = await sample(8);
    const to = newPath('new.understory');
    const third = study.records[2];
    const at = (third?.offset ?? 0) + 112 + 2;
    fs.writeFileSync(
      study.at,
      Buffer.concat([study.bytes.subarray(0, at), Buffer.from('more'), study.bytes.subarray(at)]),
    );
    const found = valueOf(await recoverStudyFile(study.at, to, quick));
    expect(found.missing.map(({ sequence }) => sequence)).toEqual([3]);
    expect(found.headKept).toBe(true);
    expect(await look(to)).toHaveLength(study.seen.length);
  });

  it('gives a new id where the old one is gone, and says so', async () => {
    const study = await sample();
    study.bytes.fill(0x20, 20, study.headerLength);
    fs.writeFileSync(study.at, study.bytes);
    const to = newPath('new.understory');
    const found = valueOf(await recoverStudyFile(study.at, to, { randomBytes: countedSalts() }));
    expect(found).toMatchObject({ studyIdLost: true, missing: [], headKept: false });
    expect(found.studyId).toMatch(/^[0-9a-f]{32}$/);
    expect(await look(to)).toEqual(study.seen);
  });

  it('refuses a file that asks for more missing records than a file could hold', async () => {
    const study = await sample();
    const { headFor, encodeHead } = await import('../../../main/project/frame.ts');
    const head = headFor('edit', 2 ** 50, Buffer.alloc(16), Buffer.alloc(0), Buffer.alloc(32));
    fs.appendFileSync(study.at, encodeHead(head));
    expect(await recoverStudyFile(study.at, newPath('b'))).toMatchObject({ code: 'not a study' });
  });

  it('leaves out an end that belongs to no whole edit', async () => {
    const study = await sample();
    const cut = study.bytes.subarray(0, study.bytes.length - 5);
    fs.writeFileSync(study.at, cut);
    const to = newPath('new.understory');
    const found = valueOf(await recoverStudyFile(study.at, to, quick));
    expect(found.leftOver).toBe(112 + 17 - 5);
    expect(await look(to)).toEqual(study.seen.slice(0, -1));
  });
});

async function reopened(at: string): Promise<string> {
  const file = await reopen(at, { readOnly: true });
  const { head } = file;
  file.close();
  return head;
}
