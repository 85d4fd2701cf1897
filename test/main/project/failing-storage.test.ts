import * as fs from 'node:fs';
import * as path from 'node:path';
import { describe, expect, it } from 'vitest';
import {
  createStudyFile,
  openStudyFile,
  recoverStudyFile,
  type Storage,
  type StudyFile,
} from '../../../main/project/index.ts';
import { faultyStorage, type Fault, type Operation } from './faulty-storage.ts';
import {
  appendSamples,
  contents,
  countedSalts,
  create,
  look,
  newFolder,
  newPath,
  quickStorage,
  reopen,
  valueOf,
} from './study-folder.ts';

const writing: Operation[] = [
  'open',
  'write',
  'sync',
  'truncate',
  'rename',
  'syncFolder',
  'remove',
];
const reading: Operation[] = ['open', 'read', 'stat', 'statPath'];

/** What the session was told is saved, and what it was in the middle of. */
interface Told {
  saved: string[];
  underWay: string[];
  /** What it may be as well, where a replacement of the whole file was reported as failed. */
  or?: string[];
}

/**
 * A session as a person might have it: a study made, edits with and without blobs, one act of many
 * edits, closing and opening, compaction, a copy. It goes on after every failure that lets it.
 */
async function session(at: string, storage: Storage, told: Told): Promise<StudyFile | null> {
  const options = { storage, randomBytes: countedSalts() };
  const acts = (count: number, label: string) =>
    [...Array(count).keys()].map((index) => ({
      blobs: index % 2 === 0 ? [Buffer.from(`${label} words`)] : [],
      edit: (blobs: readonly number[]) => ({ label, index, blobs }),
    }));
  const append = (file: StudyFile, count: number, label: string) => {
    // What an fsync left open stays open.
    if (file.readOnly) return;
    const before = told.saved;
    // The lines that these acts would add, from a file of our own making.
    let next = file.nextSequence;
    const added = acts(count, label).flatMap(({ blobs, edit }) => {
      const numbers = blobs.map(() => next++);
      const own = next++;
      return [
        ...numbers.map((n, i) => `${n} blob ${(blobs[i] ?? Buffer.alloc(0)).toString('hex')}`),
        `${own} edit ${JSON.stringify(edit(numbers))}`,
      ];
    });
    told.underWay = added;
    const result = file.appendAll(acts(count, label));
    if (result.ok) {
      told.saved = [...before, ...added];
      told.underWay = [];
    } else if (result.code !== 'not certain' && !file.readOnly) {
      told.underWay = [];
    }
  };

  const created = await createStudyFile(at, { studyId: 'session' }, options);
  if (!created.ok) return null;
  let file = created.value;
  append(file, 1, 'one');
  append(file, 2, 'two');
  file.close();
  // What a process killed in the middle of a write leaves, for the next opening to take away.
  fs.appendFileSync(at, Uint8Array.from([0xf7, 0x66, 0x72, 0x0a, 1]));
  const opened = await openStudyFile(at, options);
  if (!opened.ok) return null;
  file = opened.value;
  const found = await look(at);
  expect(mayBe(told)).toContainEqual(found);
  told.saved = [...found];
  told.underWay = [];
  append(file, 4, 'three');
  const gone = file.records.find(({ kind, removed }) => kind === 'blob' && !removed)?.sequence;
  if (gone !== undefined && !file.readOnly) {
    const before = told.saved;
    const after = before.map((line) =>
      line.startsWith(`${gone} `) ? `${gone} blob removed` : line,
    );
    const compacted = await file.compact([gone]);
    if (compacted.ok) told.saved = after;
    else told.or = after;
    if (file.closed) return file;
  }
  append(file, 2, 'four');
  await file.saveCopy(path.join(path.dirname(at), 'copy.understory'), { replace: true });
  append(file, 1, 'five');
  return file;
}

function mayBe(told: Told): string[][] {
  const choices = told.or === undefined ? [told.saved] : [told.saved, told.or];
  for (let end = 1; end <= told.underWay.length; end++) {
    if (told.underWay[end - 1]?.includes(' edit ')) {
      choices.push([...told.saved, ...told.underWay.slice(0, end)]);
    }
  }
  return choices;
}

async function operationsOf(counted: readonly Operation[], closing: boolean): Promise<number> {
  const storage = faultyStorage({ at: Infinity, fault: 'fails', counted }, closing);
  const file = await session(newPath(), storage, { saved: [], underWay: [] });
  file?.close();
  expect(storage.openHandles()).toBe(0);
  return storage.count();
}

describe('whichever storage operation goes wrong', () => {
  it.each<[Fault, readonly Operation[], string, boolean?]>([
    ['fails', writing, 'EIO'],
    ['fails', writing, 'ENOSPC'],
    ['half', writing, 'ENOSPC'],
    ['short', ['write'], 'EIO'],
    ['dead', writing, 'EIO'],
    ['fails', reading, 'EIO'],
    ['fails', writing, 'EIO', true],
    ['dead', writing, 'EIO', true],
    ['fails', reading, 'EIO', true],
  ])(
    '(%s, of %j, %s) the study is as before or after the last edit',
    async (fault, counted, code, closing = false) => {
      const total = await operationsOf(counted, closing);
      expect(total).toBeGreaterThanOrEqual(8);
      const hits = new Set<string>();
      for (let n = 1; n <= total; n++) {
        const at = newPath();
        const told: Told = { saved: [], underWay: [] };
        const storage = faultyStorage({ at: n, fault, counted, code }, closing);
        const file = await session(at, storage, told);
        const where = `operation ${n}, ${storage.hit()}`;
        hits.add(storage.hit() ?? 'none');
        storage.plan = null;
        if (fault === 'short') expect(file?.readOnly, where).toBe(false);
        file?.close();
        expect(storage.openHandles(), `${where}: handles left open`).toBe(0);
        if (!fs.existsSync(at)) {
          expect(told.saved, where).toEqual([]);
          continue;
        }
        const seen = await look(at);
        if (seen === 'empty' || seen === 'damaged') {
          // Only where its very creation was interrupted, and removing it too.
          expect(told.saved, where).toEqual([]);
          expect(fs.statSync(at).size).toBeLessThan(40);
          continue;
        }
        expect(mayBe(told), where).toContainEqual(seen);

        const again = await reopen(at, { storage: quickStorage });
        appendSamples(again, 1);
        const after = contents(again);
        again.close();
        expect(await look(at), where).toEqual(after);
        const left = fs
          .readdirSync(path.dirname(at))
          .filter((name) => name.startsWith('.understory'));
        const ours = left.filter((name) => fault !== 'dead' || !name.includes('-new-'));
        expect(ours, where).toEqual([]);
      }
      for (const operation of counted)
        expect([...hits], `${operation} never failed`).toContain(operation);
    },
  );
});

describe('a write that fails', () => {
  it.each(['fails', 'half'] as const)(
    '(%s) is taken back, and the study goes on',
    async (fault) => {
      const at = newPath();
      const storage = faultyStorage();
      const file = await create(at, { storage });
      appendSamples(file, 3);
      const before = fs.readFileSync(at);
      const { head, nextSequence } = file;
      storage.plan = { at: 1, fault, counted: ['write'], code: 'ENOSPC' };
      expect(file.append([Buffer.from('x')], () => ({ type: 'lost' }))).toMatchObject({
        ok: false,
        code: 'no space',
        cause: 'ENOSPC',
      });
      expect(fs.readFileSync(at).equals(before)).toBe(true);
      expect(file).toMatchObject({ head, nextSequence, readOnly: false });
      appendSamples(file, 1);
      expect(contents(file)).toHaveLength(nextSequence);
    },
  );

  it('is taken back on the drive too, for else a loss of power could bring it up again', async () => {
    const done: string[] = [];
    const plan = { at: 1, fault: 'half' as const, counted: ['write' as const] };
    const faulty = faultyStorage();
    const file = await create(newPath(), {
      storage: {
        ...faulty,
        write: (...args) => (done.push('write'), faulty.write(...args)),
        truncate: (...args) => (done.push('truncate'), faulty.truncate(...args)),
        sync: (...args) => (done.push('sync'), faulty.sync(...args)),
      },
    });
    done.length = 0;
    faulty.plan = plan;
    expect(file.append([], () => ({ type: 'lost' })).ok).toBe(false);
    expect(done).toEqual(['write', 'truncate', 'sync']);
  });

  it('and cannot be taken back leaves the study read-only', async () => {
    const at = newPath();
    const storage = faultyStorage();
    const file = await create(at, { storage });
    appendSamples(file, 3);
    const seen = contents(file);
    storage.plan = { at: 1, fault: 'dead', counted: ['write', 'truncate', 'sync'] };
    expect(file.append([], () => ({ type: 'lost' }))).toMatchObject({ code: 'cannot write' });
    expect(file).toMatchObject({ readOnly: true, readOnlyBecause: 'not undone' });
    storage.plan = null;
    expect(file.append([], () => 1)).toMatchObject({ code: 'read only' });
    expect(contents(file)).toEqual(seen);
    file.close();
    expect(await look(at)).toEqual(seen);
  });
});

describe('an fsync that fails', () => {
  it('is final: the study is read-only and says so', async () => {
    const at = newPath();
    const storage = faultyStorage();
    const file = await create(at, { storage });
    appendSamples(file, 3);
    const seen = contents(file);
    storage.plan = { at: 1, fault: 'fails', counted: ['sync'] };
    expect(file.append([], () => ({ type: 'uncertain' }))).toMatchObject({
      ok: false,
      code: 'not certain',
      cause: 'EIO',
    });
    storage.plan = null;
    expect(file).toMatchObject({ readOnly: true, readOnlyBecause: 'not certain' });
    expect(file.append([], () => 1)).toMatchObject({ code: 'read only' });
    expect(await file.compact([])).toMatchObject({ code: 'read only' });
    // What was saved before can be read and carried elsewhere.
    expect(contents(file)).toEqual(seen);
    const copy = path.join(newFolder(), 'copy.understory');
    expect((await file.saveCopy(copy)).ok).toBe(true);
    expect(await look(copy)).toEqual(seen);
  });
});

describe('a loss of power', () => {
  /** Every write, truncation and fsync of one file, in order. */
  type Step = { position: number; bytes: Buffer } | { size: number } | 'sync';

  it('after any operation, with any part of what was not synced, keeps what was saved', async () => {
    const at = newPath();
    const steps: Step[] = [];
    const savedAfter: { steps: number; lines: number }[] = [];
    const recording: Storage = {
      ...quickStorage,
      write(handle, bytes, position) {
        steps.push({ position, bytes: Buffer.from(bytes) });
        return quickStorage.write(handle, bytes, position);
      },
      truncate(handle, size) {
        steps.push({ size });
        quickStorage.truncate(handle, size);
      },
      sync(handle) {
        steps.push('sync');
        quickStorage.sync(handle);
      },
    };
    const file = await create(at, { storage: recording, owner: null });
    savedAfter.push({ steps: steps.length, lines: 0 });
    for (let round = 0; round < 5; round++) {
      appendSamples(file, 2);
      savedAfter.push({ steps: steps.length, lines: file.records.length });
    }
    const lines = contents(file);
    file.close();
    const acts = file.records.filter(({ kind }) => kind === 'edit').map(({ sequence }) => sequence);

    const image = newPath('image.understory');
    let images = 0;
    for (let end = 2; end <= steps.length; end++) {
      let done = Buffer.alloc(0);
      for (const step of steps.slice(0, end - 1)) done = applied(done, step);
      const last = steps[end - 1];
      if (last === undefined || last === 'sync' || !('bytes' in last)) continue;
      const saved = savedAfter.findLast(({ steps: count }) => count <= end - 1)?.lines ?? 0;
      for (let part = 0; part <= last.bytes.length; part += 7) {
        // The file's size may be on the drive before its bytes are.
        for (const filled of [0, 1000]) {
          const torn = applied(done, {
            position: last.position,
            bytes: last.bytes.subarray(0, part),
          });
          fs.writeFileSync(image, Buffer.concat([torn, Buffer.alloc(filled)]));
          const seen = await look(image);
          expect(seen, `step ${end}, ${part} bytes, ${filled} zeros`).toSatisfy(
            (found: unknown) =>
              Array.isArray(found) &&
              (found.length === saved || (found.length > saved && acts.includes(found.length))) &&
              found.every((line, index) => line === lines[index]),
          );
          images += 1;
        }
      }
    }
    expect(images).toBeGreaterThan(100);
  });

  function applied(bytes: Buffer, step: Step): Buffer<ArrayBuffer> {
    if (step === 'sync') return Buffer.from(bytes);
    if ('size' in step) return Buffer.from(bytes.subarray(0, step.size));
    const longer = Buffer.alloc(Math.max(bytes.length, step.position + step.bytes.length));
    bytes.copy(longer);
    step.bytes.copy(longer, step.position);
    return longer;
  }
});

describe('reading that fails later', () => {
  it('throws a fault that names the record', async () => {
    const at = newPath();
    const storage = faultyStorage();
    const file = await create(at, { storage });
    appendSamples(file, 2);
    storage.plan = { at: 1, fault: 'fails', counted: ['read'] };
    expect(() => file.readBlob(2)).toThrow('cannot read');
    storage.plan = null;
    const bytes = fs.readFileSync(at);
    const blob = file.records[1];
    bytes[(blob?.offset ?? 0) + 113] = 0;
    fs.writeFileSync(at, bytes);
    expect(() => file.readBlob(2)).toThrow('damaged at record 2');
    expect(() => [...file.edits()]).not.toThrow();
  });

  it('makes recovery say so and write nothing', async () => {
    const at = newPath();
    const file = await create(at);
    appendSamples(file, 2);
    file.close();
    const to = newPath('b');
    for (let n = 1; n <= 3; n++) {
      const storage = faultyStorage({
        at: n,
        fault: 'fails',
        counted: ['write', 'sync', 'rename'],
        code: 'ENOSPC',
      });
      const result = await recoverStudyFile(at, to, { storage });
      expect(result).toMatchObject({ ok: false, code: 'no space' });
      expect(fs.readdirSync(path.dirname(to))).toEqual([]);
      expect(storage.openHandles()).toBe(0);
    }
    expect(valueOf(await recoverStudyFile(at, to)).missing).toEqual([]);
  });
});
