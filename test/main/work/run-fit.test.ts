import { describe, expect, it } from 'vitest';
import { quickFitSettings } from '../../../engine/model/index.ts';
import {
  defaultTextSettings,
  turnsFromText,
  type TranscriptText,
} from '../../../engine/text/index.ts';
import {
  fitStudy,
  unpackFitted,
  unpackWords,
  type FitDone,
  type FitJob,
} from '../../../engine/themes/index.ts';
import { runFit } from '../../../main/work/run-fit.ts';
import { fit as fitRecord } from '../../engine/study/scene.ts';
import { Talk } from '../commands/material.ts';

const talk = new Talk(21);
const transcripts = ['a', 'b', 'c'].map((id): TranscriptText => {
  const text = talk
    .turns(['INT', id.toUpperCase()], 30)
    .map(([name, said]) => `${name}: ${said}\n`)
    .join('');
  return {
    id,
    text,
    turns: turnsFromText(text).turns,
    roles: { INT: 'interviewer' },
    participants: {},
  };
});

const ids = ['theme-1', 'theme-2', 'theme-3', 'theme-4'];
const job: FitJob = {
  transcripts,
  text: defaultTextSettings,
  lists: { eng: { stopWords: ['the', 'and', 'it', 'was', 'a'], fillers: ['um'] } },
  model: { ...quickFitSettings, runs: 5, boundEvery: 10 },
  alpha: 0.1,
  eta: 0.1,
  seed: 3,
  themes: ids.map((id, i) => ({
    id,
    pinned: false,
    seeds: i === 1 ? ['nurse', 'surgery'] : [],
    shutOut: i === 2 ? ['bus'] : [],
    absorbed: [],
  })),
  decisions: [],
  previous: null,
  pinnedFrom: null,
};

const serial = fitStudy(job) as FitDone;

describe('a fit in workers', () => {
  it.each([1, 2, 3, 8])('gives the same bits with %i workers side by side', async (workers) => {
    expect(await runFit(job, { workers })).toEqual(serial);
  });

  it('gives the same bits where it is left to say how many workers there are', async () => {
    expect(await runFit(job)).toEqual(serial);
  });

  it('gives the same bits where it goes on from a fit before', async () => {
    const words = unpackWords(serial.words as Uint8Array);
    const record = fitRecord('before', { themes: ids });
    const { theta, phi } = unpackFitted(record, words, serial.result);
    const previous = { themes: ids, words, theta, phi };
    const again: FitJob = { ...job, previous, pinnedFrom: previous };
    expect(await runFit(again, { workers: 3 })).toEqual(fitStudy(again));
  });

  it('tells how far all runs are together, never less than before', async () => {
    const fractions: number[] = [];
    await runFit(job, { workers: 2, onProgress: (_point, fraction) => fractions.push(fraction) });
    expect(fractions).toHaveLength(5 * 35);
    expect(fractions).toEqual([...fractions].sort((a, b) => a - b));
    expect(fractions.at(-1)).toBeCloseTo(1, 12);
  });

  it('stops where it is when asked to, and gives what it has', async () => {
    const long = { ...job, model: { ...job.model, runs: 400 } };
    for (const workers of [1, 3]) {
      const stop = new AbortController();
      const done = await runFit(long, {
        workers,
        signal: stop.signal,
        onProgress: () => stop.abort(),
      });
      expect(done).toMatchObject({ ok: true, stopReason: 'stopped by a person' });
      expect((done as FitDone).sweeps).toBeLessThan(400 * 35);
    }
  });

  it('gives a result even where it was asked to stop before it began', async () => {
    const done = await runFit(job, { workers: 2, signal: AbortSignal.abort() });
    expect(done).toMatchObject({ ok: true, stopReason: 'stopped by a person' });
  });

  it('hands on what the engine refuses', async () => {
    expect(await runFit({ ...job, themes: [] }, { workers: 2 })).toMatchObject({
      ok: false,
      code: 'no themes',
    });
  });

  it('fails with what went wrong inside a worker', async () => {
    const bad = { ...job, alpha: -1 };
    await expect(runFit(bad, { workers: 2 })).rejects.toThrow('priors.alpha is -1');
  });
});
