import * as fs from 'node:fs';
import * as path from 'node:path';
import { describe, expect, it } from 'vitest';
import {
  createStudyFile,
  isLocked,
  nodeStorage,
  openStudyFile,
  recoverStudyFile,
  type StudyFile,
} from '../../../main/project/index.ts';
import { encodeHead, decodeHead, HEAD_BYTES, headFor } from '../../../main/project/frame.ts';
import { decodeHeader, encodeHeader } from '../../../main/project/header.ts';
import { KEY_HALF_BYTES } from '../../../main/project/password.ts';
import {
  appendSamples,
  contents,
  countedSalts,
  create,
  newFolder,
  newPath,
  reopen,
  valueOf,
} from './study-folder.ts';

const work = { n: 1024, r: 8, p: 1 };
const password = 'moss after four rains';

async function lockedStudy(at = newPath(), edits = 5): Promise<StudyFile> {
  const file = await create(at, { work });
  appendSamples(file, edits);
  valueOf(await file.setPassword(password));
  return file;
}

async function codeOf(at: string, given?: string): Promise<string> {
  const opened = await openStudyFile(at, { readOnly: true, password: given });
  if (opened.ok) opened.value.close();
  return opened.ok ? 'opened' : opened.code;
}

describe('a study with a password', () => {
  it('may be started so, and is written and read as any other', async () => {
    const at = newPath();
    const options = { work, randomBytes: countedSalts() };
    const made = await createStudyFile(at, { studyId: 'a study of ours', password }, options);
    const file = valueOf(made);
    expect(file.locked).toBe(true);
    appendSamples(file, 4);
    const { head } = file;
    const seen = contents(file);
    file.close();
    for (const readOnly of [true, false]) {
      const again = await reopen(at, { readOnly, password });
      expect([again.head, again.locked, contents(again)]).toEqual([head, true, seen]);
      again.close();
    }
    const plain = await create(newPath());
    appendSamples(plain, 4);
    expect(plain.head).toBe(head);
  });

  it('is opened by its password alone, and a wrong one tells nothing else', async () => {
    const at = newPath();
    const file = await lockedStudy(at);
    file.close();
    expect(await codeOf(at)).toBe('locked');
    expect(await openStudyFile(at, { password: `${password} ` })).toEqual({
      ok: false,
      code: 'wrong password',
      path: at,
    });
    expect(await codeOf(at, '')).toBe('wrong password');
    expect(await codeOf(at, password)).toBe('opened');
    expect(fs.readdirSync(path.dirname(at))).toEqual(['a.understory']);
  });

  it('takes the same characters however they were typed', async () => {
    const at = newPath();
    const file = await create(at, { work });
    valueOf(await file.setPassword('Übergänge é'.normalize('NFD')));
    file.close();
    expect(await codeOf(at, 'Übergänge é'.normalize('NFC'))).toBe('opened');
  });

  it('keeps records, numbers and head when it is set, changed and removed', async () => {
    const at = newPath();
    const file = await create(at, { work });
    appendSamples(file, 5);
    valueOf(await file.compact([2]));
    const seen = contents(file);
    const { head, size } = file;
    const steps: (string | null)[] = [password, 'another one altogether', null];
    for (const [index, next] of steps.entries()) {
      const before = file.size;
      expect(valueOf(await file.setPassword(next))).toEqual({ before, after: file.size });
      expect([file.head, contents(file), file.locked]).toEqual([head, seen, next !== null]);
      expect(await codeOf(at, next ?? undefined)).toBe('opened');
      const previous = steps[index - 1];
      if (next !== null && previous) expect(await codeOf(at, previous)).toBe('wrong password');
    }
    expect(file.size).toBe(size);
    appendSamples(file, 1);
    file.close();
    expect(contents(await reopen(at)).slice(0, seen.length)).toEqual(seen);
    expect(fs.readdirSync(path.dirname(at))).toContain('a.understory');
  });

  it('is written under a new data key each time', async () => {
    const file = await lockedStudy();
    const first = fs.readFileSync(file.path);
    valueOf(await file.setPassword(password));
    const second = fs.readFileSync(file.path);
    expect(second).toHaveLength(first.length);
    const { offset, length } = file.records[0] ?? { offset: 0, length: 0 };
    const payload = (bytes: Buffer) =>
      bytes.subarray(offset + HEAD_BYTES, offset + HEAD_BYTES + length);
    expect(payload(second).equals(payload(first))).toBe(false);
  });

  it('goes on being written after it was set, on every kind of system', async () => {
    for (const mustCloseToReplace of [false, true]) {
      const file = await create(newPath(), {
        work,
        storage: { ...nodeStorage, mustCloseToReplace },
      });
      appendSamples(file, 2);
      valueOf(await file.setPassword(password));
      appendSamples(file, 3);
      valueOf(await file.compact([]));
      appendSamples(file, 1);
      const seen = contents(file);
      file.close();
      expect(contents(await reopen(file.path, { password }))).toEqual(seen);
    }
  });

  it('has copies that are as locked as it is', async () => {
    const file = await lockedStudy();
    const to = path.join(newFolder(), 'copy.understory');
    valueOf(await file.saveCopy(to));
    expect([isLocked(to), await codeOf(to), await codeOf(to, password)]).toEqual([
      true,
      'locked',
      'opened',
    ]);
    expect(isLocked(path.join(newFolder(), 'nothing'))).toBe(null);
  });

  it('knows its own password, and an unlocked study has none', async () => {
    const file = await lockedStudy();
    expect([await file.isPassword(password), await file.isPassword('no')]).toEqual([true, false]);
    valueOf(await file.setPassword(null));
    expect(await file.isPassword('')).toBe(false);
  });

  it('refuses what is no password, and what may not be written', async () => {
    const at = newPath();
    const file = await create(at, { work });
    expect(await file.setPassword('seven77')).toMatchObject({ code: 'password too short' });
    expect(await file.setPassword('x'.repeat(1025))).toMatchObject({ code: 'password too long' });
    expect(file.locked).toBe(false);
    valueOf(await file.setPassword('🌧🌧🌧🌧🌧🌧🌧🌧'));
    file.close();
    const reader = await reopen(at, { readOnly: true, password: '🌧🌧🌧🌧🌧🌧🌧🌧' });
    expect(await reader.setPassword(null)).toMatchObject({ code: 'read only' });
    const tooShort = await createStudyFile(newPath(), { studyId: 'x', password: 'short' });
    expect(tooShort).toMatchObject({ code: 'password too short' });
  });

  it('that is open elsewhere says so before it asks for a password', async () => {
    const file = await lockedStudy();
    expect(await openStudyFile(file.path)).toMatchObject({ code: 'open elsewhere' });
  });
});

describe('what a locked header asks for', () => {
  const asking = (changes: Record<string, unknown>): Buffer => {
    const json = {
      derivation: 'scrypt',
      ...work,
      salt: Buffer.alloc(16).toString('base64'),
      key: Buffer.alloc(60).toString('base64'),
      ...changes,
    };
    const half = Buffer.alloc(KEY_HALF_BYTES, ' ');
    half.write(JSON.stringify(json));
    return encodeHeader('some id', true, Buffer.concat([half, half]));
  };

  it.each([
    ['100 GB of memory', { n: 2 ** 30, r: 100 }, 'asks too much'],
    ['a block of 100 GB', { n: 2, r: 800_000_000 }, 'asks too much'],
    ['days of work', { p: 1_000_000 }, 'asks too much'],
    ['numbers beyond any', { n: 1e300 }, 'damaged'],
    ['no number', { n: '1024' }, 'damaged'],
    ['a cost that is no power of two', { n: 1000 }, 'damaged'],
    ['a derivation of another version', { derivation: 'argon2id' }, 'newer version'],
    ['a key of another length', { key: 'AAAA' }, 'damaged'],
    ['what it should', {}, 'wrong password'],
  ])('is refused before anything is derived: %s', async (_, changes, code) => {
    const at = newPath();
    fs.writeFileSync(at, asking(changes));
    expect(await codeOf(at, password)).toBe(code);
  });

  it('may be damaged in one of its copies', async () => {
    const file = await lockedStudy();
    file.close();
    const bytes = fs.readFileSync(file.path);
    const decoded = decodeHeader(bytes);
    if (!decoded.ok) throw new Error('no header');
    const { keyRegion, studyId, length } = decoded.header;
    for (const half of [0, KEY_HALF_BYTES]) {
      const hurt = Buffer.from(keyRegion);
      hurt.fill(0, half, half + 600);
      const start = encodeHeader(studyId, true, hurt);
      fs.writeFileSync(file.path, Buffer.concat([start, bytes.subarray(length)]));
      expect(await codeOf(file.path, password)).toBe('opened');
    }
  });
});

describe('a locked study that somebody without the key has changed', () => {
  it('is damaged, whichever byte of a record it is', async () => {
    const file = await lockedStudy(newPath(), 2);
    file.close();
    const bytes = fs.readFileSync(file.path);
    const first = file.records[0]?.offset ?? 0;
    for (let place = first; place < bytes.length; place += 37) {
      const flipped = Buffer.from(bytes);
      flipped[place] = (flipped[place] ?? 0) ^ 1;
      fs.writeFileSync(file.path, flipped);
      expect(await codeOf(file.path, password), `byte ${place}`).toBe('damaged');
    }
  });

  it('is damaged where a plain record was put at its end', async () => {
    const file = await lockedStudy(newPath(), 2);
    file.close();
    const last = file.nextSequence;
    const body = Buffer.from('{"type":"forged"}');
    const head = headFor('edit', last, Buffer.alloc(16, 1), body, Buffer.from(file.head, 'hex'));
    fs.appendFileSync(file.path, Buffer.concat([encodeHead(head), body]));
    expect(await openStudyFile(file.path, { password })).toMatchObject({
      code: 'damaged',
      sequence: last,
    });
  });

  it('is damaged where a payload stands under another record’s head', async () => {
    const at = newPath();
    const file = await create(at, { work });
    for (const one of [1, 2, 3]) valueOf(file.append([], () => ({ one })));
    valueOf(await file.setPassword(password));
    file.close();
    const bytes = fs.readFileSync(at);
    const [first, second] = file.records;
    if (!first || !second) throw new Error('no records');
    bytes.copyWithin(second.offset + HEAD_BYTES, first.offset + HEAD_BYTES, second.offset);
    fs.writeFileSync(at, bytes);
    expect(await openStudyFile(at, { password })).toMatchObject({ code: 'damaged', sequence: 2 });
  });
});

describe('recovery of a locked study', () => {
  const options = { password, work };

  it('gives a study locked with the same password, under another key', async () => {
    const file = await lockedStudy(newPath(), 6);
    file.close();
    const bytes = fs.readFileSync(file.path);
    const broken = file.records[3];
    if (!broken) throw new Error('no record');
    bytes[broken.offset + HEAD_BYTES + 20] ^= 1;
    fs.writeFileSync(file.path, bytes);
    const to = path.join(newFolder(), 'new.understory');
    expect(await recoverStudyFile(file.path, to)).toMatchObject({ code: 'locked' });
    expect(await recoverStudyFile(file.path, to, { password: 'no' })).toMatchObject({
      code: 'wrong password',
    });
    const recovered = valueOf(await recoverStudyFile(file.path, to, options));
    expect(recovered.missing.map(({ sequence }) => sequence)).toEqual([4]);
    expect([recovered.head, recovered.headKept]).toEqual([file.head, true]);
    expect(await codeOf(to)).toBe('locked');
    const again = await reopen(to, { password });
    expect(contents(again)[3]).toMatch(/removed/);
    expect(again.records).toHaveLength(file.records.length);
  });

  it('rebuilds a record whose head is damaged', async () => {
    const file = await lockedStudy(newPath(), 6);
    const seen = contents(file);
    file.close();
    const bytes = fs.readFileSync(file.path);
    for (const index of [2, file.records.length - 1]) {
      const record = file.records[index];
      const hurt = Buffer.from(bytes);
      hurt.fill(7, record?.offset, (record?.offset ?? 0) + 70);
      fs.writeFileSync(file.path, hurt);
      const to = path.join(newFolder(), 'new.understory');
      const recovered = valueOf(await recoverStudyFile(file.path, to, options));
      expect([recovered.rebuilt, recovered.missing, recovered.headKept]).toEqual([1, [], true]);
      expect(contents(await reopen(to, { password }))).toEqual(seen);
    }
  });

  it('finds the key and the id in a damaged header', async () => {
    const file = await lockedStudy(newPath(), 3);
    const seen = contents(file);
    file.close();
    const bytes = fs.readFileSync(file.path);
    bytes.fill(0xee, 45, 45 + 1500);
    fs.writeFileSync(file.path, bytes);
    expect(await codeOf(file.path, password)).toBe('damaged');
    const to = path.join(newFolder(), 'new.understory');
    const recovered = valueOf(await recoverStudyFile(file.path, to, options));
    expect(recovered).toMatchObject({ missing: [], headKept: true });
    expect(contents(await reopen(to, { password }))).toEqual(seen);
    fs.writeFileSync(file.path, Buffer.concat([bytes.subarray(0, 40), bytes.subarray(4300)]));
    const other = path.join(newFolder(), 'other.understory');
    expect(await recoverStudyFile(file.path, other, options)).toMatchObject({ ok: false });
  });
});

describe('what can be read of a locked file without its key', () => {
  it('is each record’s kind, number, size and commitment, and no salt', async () => {
    const file = await lockedStudy();
    const bytes = fs.readFileSync(file.path);
    for (const { offset, sequence } of file.records) {
      const head = decodeHead(bytes.subarray(offset));
      expect(head).toMatchObject({ sequence, encrypted: true, removed: false });
      expect(head?.salt.every((byte) => byte === 0)).toBe(true);
    }
  });
});
