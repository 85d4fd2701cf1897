import { mkdtemp, readFile, rm, stat, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { faultLine, faultLog } from '../../../main/link/index.ts';

const at = '2026-03-01T10:00:00.000Z';

describe('a line on a fault', () => {
  it('says when, where, what kind and at which places, and not what the error says', () => {
    const line = faultLine(at, 'find', new RangeError('the text “no boat” is not known'));
    expect(line).toMatch(
      /^2026-03-01T10:00:00\.000Z find: RangeError at .*faults\.test\.ts:\d+:\d+/u,
    );
    expect(line).not.toContain('boat');
    expect(line.trimEnd()).not.toContain('\n');
  });

  it('keeps out lines of a transcript that look like places in the code', () => {
    const line = faultLine(at, 'find', new Error('He said\n    at the harbour (mother.js:1:2)\n'));
    expect(line).not.toContain('harbour');
    expect(line).not.toContain('mother');
  });

  it('keeps out folders, which may hold the name of a person', () => {
    const error = new Error('x');
    error.stack =
      'Error: x\n    at run (file:///home/rosa/app/main.js:3:4)\n    at /home/rosa/b.js:1:1';
    expect(faultLine(at, 'find', error)).toBe(`${at} find: Error at run main.js:3:4, b.js:1:1\n`);
  });

  it('says nothing of an error whose stack does not hold its message, of names set to free text, of values', () => {
    const changed = new Error('one');
    expect(changed.stack).toContain('Error: one');
    changed.message = 'two';
    changed.name = 'my mother said';
    expect(faultLine(at, 'find', changed)).toBe(`${at} find: Error\n`);
    expect(faultLine(at, 'find', 'a string')).toBe(`${at} find: string\n`);
    expect(faultLine(at, 'find', Object.assign(new Error('x'), { code: 'EIO' }))).toContain(
      'Error EIO at ',
    );
  });
});

describe('the log of faults', () => {
  let folder = '';
  beforeEach(async () => {
    folder = await mkdtemp(join(tmpdir(), 'understory-'));
  });
  afterEach(() => rm(folder, { recursive: true }));

  it('grows by a line each, readable by its owner alone', async () => {
    const path = join(folder, 'settings', 'faults.log');
    const log = faultLog(path, () => at);
    await log('find', new Error('x'));
    await log('fit', new Error('y'));
    expect((await readFile(path, 'utf8')).split('\n')).toHaveLength(3);
    if (process.platform !== 'win32') expect((await stat(path)).mode & 0o077).toBe(0);
  });

  it('stops nothing where it cannot be written', async () => {
    await writeFile(join(folder, 'file'), '');
    const log = faultLog(join(folder, 'file', 'faults.log'), () => at);
    await expect(log('find', new Error('x'))).resolves.toBeUndefined();
  });
});
