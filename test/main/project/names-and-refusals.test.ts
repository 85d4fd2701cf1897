import { execFileSync } from 'node:child_process';
import * as fs from 'node:fs';
import * as path from 'node:path';
import { describe, expect, it } from 'vitest';
import { createStudyFile, openStudyFile } from '../../../main/project/index.ts';
import { encodeHeader } from '../../../main/project/header.ts';
import { sha256 } from '../../../main/project/chain.ts';
import {
  appendSamples,
  contents,
  create,
  look,
  newFolder,
  newPath,
  reopen,
} from './study-folder.ts';

const longest = `${'x'.repeat(255 - '.understory'.length)}.understory`;

describe('names of a study file', () => {
  it.each([
    'with spaces in it.understory',
    `it's "quoted" & <odd>.understory`,
    '🦊 Füchse – 狐.understory',
    '-rf.understory',
    '.hidden',
    'no ending',
    longest,
  ])('may be %s', async (name) => {
    const at = newPath(name);
    const file = await create(at);
    appendSamples(file, 2);
    file.close();
    expect((await reopen(at)).records).toHaveLength(4);
    const copy = path.join(newFolder(), name);
    expect((await (await reopen(at, { readOnly: true })).saveCopy(copy)).ok).toBe(true);
    expect(await look(copy)).toEqual(await look(at));
  });

  it('longer than the drive takes are refused', async () => {
    const at = newPath('y'.repeat(300));
    const result = await createStudyFile(at, { studyId: 'i' });
    expect(result).toMatchObject({ ok: false, code: 'name too long', path: at });
    expect(await openStudyFile(at)).toMatchObject({ ok: false, code: 'name too long' });
  });
});

describe('creating a study file', () => {
  it('refuses a name that is taken, and leaves that file as it is', async () => {
    const at = newPath();
    fs.writeFileSync(at, 'something of somebody');
    expect(await createStudyFile(at, { studyId: 'i' })).toMatchObject({ code: 'already there' });
    expect(fs.readFileSync(at, 'utf8')).toBe('something of somebody');
  });

  it('refuses a folder that is not there', async () => {
    const at = path.join(newFolder(), 'nowhere', 'a.understory');
    expect(await createStudyFile(at, { studyId: 'i' })).toMatchObject({ code: 'not found' });
  });

  it('lets nobody else on the machine read it', async () => {
    const at = newPath();
    await create(at);
    expect(fs.statSync(at).mode & 0o777).toBe(0o600);
  });

  it.each(['', 'z'.repeat(256)])('takes a study id of 1 to 255 bytes only', async (studyId) => {
    await expect(createStudyFile(newPath(), { studyId })).rejects.toThrow(/1 to 255 bytes/);
  });
});

describe('opening refuses', () => {
  it.each([
    ['nothing at all', null, 'not found'],
    ['an empty file', Buffer.alloc(0), 'empty'],
    ['a text', Buffer.from('Anna: hello\n'), 'not a study'],
    ['a text shorter than any header', Buffer.from('A'), 'not a study'],
    ['zeros', Buffer.alloc(4096), 'not a study'],
    ['a picture', Buffer.from('89504e470d0a1a0a0000000d49484452', 'hex'), 'not a study'],
    ['half a header', encodeHeader('some id').subarray(0, 20), 'damaged'],
    ['most of a header', encodeHeader('some id').subarray(0, 38), 'damaged'],
    ['a later version', changedHeader((bytes) => bytes.writeUInt32LE(2, 8)), 'newer version'],
    [
      'a flag of a later version',
      changedHeader((bytes) => bytes.writeUInt32LE(2, 12)),
      'newer version',
    ],
    ['a password', encodeHeader('some id', true, Buffer.from('{"kdf":{}}')), 'locked'],
    ['a header of 4 GB', changedHeader((bytes) => bytes.writeUInt32LE(0xffffffff, 16)), 'damaged'],
    ['a header of no length', changedHeader((bytes) => bytes.writeUInt32LE(0, 16)), 'damaged'],
    [
      'an id longer than the header',
      changedHeader((bytes) => bytes.writeUInt16LE(60000, 20)),
      'damaged',
    ],
    [
      'a key region longer than the header',
      changedHeader((bytes) => bytes.writeUInt16LE(60000, 22)),
      'damaged',
    ],
  ])('%s', async (_, bytes, code) => {
    const at = newPath();
    if (bytes !== null) fs.writeFileSync(at, bytes);
    for (const readOnly of [true, false]) {
      const result = await openStudyFile(at, { readOnly });
      expect(result).toMatchObject({ ok: false, code });
      if (code === 'damaged') {
        expect(result).toMatchObject({ reason: 'header', offset: 0, sequence: 0 });
      }
    }
    if (bytes !== null) expect(fs.readFileSync(at).equals(bytes)).toBe(true);
    expect(fs.readdirSync(path.dirname(at))).toHaveLength(bytes === null ? 0 : 1);
  });

  it('a folder, and a pipe that nobody writes to', async () => {
    const folder = newFolder();
    expect(await openStudyFile(folder)).toMatchObject({ code: 'not a study' });
    if (process.platform === 'win32') return;
    const pipe = path.join(folder, 'pipe');
    execFileSync('mkfifo', [pipe]);
    expect(await openStudyFile(pipe)).toMatchObject({ code: 'not a study' });
  });

  it.skipIf(process.getuid?.() === 0 || process.platform === 'win32')(
    'writing where the system does not allow it, and still reads',
    async () => {
      const at = newPath();
      (await create(at)).close();
      fs.chmodSync(at, 0o400);
      expect(await openStudyFile(at)).toMatchObject({ code: 'not allowed' });
      expect((await openStudyFile(at, { readOnly: true })).ok).toBe(true);
    },
  );

  it('takes a frame that asks for more than there is as an interrupted write, at no cost', async () => {
    const at = newPath();
    const file = await create(at);
    appendSamples(file, 1);
    file.close();
    // The head of a frame of 1 GiB, whole, and nothing after it.
    const { headFor, encodeHead } = await import('../../../main/project/frame.ts');
    const head = headFor(
      'edit',
      2,
      Buffer.alloc(16),
      Buffer.from('{}'),
      Buffer.from(file.head, 'hex'),
    );
    fs.appendFileSync(at, encodeHead({ ...head, length: 2 ** 30 }));
    const again = await reopen(at, { readOnly: true });
    expect(again.records).toHaveLength(1);
    expect(again.leftOver).toBe(112);
  });

  it('nothing because of what the clock says', async () => {
    const at = newPath();
    const file = await create(at);
    appendSamples(file, 2);
    file.close();
    const early = new Date('1970-01-02T00:00:00Z');
    fs.utimesSync(at, early, early);
    const again = await reopen(at);
    appendSamples(again, 1);
    expect(contents(again)).toHaveLength(5);
  });

  it('follows a link to the study itself', async () => {
    const at = newPath();
    (await create(at)).close();
    const link = path.join(newFolder(), 'link.understory');
    fs.symlinkSync(at, link);
    const file = await reopen(link);
    expect(file.path).toBe(fs.realpathSync(at));
    expect(await openStudyFile(at)).toMatchObject({ code: 'open elsewhere' });
  });
});

/** A header with some bytes changed and its check made to fit again, as a hostile hand would. */
function changedHeader(change: (bytes: Buffer) => void): Buffer {
  const bytes = Buffer.from(encodeHeader('some id'));
  change(bytes);
  bytes.set(sha256(bytes.subarray(0, bytes.length - 8)).subarray(0, 8), bytes.length - 8);
  return bytes;
}
