import { describe, expect, test } from 'vitest';
import { newStudy } from './table.ts';

describe('evidence about the fit on screen', () => {
  test('is gathered, kept with the fit, and shown with its floors', async () => {
    const table = await newStudy(5, { fitted: true });
    expect(await table.ask('evidenceView', null)).toEqual({ steadiness: null, howMany: null });
    const fractions: number[] = [];
    const after = await table.ask(
      'gatherEvidence',
      { what: 'steadiness', resamples: 5 },
      { onProgress: ({ fraction }) => fractions.push(fraction) },
    );
    expect(after.undo).toBe('measure of steadiness');
    expect(fractions.length).toBeGreaterThan(0);
    expect(Math.max(...fractions)).toBeLessThanOrEqual(1);
    const { steadiness } = await table.ask('evidenceView', null);
    expect(steadiness).toMatchObject({ refits: 5, refitsAtLeast: 4, people: 5, leftOut: 1 });
    const { themes } = await table.ask('shapeView', null);
    expect(steadiness!.themes.map(({ id }) => id).sort()).toEqual(
      themes.map(({ id }) => id).sort(),
    );
    for (const { sentence, passages, stayed, steadiness: own, aboveFloor } of steadiness!.themes) {
      expect(sentence).toBe(
        `${stayed} of its ${passages} passages stayed in at least 4 of 5 re-fits.`,
      );
      expect(aboveFloor).toBe(own > steadiness!.floor.steadiness);
    }
    expect(steadiness!.sentences).toHaveLength(2);

    // A merged theme was not measured; what is taken back was never gathered.
    await table.ask('mergeThemes', { into: themes[0].id, from: [themes[1].id] });
    expect((await table.ask('evidenceView', null)).steadiness!.themes).toEqual([]);
    await table.ask('undo', null);
    await table.ask('undo', null);
    expect((await table.ask('evidenceView', null)).steadiness).toBeNull();
  });

  test('recommends a range of numbers of themes in a sentence, and chooses none', async () => {
    const table = await newStudy(5, { fitted: true });
    await table.ask('gatherEvidence', { what: 'how many', from: 2, to: 4 });
    const { howMany } = await table.ask('evidenceView', null);
    expect(howMany!.points.map(({ themes }) => themes)).toEqual([2, 3, 4]);
    for (const { floor, ...point } of howMany!.points) {
      expect(Object.values({ ...floor, ...point }).every(Number.isFinite)).toBe(true);
    }
    expect(howMany!.sentence).toMatch(/^\S.*\.$/u);
    expect((await table.ask('shapeView', null)).themes).toHaveLength(2);
  });

  test('is refused with a sentence without a fit, with too few people, and while it runs', async () => {
    const table = await newStudy(3);
    const steady = { what: 'steadiness', resamples: 4 } as const;
    expect(await table.refused('gatherEvidence', steady)).toBe('no fit yet');
    await table.ask('fit', { kind: 'from scratch', themes: null });
    expect(await table.refused('gatherEvidence', steady)).toBe('too few participants');
    const more = await newStudy(5, { fitted: true });
    const first = more.ask('gatherEvidence', steady);
    // Whoever asks first gets past the door first.
    await Promise.resolve();
    await Promise.resolve();
    expect(await more.refused('gatherEvidence', steady)).toBe('evidence running');
    await first;
  });

  test('leaves the study as it was where it is stopped', async () => {
    const table = await newStudy(5, { fitted: true });
    const before = await table.ask('overview', null);
    const stop = new AbortController();
    const context = { onProgress: () => stop.abort(), signal: stop.signal };
    const answer = await table.session.handlers.gatherEvidence(
      { what: 'steadiness', resamples: 50 },
      context,
    );
    expect(answer).toMatchObject({ code: 'stopped' });
    expect((await table.ask('overview', null))!.revision).toBe(before!.revision);
  });
});
