import { EventEmitter } from 'node:events';
import { copyFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import { isLocked, openStudyFile } from '../../../main/project/index.ts';
import { takePasswordFile } from '../../../main/commands/password.ts';
import { askHidden } from '../../../main/shells/hidden-prompt.ts';
import { fittedStudy } from './fitted-study.ts';
import { write } from './material.ts';
import { oneSentence, run, said, temporaryFolder, type Ended } from './run.ts';

const folder = temporaryFolder();
const password = 'moss after four räins';
const noSource = { file: null, environment: null, ask: null };
const moved = (words: readonly string[], changes = {}): Promise<Ended> =>
  run(folder, ['moved', ...words], { password: noSource, ...changes });

const opened = { code: 0, out: expect.stringContaining('the first fit'), err: '' };

beforeAll(async () => {
  write(folder, { 'secret.txt': `\uFEFF${password}\r\nsecond line\n`, 'empty.txt': '\n' });
  await fittedStudy(folder, 's.understory', 6, [], ['--password-file', 'secret.txt']);
});

describe('a study with a password on the command line', () => {
  test('is made by theme --save when a password is given, and says no hash of its transcripts', async () => {
    expect(isLocked(join(folder, 's.understory'))).toBe(true);
    const file = await openStudyFile(join(folder, 's.understory'), { readOnly: true, password });
    if (!file.ok) throw new Error(file.code);
    const [{ json }] = [...file.value.edits()].slice(0, 1);
    // Inside, ids follow from what went in; anybody can read the header's.
    expect(json).toMatchObject({ edit: { kind: 'studyStarted' } });
    const inside = (json as { readonly edit: { readonly study: string } }).edit.study;
    expect(inside).toMatch(/^[0-9a-f]{32}$/u);
    expect(file.value.studyId).not.toBe(inside);
    file.value.close();
  });

  test('is opened by any command with --password-file, wherever that stands', async () => {
    for (const words of [
      ['s.understory', '--password-file', 'secret.txt'],
      ['--password-file=secret.txt', 's.understory'],
    ]) {
      expect(await moved(words)).toEqual(opened);
    }
    const out = ['export', 's.understory', '--as', 'csv', '--out', 'e.csv'];
    const exported = await run(folder, [...out, '--password-file', 'secret.txt']);
    expect(exported.code).toBe(0);
  });

  test('opens a study to be verified, and both copies of one that takes the other in', async () => {
    const key = ['--password-file', 'secret.txt'];
    expect((await run(folder, ['verify', 's.understory', ...key])).code).toBe(0);
    expect((await run(folder, ['verify', 's.understory'], { password: noSource })).code).toBe(3);
    copyFileSync(join(folder, 's.understory'), join(folder, 'copy.understory'));
    const words = ['takein', 's.understory', '--from', 'copy.understory'];
    const taken = await run(folder, [...words, ...key]);
    expect([taken.code, taken.out]).toEqual([0, expect.stringMatching(/nothing was changed/u)]);
  });

  test('is opened with what the environment says, and the file goes before it', async () => {
    const environment = { ...noSource, environment: password };
    expect(await moved(['s.understory'], { password: environment })).toEqual(opened);
    const wrong = { ...noSource, environment: 'not this one' };
    const both = ['s.understory', '--password-file', 'secret.txt'];
    expect(await moved(both, { password: wrong })).toEqual(opened);
    expect(said(await moved(['s.understory'], { password: wrong }))).toEqual([
      expect.stringMatching(/^That is not the password of “s\.understory”/u),
    ]);
  });

  test('is asked for where somebody can type, three times at most', async () => {
    const asked: string[] = [];
    const answering = (answers: (string | null)[]) => ({
      ...noSource,
      ask: async (question: string) => {
        asked.push(question);
        return answers.shift() ?? null;
      },
    });
    const right = await moved(['s.understory'], { password: answering(['a guess', password]) });
    expect(right).toEqual({ ...opened, err: 'That is not the password.\n' });
    expect(asked).toHaveLength(2);
    const wrong = await moved(['s.understory'], { password: answering(['a', 'b', 'c', 'd']) });
    expect(wrong.code).toBe(1);
    expect(asked).toHaveLength(5);
    expect((await moved(['s.understory'], { password: answering([null]) })).code).toBe(1);
  });

  test('is refused in a sentence without one', async () => {
    const none = await moved(['s.understory']);
    expect(none.code).toBe(1);
    expect(said(none)[0]).toMatch(oneSentence);
    expect(said(none)[0]).toContain('--password-file');
  });

  test('says what is wrong with a file that was to hold it', async () => {
    for (const [words, code] of [
      [['--password-file', 'nowhere.txt'], 1],
      [['--password-file', 'empty.txt'], 1],
      [['--password-file'], 2],
      [['--password-file='], 2],
    ] as const) {
      const ended = await moved(['s.understory', ...words]);
      expect([ended.code, said(ended)]).toEqual([code, [expect.stringMatching(oneSentence)]]);
    }
    writeFileSync(join(folder, 'short.txt'), 'short');
    const words = ['theme', 'in s.understory', '--out', 'o', '--save', 'new.understory'];
    const ended = await run(folder, [...words, '--password-file', 'short.txt']);
    expect([ended.code, ended.err]).toEqual([1, expect.stringContaining('at least 8')]);
  });

  test('leaves words after -- alone', () => {
    const words = ['a', '--', '--password-file', 'b'];
    expect(takePasswordFile(words)).toEqual({ words, file: null });
  });
});

describe('a password that is typed on a terminal', () => {
  class Keys extends EventEmitter {
    raw: boolean[] = [];
    setRawMode = (raw: boolean) => this.raw.push(raw);
    resume = () => {};
    pause = () => {};
  }
  const type = async (...pieces: (string | Buffer)[]) => {
    const keys = new Keys();
    let shown = '';
    const asked = askHidden('Password: ', keys, (text) => (shown += text));
    for (const piece of pieces) keys.emit('data', Buffer.from(piece as string));
    const answer = await asked;
    expect(shown).toBe('Password: \n');
    expect(keys.raw).toEqual([true, false]);
    expect(keys.listenerCount('data')).toBe(0);
    return answer;
  };

  test('is not shown, and may be corrected', async () => {
    expect(await type('mos', 'ss\u007f\r')).toBe('moss');
    expect(await type('wrong\u0015moss\n')).toBe('moss');
    const [first, second] = [Buffer.from('ä').subarray(0, 1), Buffer.from('ä').subarray(1)];
    expect(await type('r', first, second, 'in\r')).toBe('räin');
  });

  test('may be given up', async () => {
    expect(await type('mo\u0003')).toBeNull();
    expect(await type('\u0004')).toBeNull();
  });
});
