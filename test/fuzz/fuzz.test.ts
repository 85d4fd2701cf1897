import { mkdtempSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { strToU8, unzipSync, zipSync } from 'fflate';
import { expect, test } from 'vitest';
import { readFiles, type ReadOutcome } from '../../main/work/run-read.ts';
import { chance, mutate } from './mutate.ts';

/*
 * `npm run fuzz -- --seconds 60 --seed S` goes on for as long as it is told; without it, as in every
 * run of the tests, a short round with a fixed seed. A file that is given up after five seconds, takes
 * more memory than it may, or stops the reader is kept, and its place is said.
 */
const seconds = Number(process.env['FUZZ_SECONDS'] ?? 0);
const seed = Number(process.env['FUZZ_SEED'] ?? 1);
const fixedFiles = 120;
const batch = 60;
const limits = { seconds: 5, megabytes: 700 };

const folder = join(import.meta.dirname, '../main/formats/files');
const whole: { name: string; bytes: Uint8Array }[] = [
  ...readdirSync(folder)
    .filter((name) => !name.endsWith('.md'))
    .sort()
    .map((name) => ({ name, bytes: new Uint8Array(readFileSync(join(folder, name))) })),
  {
    name: 'a.vtt',
    bytes: strToU8(
      'WEBVTT - talk\n\nNOTE x\n\n1\n00:01.000 --> 00:02.000 align:start\n<v Ruth>Yes.</v>\n\n00:02.000 --> 00:05.000\n<v.loud Kim>Go &amp; on</v>\n',
    ),
  },
  {
    name: 'a.srt',
    bytes: strToU8(
      '1\n00:00:01,000 --> 00:00:02,000\n- Yes.\n- No.\n\n2\n00:00:03,000 --> 00:00:04,000\n<i>Kim: On.</i>\n',
    ),
  },
  { name: 'a.qdc', bytes: strToU8('<?xml version="1.0"?><CodeBook><Codes/></CodeBook>') },
];

/** Half of the archives are changed inside, so that what is packed is broken and not the packing. */
function changed(
  { name, bytes }: { name: string; bytes: Uint8Array },
  draw: (below: number) => number,
): Uint8Array {
  if (!/\.(?:docx|odt|xlsx)$/u.test(name) || draw(2) === 0) return mutate(bytes, draw);
  const parts = unzipSync(bytes);
  const names = Object.keys(parts).filter((part) => part.endsWith('.xml'));
  const part = names[draw(names.length)]!;
  return zipSync({ ...parts, [part]: mutate(parts[part]!, draw) }, { level: 1 });
}

function isBad(read: ReadOutcome): string | null {
  if (!read.ok) {
    const memory = read.code === 'too large' && read.limit === limits.megabytes;
    return read.code === 'too slow' || read.code === 'unreadable' || memory ? read.code : null;
  }
  if (read.kind === 'table') return null;
  const { text, turns } = read.value;
  let reached = 0;
  for (const { start, end } of turns) {
    if (start < reached || end < start || end > text.length) return 'a turn outside the text';
    reached = end;
  }
  return null;
}

test(
  `whatever a file holds, it is read or refused (seed ${seed})`,
  async () => {
    const draw = chance(seed);
    const until = Date.now() + seconds * 1000;
    let count = 0;
    const bad: string[] = [];
    do {
      const files = Array.from({ length: batch }, () => {
        const from = whole[draw(whole.length)]!;
        // Now and then under another name: the content decides.
        const name = draw(8) === 0 ? whole[draw(whole.length)]!.name : from.name;
        return { name, bytes: changed(from, draw) };
      });
      const outcomes = await readFiles(files, 'transcript', () => {}, limits);
      outcomes.forEach((read, index) => {
        const fault = isBad(read);
        if (fault === null) return;
        const { name, bytes } = files[index]!;
        const place = join(mkdtempSync(join(tmpdir(), 'fuzz-')), name);
        writeFileSync(place, bytes);
        bad.push(`${fault}: file ${count + index} of seed ${seed}, kept as ${place}`);
      });
      count += files.length;
    } while (seconds > 0 ? Date.now() < until : count < fixedFiles);
    if (seconds > 0) process.stdout.write(`${count} files read or refused\n`);
    expect(bad).toEqual([]);
  },
  seconds * 1000 + 120_000,
);
