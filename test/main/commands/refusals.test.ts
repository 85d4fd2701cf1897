import { createHash } from 'node:crypto';
import {
  chmodSync,
  existsSync,
  mkdirSync,
  readFileSync,
  readdirSync,
  writeFileSync,
} from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import { interviews, unreadable, write } from './material.ts';
import { buildChild, startChild } from '../project/child-process.ts';
import { contents, oneSentence, run, said, table, temporaryFolder } from './run.ts';
import type { Ended } from './run.ts';

const folder = temporaryFolder();

beforeAll(async () => {
  const files = await interviews();
  const bad = await unreadable();
  write(folder, {
    'in/one.txt': files['one.txt'],
    'in/two.txt': files['two crlf.txt'],
    'tiny.txt': 'P01: Hello there.',
    file: 'a file',
    ...Object.fromEntries(
      Object.entries(bad).map(([name, [content]]) => [`bad/${name}`, content] as const),
    ),
  });
  mkdirSync(join(folder, 'nothing'));
  const made = await run(
    folder,
    'theme in --themes 3 --out made --save made.understory'.split(' '),
  );
  if (made.code !== 0) throw new Error(made.err);
});

/** Every line is one sentence and the last is the given one; no trace of a fault. */
function expectRefusal(ended: Ended, code: number, sentence: RegExp): void {
  const lines = said(ended).filter((line) => !line.startsWith('Skipped '));
  expect(lines).toHaveLength(1);
  expect(lines[0]).toMatch(sentence);
  expect(lines[0]).toMatch(oneSentence);
  expect(ended.err).not.toMatch(/fault in Understory|^ {4}at /mu);
  expect(ended.code).toBe(code);
  expect(ended.out).toBe('');
}

/** Refused, and everything on the drive is as it was. */
async function expectUntouched(
  words: readonly string[],
  code: number,
  sentence: RegExp,
): Promise<Ended> {
  const before = contents(folder);
  const names = readdirSync(folder);
  const ended = await run(folder, words);
  expectRefusal(ended, code, sentence);
  expect(contents(folder)).toEqual(before);
  expect(readdirSync(folder)).toEqual(names);
  return ended;
}

const given = 'theme in --themes 3 --out new'.split(' ');

describe('a command that was not understood ends with 2', () => {
  test.each<[string, string, RegExp]>([
    ['an unknown command', 'them in', /^There is no command “them”; /u],
    ['no files', 'theme --out new', /^Name files or folders to read\.$/u],
    ['no place to write', 'theme in', /^Say with --out where to write\.$/u],
    ['no themes', 'theme in --out new --themes 0', /^--themes must be a whole number/u],
    ['half a theme', 'theme in --out new --themes 1.5', /^--themes must be a whole number/u],
    ['a word for a number', 'theme in --out new --themes ten', /^--themes must be/u],
    ['a seed below zero', 'theme in --out new --seed=-1', /^--seed must be a whole number/u],
    ['a seed like an option', 'theme in --out new --seed -1', /^The option --seed needs a value/u],
    ['a seed that is too large', 'theme in --out new --seed 4294967296', /^--seed must be/u],
    ['an unknown option', 'theme in --out new --colour', /^There is no option --colour here/u],
    ['an option without its value', 'theme in --out', /^The option --out needs a value/u],
    [
      'a value for a switch',
      'theme in --out new --strict=1',
      /^The option --strict takes no value/u,
    ],
    ['a re-fit of nothing', 'refit --out new', /^Name one study\.$/u],
    ['a re-fit of two', 'refit made.understory b --out new', /^Name one study\.$/u],
    ['a re-fit to nowhere', 'refit made.understory', /^Say with --out where to write\.$/u],
    ['themes for a re-fit', 'refit made.understory --out new --themes 4', /^--themes goes with/u],
    [
      'too many themes',
      'refit made.understory --out new --from-scratch --themes 999',
      /^--themes must be/u,
    ],
    ['an export of nothing', 'export --as csv --out new', /^Name one study\.$/u],
    ['an export as nothing', 'export made.understory --out new', /^Say with --as what to write/u],
    ['an unknown format', 'export made.understory --as pdf --out new', /^Say with --as what/u],
    ['an export to nowhere', 'export made.understory --as csv', /^Say with --out where/u],
    [
      'an unknown standing',
      'export made.understory --as csv --out new --standing maybe',
      /^There is no standing “maybe”/u,
    ],
    ['what moved in nothing', 'moved', /^Name one study\.$/u],
    [
      'a plan that is not there',
      'theme in --out new --plan no.json',
      /^The plan “no.json” is not/u,
    ],
    ['a folder for a plan', 'theme in --out new --plan nothing', /^The plan “nothing” could not/u],
    [
      'a table that is not there',
      'theme in --out new --attributes no.csv',
      /^The table “no.csv” could not be read/u,
    ],
    [
      'a table without participants',
      'theme in --out new --attributes tiny.txt',
      /^“tiny.txt” is no table of attributes/u,
    ],
  ])('%s', async (_, words, sentence) => {
    await expectUntouched(words.split(' '), 2, sentence);
  });

  test('no command at all: help', async () => {
    const ended = await run(folder, []);
    expect(ended.code).toBe(2);
    expect(ended.out).toContain('understory theme FILES OR FOLDERS…');
    expect(await run(folder, ['--help'])).toMatchObject({ code: 0, out: ended.out });
  });

  test.each<[string, string, RegExp]>([
    ['what is no JSON', '{"themes":', /^The plan is not valid JSON; /u],
    ['a list', '[]', /an object in braces is needed/u],
    ['an unknown key', '{"theme":[]}', /^The plan has a key that is not known: theme;/u],
    [
      'an unknown key of a theme',
      '{"themes":[{"name":"A"},{"name":"B","colour":1}]}',
      /not known: themes\[1\]\.colour;/u,
    ],
    [
      'a word for a list',
      '{"themes":[{"name":"A","seed":"x"}]}',
      /at themes\[0\]\.seed: a list in square brackets is needed;/u,
    ],
    ['a theme without name and id', '{"themes":[{"seed":["x"]}]}', /needs a name or an id/u],
    ['an empty name', '{"themes":[{"name":" "}]}', /a name may not be empty/u],
    ['a pin that is no yes or no', '{"themes":[{"name":"A","pin":1}]}', /true or false is needed/u],
    ['an unknown setting', '{"settings":{"speed":1}}', /^There is no setting “speed”; /u],
    ['a setting out of range', '{"settings":{"alpha":0}}', /“alpha” must be a number from/u],
    ['an unknown language', '{"settings":{"text.language":"de"}}', /must be one of eng, deu,/u],
    [
      'passages that end before they begin',
      '{"settings":{"text.passageMinimumWords":300}}',
      /must be below text\.passageMaximumWords \(120\)/u,
    ],
    [
      'an unknown standing',
      '{"codings":[{"transcript":"one","start":0,"end":9,"theme":"A","standing":"yes"}]}',
      /codings\[0\]\.standing: one of .* is needed/u,
    ],
  ])('a plan with %s', async (_, plan, sentence) => {
    write(folder, { 'plan.json': plan });
    await expectUntouched([...given, '--plan', 'plan.json'], 2, sentence);
    await expectUntouched(
      'refit made.understory --out new --plan plan.json'.split(' '),
      2,
      sentence,
    );
  });
});

describe('what could not be done ends with 1', () => {
  test.each<[string, string, RegExp]>([
    ['a missing path', 'theme missing --out new', /^No transcript could be read/u],
    ['only unreadable files', 'theme bad --out new', /^No transcript could be read/u],
    ['an empty folder', 'theme nothing --out new', /^No transcript could be read/u],
    ['no words left', 'theme tiny.txt --out new', /^No words are left to count/u],
    [
      'more themes than passages',
      'theme in --out new --themes 200',
      /^There are 200 themes and only \d+ passages with counted words; ask for fewer/u,
    ],
    ['a file where the folder should be', 'theme in --out file', /a file stands where a folder/u],
    ['a file in the way to it', 'theme in --out file/new', /a file stands where a folder/u],
    ['a study that is there', 'theme in --out new --save made.understory', /exists already/u],
    ['a folder for the study', 'theme in --out new --save nothing', /exists already/u],
    [
      'a missing folder for the study',
      'theme in --out new --save no/made.understory',
      /^There is no folder “.*” to save the study in; make it first\.$/u,
    ],
    ['a missing study', 'refit no.understory --out new', /^There is no file “no.understory”/u],
    ['a re-fit of a text', 'refit in/one.txt --out new', /is not an Understory study/u],
    ['a re-fit of a folder', 'refit in --out new', /is not an Understory study/u],
    ['a re-fit of an empty file', 'refit bad/empty.txt --out new', /is empty/u],
    ['a re-fit to a file', 'refit made.understory --out file', /a file stands where a folder/u],
    ['an export of a text', 'export tiny.txt --as csv --out new', /is not an Understory study/u],
    [
      'an export to a missing folder',
      'export made.understory --as csv --out no/new.csv',
      /its folder does not exist, so make it first/u,
    ],
    [
      'an export to a folder',
      'export made.understory --as csv --out nothing',
      /a folder stands where a file is needed/u,
    ],
    [
      'an export over the study itself',
      'export made.understory --as csv --out made.understory',
      /would be written over; choose another place/u,
    ],
    ['what moved in a missing study', 'moved no.understory', /^There is no file/u],
    ['what moved in a picture', 'moved bad/picture.png', /is not an Understory study/u],
  ])('%s', async (_, words, sentence) => {
    await expectUntouched(words.split(' '), 1, sentence);
  });

  test('each unreadable file is named with its reason', async () => {
    const ended = await run(folder, 'theme bad missing --out new'.split(' '));
    const lines = said(ended).filter((line) => line.startsWith('Skipped '));
    expect(lines).toHaveLength(Object.keys(await unreadable()).length + 1);
    for (const line of lines) expect(line).toMatch(oneSentence);
  });

  test('transcripts that the outputs would replace', async () => {
    const text = 'INT: What was it like?\n\nP01: The garden and the soil. The soil was good.\n';
    write(folder, { 'home/transcripts/one.txt': text, 'home/one.docx': 'x' });
    write(folder, {
      'home/plan.json': '{"settings":{"text.maximumPassageShare":1,"text.minimumPassages":1}}',
    });
    await expectUntouched(
      'theme home/transcripts --themes 1 --out home --plan home/plan.json'.split(' '),
      1,
      /transcripts\/one\.txt” was given to be read and would be written over/u,
    );
  });

  test('a folder that stands where a table should', async () => {
    mkdirSync(join(folder, 'taken/themes.csv'), { recursive: true });
    await expectUntouched(
      'theme in --themes 3 --out taken --save taken.understory'.split(' '),
      1,
      /a folder stands where a file is needed/u,
    );
  });

  test.skipIf(process.getuid?.() === 0)('a folder that may not be written to', async () => {
    mkdirSync(join(folder, 'closed'));
    chmodSync(join(folder, 'closed'), 0o500);
    await expectUntouched(
      'theme in --themes 3 --out closed/new'.split(' '),
      1,
      /not allowed to, so choose another folder/u,
    );
  });

  test.each<[string, string, RegExp]>([
    [
      'words seeded and shut out',
      '{"themes":[{"name":"A","seed":["soil"],"shutOut":["soil"]}]}',
      /“soil” is seeded in this theme; /u,
    ],
    [
      'a theme that is not there to be merged',
      '{"themes":[{"name":"A","merge":["Z"]}]}',
      /a theme that is not in the study: “Z”/u,
    ],
    [
      'an id that is not there',
      '{"themes":[{"id":"abc","name":"A"}]}',
      /a theme that is not in the study: “abc”/u,
    ],
    [
      'a theme by hand with seeds',
      '{"themes":[{"name":"A","byHand":true,"seed":["soil"]}]}',
      /is a theme by hand/u,
    ],
    [
      'a coding outside the text',
      '{"themes":[{"name":"A"}],"codings":[{"transcript":"one","start":0,"end":9999999,"theme":"A","standing":"by hand"}]}',
      /outside the text of “one”/u,
    ],
    [
      'a coding that ends before it starts',
      '{"themes":[{"name":"A"}],"codings":[{"transcript":"one","start":9,"end":3,"theme":"A","standing":"by hand"}]}',
      /outside the text of “one”/u,
    ],
    [
      'a coding of no theme',
      '{"codings":[{"transcript":"one","start":3,"end":9,"theme":"A","standing":"by hand"}]}',
      /a theme that is not in the study: “A”/u,
    ],
    [
      'a coding of no transcript',
      '{"codings":[{"transcript":"ten","start":3,"end":9,"standing":"none"}]}',
      /a transcript that is not in the study: “ten”/u,
    ],
  ])('a plan with %s', async (_, plan, sentence) => {
    write(folder, { 'plan.json': plan });
    await expectUntouched(
      [...given, '--save', 'new.understory', '--plan', 'plan.json'],
      1,
      sentence,
    );
    await expectUntouched(
      'refit made.understory --out new --plan plan.json'.split(' '),
      1,
      sentence,
    );
  });

  test('a re-fit around interviewers who are nowhere', async () => {
    write(folder, { 'plan.json': '{"interviewers":["Nobody"]}' });
    await expectUntouched(
      'refit made.understory --out new --plan plan.json'.split(' '),
      1,
      /^No transcript has a speaker “Nobody”; /u,
    );
  });

  test('settings that leave no words', async () => {
    write(folder, { 'plan.json': '{"settings":{"text.minimumPassages":900}}' });
    await expectUntouched([...given, '--plan', 'plan.json'], 1, /^No words are left/u);
    await expectUntouched(
      'refit made.understory --out new --plan plan.json'.split(' '),
      1,
      /^No words are left/u,
    );
  });
});

describe('a study that cannot be used is left as it is', () => {
  const each = ['refit S --out new', 'export S --as json --out new', 'moved S'];

  test.each(each)('torn in its first record: %s', async (words) => {
    const study = readFileSync(join(folder, 'made.understory'));
    writeFileSync(join(folder, 'torn.understory'), study.subarray(0, 40));
    await expectUntouched(
      words.replace('S', 'torn.understory').split(' '),
      1,
      /torn\.understory” .*; /u,
    );
  });

  test.each(each)('damaged in the middle: %s', async (words) => {
    const study = readFileSync(join(folder, 'made.understory'));
    const middle = Math.floor(study.length / 2);
    study.fill(0x58, middle, middle + 9);
    writeFileSync(join(folder, 'damaged.understory'), study);
    await expectUntouched(
      words.replace('S', 'damaged.understory').split(' '),
      1,
      /damaged\.understory” is damaged from record \d+ on and was left as it is; /u,
    );
  });

  test.each(each)('of a later version: %s', async (words) => {
    const study = readFileSync(join(folder, 'made.understory'));
    study.writeUInt32LE(999, 8);
    // The header's last 8 bytes check all before them (main/project/FORMAT.md).
    const size = study.readUInt32LE(16);
    const check = createHash('sha256')
      .update(study.subarray(0, size - 8))
      .digest();
    check.copy(study, size - 8, 0, 8);
    writeFileSync(join(folder, 'later.understory'), study);
    const ended = await run(folder, words.replace('S', 'later.understory').split(' '));
    expectRefusal(
      ended,
      1,
      /later\.understory” was written by a newer version .*; install that version/u,
    );
  });

  test('open elsewhere: a re-fit waits for nobody, reading goes on', async () => {
    const { script, remove } = await buildChild();
    const holder = startChild(script, 'write', join(folder, 'made.understory'));
    try {
      expect(await holder.line()).toBe('open');
      await expectUntouched(
        'refit made.understory --out new'.split(' '),
        1,
        /^“made\.understory” is open in another window or command.*; close it there, then try again\.$/u,
      );
      expect(await run(folder, ['moved', 'made.understory'])).toMatchObject({ code: 0 });
      const words = 'export made.understory --as csv --out open.csv --standing suggested'.split(
        ' ',
      );
      expect(await run(folder, words)).toMatchObject({ code: 0 });
      expect(table(join(folder, 'open.csv')).length).toBeGreaterThan(0);
    } finally {
      await holder.finish();
      remove();
    }
    expect(await run(folder, 'refit made.understory --out free'.split(' '))).toMatchObject({
      code: 0,
    });
  });
});

describe('a command that is stopped', () => {
  test('writes nothing, even where the fit is under way', async () => {
    const stop = new AbortController();
    const before = contents(folder);
    const ended = await run(folder, [...given, '--save', 'new.understory'], {
      signal: stop.signal,
      err: (text) => {
        if (text.startsWith('Fitting:')) stop.abort();
      },
    });
    expect(ended.code).toBe(1);
    expect(contents(folder)).toEqual(before);
    expect(existsSync(join(folder, 'new'))).toBe(false);
  });

  test('says so', async () => {
    const stop = new AbortController();
    stop.abort();
    const ended = await run(folder, given, { signal: stop.signal });
    expectRefusal(ended, 1, /^Stopped: nothing was written\.$/u);
  });
});

describe('a fault of the program', () => {
  test('is one sentence with where it arose, and nobody’s words', async () => {
    const ended = await run(folder, given, {
      now: () => {
        throw new TypeError('cannot read "what somebody said"\nat length');
      },
    });
    expect(ended.code).toBe(1);
    expect(said(ended)).toHaveLength(1);
    expect(said(ended)[0]).toMatch(
      /^This is a fault in Understory .*\(TypeError: cannot read "…", at refusals\.test\.ts line \d+\); /u,
    );
    expect(ended.err).not.toContain('what somebody said');
    expect(existsSync(join(folder, 'new'))).toBe(false);
  });
});
