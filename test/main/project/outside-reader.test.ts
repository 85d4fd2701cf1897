import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import * as fs from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { appendSamples, create, newPath, reopen, valueOf } from './study-folder.ts';

const script = fileURLToPath(new URL('../../outside/read-study.py', import.meta.url));
// The interpreter itself: python3 on the path may be a slow script that looks for it.
const python = ['python3', 'python']
  .map((name) => {
    const ask = 'import sys; print(sys.executable if sys.version_info >= (3, 8) else "")';
    return (spawnSync(name, ['-c', ask], { encoding: 'utf8' }).stdout ?? '').trim();
  })
  .find((found) => found !== '');
const title = 'a reader written from the format page alone, with none of our code';

function read(...args: string[]) {
  const { status, stdout, stderr } = spawnSync(
    python ?? 'python3',
    ['-B', '-X', 'utf8', script, ...args],
    {
      encoding: 'utf8',
    },
  );
  return { status, lines: stdout.trimEnd().split(/\r?\n/), stderr };
}

describe.skipIf(python === undefined)(
  python === undefined ? `${title} (skipped: no python3)` : title,
  () => {
    it('sees the records that we see, and the same head', async () => {
      const at = newPath('🦊 and "quotes".understory');
      const file = await create(at);
      valueOf(
        file.append([Buffer.from('Anna: „nein“ 🦊')], (blobs) => ({ blobs, memo: 'ä 🦊 "' })),
      );
      appendSamples(file, 5);
      valueOf(await file.compact([1]));
      const expected = file.records.map(({ sequence, kind, offset, length, removed }) => {
        const start = `${sequence} ${kind} ${offset} ${length}`;
        if (removed) return `${start} removed`;
        if (kind === 'blob') {
          return `${start} ${createHash('sha256').update(file.readBlob(sequence)).digest('hex')}`;
        }
        return start;
      });
      const { lines, status } = read(at);
      expect(status).toBe(0);
      expect(lines[0]).toBe('study a study of ours');
      expect(lines.at(-1)).toBe(`head ${file.head}`);
      lines.slice(1, -1).forEach((line, index) => {
        const ours = expected[index] ?? '';
        if (!ours.includes(' edit ')) expect(line).toBe(ours);
        else {
          expect(line.startsWith(`${ours} {`)).toBe(true);
          expect(JSON.parse(line.slice(ours.length))).toEqual(file.readEdit(index + 1));
        }
      });
      expect(lines).toHaveLength(expected.length + 2);
      expect(read(at, '--head', file.head).status).toBe(0);
      expect(read(at, '--head', '0'.repeat(64)).status).toBe(1);
    });

    it('reads a locked one with its password, and nothing of it without', async (context) => {
      const at = newPath();
      const file = await create(at, { work: { n: 1024, r: 8, p: 1 } });
      const says = 'Anna: „nein“ 🦊';
      valueOf(file.append([Buffer.from(says)], (blobs) => ({ blobs, memo: 'ä' })));
      appendSamples(file, 5);
      valueOf(await file.compact([3]));
      valueOf(await file.setPassword('Übergänge and moss'));
      const secret = newPath('password.txt');
      fs.writeFileSync(secret, 'Übergänge and moss\n');
      const { lines, status, stderr } = read(at, '--password-file', secret);
      // The package for AES is no part of Python.
      context.skip(status === 3, stderr);
      expect(status).toBe(0);
      expect(lines.at(-1)).toBe(`head ${file.head}`);
      expect(lines).toHaveLength(file.records.length + 2);
      expect(lines[1]).toMatch(new RegExp(`${createHash('sha256').update(says).digest('hex')}$`));
      expect(lines[3]).toMatch(/removed$/);
      expect(read(at)).toMatchObject({ status: 2, lines: [''] });
      fs.writeFileSync(secret, 'another\n');
      expect(read(at, '--password-file', secret)).toMatchObject({ status: 2, lines: [''] });
    });

    it('agrees about what is cut, what is damaged and what is no study', async () => {
      const at = newPath();
      const file = await create(at);
      appendSamples(file, 4);
      file.close();
      const bytes = fs.readFileSync(at);
      const [last] = file.records.slice(-1);
      const cuts = [bytes.length - 1, last?.offset ?? 0];
      for (const length of cuts) {
        fs.writeFileSync(at, bytes.subarray(0, length));
        const ours = await reopen(at, { readOnly: true });
        const { status, lines } = read(at);
        expect([status, lines.at(-1), lines.length]).toEqual([
          0,
          `head ${ours.head}`,
          ours.records.length + 2,
        ]);
      }
      fs.writeFileSync(
        at,
        Buffer.concat([bytes.subarray(0, bytes.length - 30), Buffer.alloc(2000)]),
      );
      expect(read(at).status).toBe(0);
      for (let place = 3; place < bytes.length; place += 450) {
        const flipped = Buffer.from(bytes);
        flipped[place] = (flipped[place] ?? 0) ^ 4;
        fs.writeFileSync(at, flipped);
        expect(read(at).status, `byte ${place}`).toBe(place < 8 ? 2 : 1);
      }
      fs.writeFileSync(at, 'Anna: hello');
      expect(read(at)).toMatchObject({ status: 2, stderr: expect.stringContaining('not a study') });
    });
  },
);
