import { describe, expect, test } from 'vitest';
import { refusalCodes } from '../../../engine/study/index.ts';
import type { ReadRefusal } from '../../../main/formats/index.ts';
import { fileSentences } from '../../../main/sentences/files.ts';
import {
  sentenceFor,
  sentenceForFit,
  sentenceForPlan,
  sentenceForSetting,
  sentenceForSkipped,
  type FileRefusal,
} from '../../../main/sentences/sentences.ts';
import { windowSentences } from '../../../main/sentences/window.ts';
import type { StudyFileCode } from '../../../main/project/index.ts';
import { oneSentence } from '../commands/run.ts';

/** One sentence; what to do stands after a semicolon. */
function expectGuidance(sentence: string): void {
  expect(sentence).toMatch(oneSentence);
  expect(sentence).toMatch(/; [\p{Ll}“]/u);
  expect(sentence).not.toMatch(/undefined|null|\[object|“”/u);
}

describe('every refusal is one sentence that says what to do', () => {
  test.each([...refusalCodes])('of an edit: %s', (code) => {
    expectGuidance(sentenceFor({ ok: false, code, subject: 'Harbour' }));
  });

  test('of an edit without a name to give', () => {
    expect(sentenceFor({ ok: false, code: 'changed since', subject: '' })).toMatch(/^This was/u);
  });

  const owner = { host: 'desk-2', name: 'Ada', since: '2026-02-03T04:05:06.000Z' };
  const codes = Object.keys(fileSentences) as StudyFileCode[];

  test.each(codes)('of a study file: %s', (code) => {
    const failure = { ok: false, code, path: 'island.understory' } as const;
    expectGuidance(sentenceFor(failure));
    expectGuidance(sentenceFor({ ...failure, cause: 'EIO', sequence: 3, owner }));
    expect(sentenceFor(failure)).toContain('“island.understory”');
  });

  test('who has a study open is said', () => {
    const failure = { ok: false, code: 'open elsewhere', path: 'a', owner } as const;
    expect(sentenceFor(failure)).toContain('Ada on desk-2, since 2026-02-03');
  });

  const read: Record<ReadRefusal['code'], ReadRefusal> = {
    'empty file': { ok: false, code: 'empty file' },
    'not text': { ok: false, code: 'not text' },
    'unknown encoding': { ok: false, code: 'unknown encoding' },
    'unknown format': { ok: false, code: 'unknown format', format: 'image' },
    'broken file': { ok: false, code: 'broken file', format: 'docx' },
    'locked file': { ok: false, code: 'locked file' },
    'too large': { ok: false, code: 'too large', megabytes: 900, limit: 200 },
    'no speech': { ok: false, code: 'no speech', format: 'vtt' },
    scanned: { ok: false, code: 'scanned', pages: 4 },
    'too slow': { ok: false, code: 'too slow', seconds: 60 },
    'a table': { ok: false, code: 'a table' },
  };
  const skipped: FileRefusal[] = [
    ...Object.values(read),
    { code: 'not found' },
    { code: 'not allowed' },
    { code: 'cannot read' },
    { code: 'duplicate' },
    { code: 'unreadable' },
  ];

  test.each(skipped.map((refusal) => [refusal.code, refusal] as const))(
    'of a file that is skipped: %s',
    (_, refusal) => expectGuidance(sentenceForSkipped(refusal)),
  );

  const fits: Record<Parameters<typeof sentenceForFit>[0]['code'], true> = {
    'no words left': true,
    'more themes than passages': true,
    'no themes': true,
    'does not split': true,
    'word without a theme': true,
    'no fit to start from': true,
    'changed while fitting': true,
    'changed while refining': true,
    'refinement failed': true,
    stopped: true,
  };

  test.each(Object.keys(fits) as (keyof typeof fits)[])('of a fit: %s', (code) => {
    expectGuidance(
      sentenceForFit({ ok: false, code, themes: 9, passages: 4, word: 'boat' } as never),
    );
  });

  const plans: Record<Parameters<typeof sentenceForPlan>[0]['code'], true> = {
    'plan is not JSON': true,
    'unknown plan key': true,
    'plan value': true,
    'plan names no theme': true,
    'plan names no transcript': true,
    'plan names no speaker': true,
    setting: true,
  };

  test.each(Object.keys(plans) as (keyof typeof plans)[])('of a plan: %s', (code) => {
    const place = 'themes[0]';
    const refusal = { ok: false, code, place, problem: 'a list is needed', subject: 'Harbour' };
    expectGuidance(sentenceForPlan({ ...refusal, must: 'must be a number' } as never));
  });

  test.each(Object.entries(windowSentences))('of a window: %s', (_, say) => {
    expectGuidance(say('Harbour'));
  });

  test('of a setting', () => {
    expectGuidance(sentenceForSetting({ key: 'seed', must: 'must be a whole number' }));
    expectGuidance(sentenceForSetting({ key: 'speed', must: 'is not a setting' }));
  });
});
