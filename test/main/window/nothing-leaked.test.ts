import { Buffer } from 'node:buffer';
import * as fs from 'node:fs';
import * as path from 'node:path';
import { deflateRawSync, deflateSync, gzipSync } from 'node:zlib';
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest';
import type { StoppedAt } from '../../../main/api.ts';
import { backupStore } from '../../../main/backup-settings.ts';
import { lockSettings } from '../../../main/lock-settings.ts';
import { machineSettings } from '../../../main/shells/machine-settings.ts';
import { recentPaths } from '../../../main/shells/recent-paths.ts';
import { verifyFile } from '../../../main/verify.ts';
import { sentenceFor } from '../../../main/sentences/sentences.ts';
import { readable } from '../project/decoded.ts';
import { file, interviews, newFolder, newTable, passageOf, seen, type Table } from './table.ts';

const password = 'moss after four rains';

// Invented, and each in one place alone.
const planted = {
  word: 'quennlosby',
  name: 'Tordisvane',
  standIn: 'Brannelou',
  speaker: 'Varnholda',
  fileName: 'Skerrigord',
  studyName: 'Wintermoorage',
  attribute: 'fishwrighting',
  theme: 'Kelpgathering',
  laterTheme: 'Driftcounting',
  definition: 'oarsplitting',
  heading: 'Tidewarding',
  fieldNote: 'lanternpost',
  fieldNoteName: 'Harbourwalk',
  memo: 'nettlewort',
  laterMemo: 'brackenfold',
  shutOut: 'saltpanner',
  report: 'Peatcutter',
} as const;
const words = Object.values(planted);

const told = `Interviewer: Who came along?
Varnholda: ${planted.name} came along with the ${planted.word} and the ${planted.shutOut}. I asked ${planted.name} about the boat, and ${planted.name} said that it was fine. My sister ${planted.name} is a patient woman.
Interviewer: And then?
Varnholda: Then ${planted.name} went home over the hill because the ferry was cancelled again and the harbour was empty.
`;

function filesIn(folder: string): string[] {
  return fs
    .readdirSync(folder, { withFileTypes: true, recursive: true })
    .filter((item) => item.isFile())
    .map((item) => path.join(item.parentPath, item.name));
}

/** Files by their names in which a word can be read, or that are called so. */
function leaks(folder: string): Record<string, string[]> {
  const found: Record<string, string[]> = {};
  for (const one of filesIn(folder)) {
    const called = Buffer.from(path.relative(folder, one));
    const read = readable(Buffer.concat([called, Buffer.from('\n'), fs.readFileSync(one)]), words);
    if (read.length > 0) found[path.relative(folder, one)] = read;
  }
  return found;
}

async function plant(table: Table): Promise<void> {
  await table.ask('addTranscripts', { files: [...interviews(2), file('notes.txt', told)] });
  const { transcripts } = await table.ask('gatherView', null);
  const { id: transcript } = transcripts.find(({ name }) => name === 'notes')!;
  await table.ask('renameTranscript', { transcript, name: planted.fileName });
  const { open } = await table.ask('identifiers', null);
  const person = open.find(({ key }) => key.includes(planted.name.toLowerCase()))!;
  const { key } = person;
  const stand = { key, decision: 'stand-in', replacement: planted.standIn, places: null } as const;
  await table.ask('settleIdentifiers', { settle: [stand], elsewhere: true });
  const { participants } = await table.ask('gatherView', null);
  await table.ask('describeParticipant', {
    participant: participants[0].id,
    name: participants[0].name,
    attributes: { trade: planted.attribute },
  });
  await table.ask('renameStudy', { name: planted.studyName });
  const notes = [file(`${planted.fieldNoteName}.txt`, `We met at the ${planted.fieldNote}.`)];
  await table.ask('addFieldNotes', { files: notes, transcript });
  await table.ask('changeSettings', {
    settings: {
      themes: 2,
      answer: 'quick',
      'text.passageMinimumWords': 10,
      'text.passageMaximumWords': 60,
      'text.maximumPassageShare': 1,
      'text.extraStopWords': [planted.shutOut],
    },
  });
  await table.ask('fit', { kind: 'from scratch', themes: null });
  const { theme } = await table.ask('addTheme', { name: planted.theme, byHand: true, seeds: [] });
  await table.ask('defineTheme', {
    ...{ theme, code: 'K', brief: planted.definition, full: '', whenToUse: '' },
    ...{ whenNotToUse: '', examples: '' },
  });
  await table.ask('addHeading', { name: planted.heading, themes: [theme] });
  const { place } = await passageOf(table, planted.fileName);
  await table.ask('codeByHand', { place, theme, memo: planted.memo, ...seen });
  // In the trail alone from now on.
  await table.ask('addTheme', { name: planted.report, byHand: true, seeds: [] });
  await table.ask('undo', null);
}

let settings: string;
let temporary: string;
const before = process.env['TMPDIR'];
const printed: string[] = [];

beforeEach(() => {
  settings = path.join(newFolder(), 'settings');
  temporary = path.join(newFolder(), 'temporary');
  fs.mkdirSync(temporary);
  process.env['TMPDIR'] = temporary;
  const note = (...parts: unknown[]): void => void printed.push(parts.map(String).join(' '));
  for (const method of ['log', 'info', 'warn', 'error', 'debug'] as const) {
    vi.spyOn(console, method).mockImplementation(note);
  }
});
afterEach(() => {
  vi.restoreAllMocks();
  printed.length = 0;
  if (before === undefined) delete process.env['TMPDIR'];
  else process.env['TMPDIR'] = before;
});

function tableOn(folder: string): Table {
  return newTable({
    folder,
    recent: recentPaths(path.join(settings, 'recent.json')),
    backups: backupStore(path.join(settings, 'backups.json')),
    machine: machineSettings(path.join(settings, 'machine.json')),
    lock: lockSettings(path.join(settings, 'lock.json')),
  });
}

describe('the search for words that can be read', () => {
  const [secret] = words;
  const long = `${'Nothing to see here. '.repeat(20)}${secret}${' and more of the like'.repeat(20)}`;
  const noise = Buffer.from(Array.from({ length: 999 }, (_, at) => (at * at * 31 + at) >> 3));
  const around = (bytes: Uint8Array): Buffer => Buffer.concat([noise, bytes, noise]);
  const forms: Record<string, Buffer> = {
    'UTF-8': Buffer.from(long),
    'capital letters': Buffer.from(long.toUpperCase()),
    'UTF-16, small end first': Buffer.from(long, 'utf16le'),
    'UTF-16, big end first': Buffer.from(long, 'utf16le').swap16(),
    hexadecimal: Buffer.from(Buffer.from(long).toString('hex').toUpperCase()),
    base64: Buffer.from(Buffer.from(`.${long}`).toString('base64')),
    gzip: gzipSync(long),
    zlib: deflateSync(long),
    deflate: deflateRawSync(long),
    'zlib in base64': Buffer.from(deflateSync(long).toString('base64')),
    'UTF-16 in gzip': gzipSync(Buffer.from(long, 'utf16le')),
  };
  test.each(Object.keys(forms))('finds them in %s', (form) => {
    expect(readable(around(forms[form]), words)).toEqual([secret]);
  });

  test('finds none where there is none', () => {
    expect(readable(around(gzipSync('Nothing of the kind.'.repeat(9))), words)).toEqual([]);
  });
});

test('in a locked study, its backups, the settings, temporary files and messages nothing can be read', async () => {
  const folder = newFolder();
  const table = tableOn(folder);
  await table.ask('startStudy', { name: 'Crossings', path: null });
  const study = (await table.ask('overview', null))!.study.path!;
  await plant(table);
  await table.ask('makeBackup', null);
  // Without a password all of it can be read: what follows looks for words that are there.
  const open = readable(fs.readFileSync(study), words);
  const later: readonly string[] = [planted.laterTheme, planted.laterMemo];
  expect(open).toEqual(words.filter((word) => !later.includes(word)));
  const { path: backup } = (await table.ask('backupsView', null)).backups[0];
  expect(readable(fs.readFileSync(backup), words)).toEqual(open);

  await table.ask('setPassword', { current: null, next: password });
  await table.ask('addTheme', { name: planted.laterTheme, byHand: true, seeds: [] });
  await table.ask('writeMemo', { on: { kind: 'study' }, text: planted.laterMemo });
  await table.ask('makeBackup', null);
  const stopped: StoppedAt = {
    ...{ kind: 'in order', unreadOnly: true, count: 5, seed: 1, theme: 0, only: -1 },
    ...{ transcript: 2, start: 0 },
  };
  await table.ask('keepReading', { preferences: null, stopped });
  await table.ask('identifierKey', { password }).then(({ bytes }) => {
    expect(readable(bytes, words)).toEqual([]);
  });
  // While it is open, and once it is locked.
  expect(leaks(folder)).toEqual({});
  const heard: unknown[] = [];
  table.session.on('locked', (locked) => heard.push(locked));
  await table.ask('lockStudy', null);
  heard.push(await table.ask('lockedStudy', null), await table.ask('recentStudies', null));

  heard.push(await table.answer('unlockStudy', { password: 'a guess that fails' }));
  for (const method of ['gatherView', 'shapeView', 'trailView', 'backupsView'] as const) {
    heard.push(await table.answer(method, null as never));
  }
  await table.ask('unlockStudy', { password });
  await table.ask('closeStudy', null);
  expect(leaks(folder)).toEqual({});

  // Errors: bytes that rot, with the password and without it.
  const whole = fs.readFileSync(study);
  for (const share of [0.2, 0.5, 0.9]) {
    const rotten = Buffer.from(whole);
    rotten[Math.floor(share * whole.length)] ^= 0x40;
    fs.writeFileSync(study, rotten);
    const checked = await verifyFile(study, { password });
    heard.push(checked.ok ? checked.value.faults : sentenceFor(checked));
    heard.push(await table.answer('openStudy', { path: study, readOnly: true }));
    heard.push(await table.answer('unlockStudy', { password }));
    await table.ask('leaveLocked', null);
  }
  const recovered = await table.answer('recoverStudy', { path: study, to: null, password });
  expect('refused' in recovered).toBe(false);
  await table.ask('closeStudy', null).catch(() => {});

  expect(leaks(folder)).toEqual({});
  expect(fs.existsSync(path.join(settings, 'recent.json'))).toBe(true);
  expect(leaks(settings)).toEqual({});
  expect(leaks(temporary)).toEqual({});
  expect(readable(Buffer.from(JSON.stringify([heard, printed])), words)).toEqual([]);
});

test('titles of windows are the app’s alone', () => {
  const renderer = path.join(import.meta.dirname, '..', '..', '..', 'renderer');
  const titles = filesIn(renderer)
    .filter((one) => /\.(svelte|html)$/u.test(one))
    .flatMap((one) => fs.readFileSync(one, 'utf8').match(/<title>[^<]*<\/title>/gu) ?? []);
  expect(new Set(titles)).toEqual(new Set(['<title>Understory</title>']));
});
