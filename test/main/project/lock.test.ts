import * as fs from 'node:fs';
import { hostname, tmpdir } from 'node:os';
import * as path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { bringForward, openStudyFile } from '../../../main/project/index.ts';
import { nameBeside } from '../../../main/project/name-beside.ts';
import { usualLockPlace, type LockPlace } from '../../../main/project/writers-lock.ts';
import { actNumbered } from './children/act-numbered.ts';
import { buildChild, startChild } from './child-process.ts';
import { appendSamples, contents, create, look, newPath, reopen, valueOf } from './study-folder.ts';

let script = '';
let removeScript = () => {};
beforeAll(async () => {
  ({ script, remove: removeScript } = await buildChild());
});
afterAll(() => removeScript());

const places: LockPlace[] = process.platform === 'win32' ? ['name'] : [usualLockPlace(), 'folder'];

describe.each([...new Set(places)])('the writer’s lock by %s', (lockPlace) => {
  it('lets one process write and any number read', async () => {
    const at = newPath();
    const file = await create(at, { lockPlace });
    appendSamples(file, 3);
    const second = startChild(script, 'hold', at, lockPlace);
    expect(await second.line()).toBe('open elsewhere');
    const reader = startChild(script, 'read', at, lockPlace);
    expect(await reader.line()).toBe('open');
    appendSamples(file, 1);
    await Promise.all([second.finish(), reader.finish()]);
    appendSamples(file, 1);
  });

  it('holds against this very process too, and is free once closed', async () => {
    const at = newPath();
    const file = await create(at, { lockPlace });
    expect(await openStudyFile(at, { lockPlace })).toMatchObject({
      code: 'open elsewhere',
      owner: { host: hostname() },
    });
    file.close();
    for (let round = 0; round < 3; round++) {
      const again = await reopen(at, { lockPlace });
      expect((await openStudyFile(at, { lockPlace })).ok).toBe(false);
      again.close();
    }
  });

  it('is another one for each study', async () => {
    const [one, two] = [newPath(), newPath()];
    await create(one, { lockPlace });
    await create(two, { lockPlace });
    expect(await openStudyFile(one, { lockPlace })).toMatchObject({ code: 'open elsewhere' });
  });

  it('goes by the file and not by its name', async () => {
    const at = newPath();
    await create(at, { lockPlace });
    const other = path.join(path.dirname(at), 'another name.understory');
    fs.linkSync(at, other);
    expect(await openStudyFile(other, { lockPlace })).toMatchObject({ code: 'open elsewhere' });
  });

  it('lets a second opener call the first window forward', async () => {
    const at = newPath();
    (await create(at)).close();
    const first = startChild(script, 'hold', at, lockPlace);
    expect(await first.line()).toBe('open');
    expect(await bringForward(at, { lockPlace })).toBe(true);
    expect(await first.line()).toBe('forward');
    await first.finish();
    expect(await bringForward(at, { lockPlace })).toBe(false);
    expect(await bringForward(`${at} not there`, { lockPlace })).toBe(false);
  });

  it('dies with its process, however that ends', async () => {
    const at = newPath();
    (await create(at)).close();
    for (let round = 0; round < 2; round++) {
      const child = startChild(script, 'hold', at, lockPlace);
      expect(await child.line()).toBe('open');
      expect(await openStudyFile(at, { lockPlace })).toMatchObject({ code: 'open elsewhere' });
      await child.kill('SIGKILL');
      const file = await reopen(at, { lockPlace });
      appendSamples(file, 1);
      file.close();
    }
  });

  it('is held by a process that is stopped and answers nobody', async () => {
    if (process.platform === 'win32') return;
    const at = newPath();
    (await create(at)).close();
    const child = startChild(script, 'hold', at, lockPlace);
    expect(await child.line()).toBe('open');
    void child.kill('SIGSTOP');
    expect(await openStudyFile(at, { lockPlace })).toMatchObject({ code: 'open elsewhere' });
    await child.kill('SIGKILL');
    expect((await reopen(at, { lockPlace })).readOnly).toBe(false);
  });

  it('goes with the study when it is compacted into a new file', async () => {
    const at = newPath();
    const file = await create(at, { lockPlace });
    appendSamples(file, 4);
    valueOf(await file.compact([2]));
    expect(await openStudyFile(at, { lockPlace })).toMatchObject({ code: 'open elsewhere' });
    appendSamples(file, 1);
    file.close();
    expect((await reopen(at, { lockPlace })).records).toHaveLength(9);
  });
});

describe('a lock in a folder', () => {
  it('taken over by somebody else stops this one’s writing', async () => {
    if (process.platform === 'win32') return;
    const at = newPath();
    const folder = path.join(tmpdir(), `understory-${process.getuid?.() ?? 0}`);
    const before = new Set(fs.existsSync(folder) ? fs.readdirSync(folder) : []);
    const file = await create(at, { lockPlace: 'folder' });
    const ours = fs.readdirSync(folder).find((name) => !before.has(name)) ?? '';
    const socket = path.join(folder, ours);
    fs.renameSync(socket, `${socket}.away`);
    // Cleared away by the system is not taken.
    appendSamples(file, 1);
    fs.writeFileSync(socket, '');
    expect(file.append([], () => 1)).toMatchObject({ code: 'changed underneath', how: 'lock' });
    fs.rmSync(socket);
    fs.renameSync(`${socket}.away`, socket);
  });
});

describe('the owner note', () => {
  it('stands beside the study while it is open for writing, and is gone after', async () => {
    const at = newPath();
    const file = await create(at, { owner: { host: 'north', name: 'ruth' } });
    const note = nameBeside(at, 'open');
    expect(fs.readdirSync(path.dirname(at)).sort()).toEqual([path.basename(note), 'a.understory']);
    expect(JSON.parse(fs.readFileSync(note, 'utf8'))).toMatchObject({
      host: 'north',
      name: 'ruth',
    });
    file.close();
    expect(fs.readdirSync(path.dirname(at))).toEqual(['a.understory']);
    await reopen(at, { readOnly: true });
    expect(fs.readdirSync(path.dirname(at))).toEqual(['a.understory']);
  });

  it('of another machine refuses, says who, and yields to a person who knows better', async () => {
    const at = newPath();
    (await create(at)).close();
    const note = nameBeside(at, 'open');
    const owner = { host: 'another', name: 'ruth', since: '2020-01-01T00:00:00.000Z' };
    fs.writeFileSync(note, JSON.stringify(owner));
    expect(await openStudyFile(at)).toMatchObject({ ok: false, code: 'noted elsewhere', owner });
    expect(JSON.parse(fs.readFileSync(note, 'utf8'))).toEqual(owner);
    expect((await openStudyFile(at, { readOnly: true })).ok).toBe(true);
    (await reopen(at, { despiteNote: true })).close();
    expect(fs.existsSync(note)).toBe(false);
  });

  it('of this machine, left by a process that was killed, is no hindrance', async () => {
    const at = newPath();
    (await create(at)).close();
    const child = startChild(script, 'hold', at);
    expect(await child.line()).toBe('open');
    await child.kill('SIGKILL');
    expect(fs.existsSync(nameBeside(at, 'open'))).toBe(true);
    (await reopen(at)).close();
    expect(fs.readdirSync(path.dirname(at))).toEqual(['a.understory']);
  });

  it.each(['', 'no JSON', '[1]', '{"host":1}', 'x'.repeat(9000)])(
    'that says nothing (%#) hinders nobody',
    async (text) => {
      const at = newPath();
      (await create(at)).close();
      fs.writeFileSync(nameBeside(at, 'open'), text);
      (await reopen(at)).close();
      expect(fs.readdirSync(path.dirname(at))).toEqual(['a.understory']);
    },
  );

  it('of whoever went ahead despite ours is not ours to remove', async () => {
    const at = newPath();
    const file = await create(at);
    fs.writeFileSync(nameBeside(at, 'open'), '{"host":"another","name":"n","since":"s"}');
    file.close();
    expect(fs.existsSync(nameBeside(at, 'open'))).toBe(true);
  });
});

describe('a process killed in the middle of appending', () => {
  it('loses nothing that it was told is saved, in each of three rounds', async () => {
    const at = newPath();
    (await create(at)).close();
    const expected: string[] = [];
    const extend = (upTo: number) => {
      while (expected.length < upTo) {
        for (const { blobs = [], edit } of actNumbered(expected.length + 1)) {
          const start = expected.length + 1;
          const numbers = blobs.map((_, index) => start + index);
          blobs.forEach((blob, index) =>
            expected.push(`${start + index} blob ${Buffer.from(blob).toString('hex')}`),
          );
          const own = expected.length + 1;
          expected.push(`${own} edit ${JSON.stringify(edit(numbers, own))}`);
        }
      }
    };
    let seed = 20_261;
    const draw = (below: number) => {
      seed = (Math.imul(seed, 1_103_515_245) + 12_345) >>> 0;
      return Math.floor((seed / 2 ** 32) * below);
    };
    for (let round = 0; round < 3; round++) {
      const child = startChild(script, 'append', at);
      expect(await child.line()).toBe('open');
      let saved = 0;
      for (let lines = 3 + draw(20); lines > 0; lines--) {
        saved = Number((await child.line())?.replace('saved ', ''));
      }
      const spin = draw(4000);
      for (let turn = 0; turn < spin; turn++) Math.sqrt(turn);
      await child.kill('SIGKILL');
      for (const line of await child.rest()) saved = Number(line.replace('saved ', ''));

      const seen = await look(at);
      extend(seen.length);
      expect(seen.length, `round ${round}`).toBeGreaterThanOrEqual(saved);
      expect(seen, `round ${round}`).toEqual(expected.slice(0, seen.length));
      const file = await reopen(at);
      expect(contents(file)).toEqual(seen);
      // The child counts on from whole acts: finish a half one here.
      if (file.records.length !== expected.length) {
        const [, second] = actNumbered(saved + 1);
        if (second !== undefined) valueOf(file.appendAll([second]));
      }
      expect(contents(file)).toEqual(expected);
      file.close();
    }
  });
});
