import { describe, expect, test } from 'vitest';
import type { Api } from '../../../main/api.ts';
import { newStudy, seen, transcriptsOf, type Table } from './table.ts';

const request: Api['readingList']['takes'] = {
  kind: 'random draw',
  theme: null,
  transcript: null,
  unreadOnly: true,
  count: 6,
  seed: 7,
};
const drawn = { kind: 'random draw', count: 6, seed: 7, unreadOnly: true } as const;
const cold = { kind: 'cold sample', count: 6, seed: 7, unreadOnly: false } as const;

const list = (table: Table, changes: Partial<typeof request> = {}) =>
  table.ask('readingList', { ...request, ...changes });
const coldList = (table: Table) => list(table, { kind: 'cold sample' });

describe('a recorded draw', () => {
  test('stays as it was made, whatever is decided on otherwise, and can be undone', async () => {
    const table = await newStudy(3);
    const before = await list(table);
    const overview = await table.ask('drawSample', drawn);
    expect(overview.undo).toBe('random draw of 6, seed 7, unread');
    expect((await list(table)).places).toEqual(before.places);
    // Drawing the same once more changes nothing.
    expect((await table.ask('drawSample', drawn)).revision).toBe(overview.revision);
    for (const place of before.places.slice(0, 2)) {
      await table.ask('markNone', { place, drawnBy: 'in order', seenSuggestion: false });
    }
    expect(await list(table)).toEqual({ ...before, decided: 2 });
    for (let i = 0; i < 3; i++) await table.ask('undo', null);
    expect((await table.ask('readingEvidence', null)).draws).toEqual([]);
  });

  test('is refused where nothing is left to draw from', async () => {
    const table = await newStudy(0);
    expect(await table.refused('drawSample', drawn)).toBe('nothing to draw');
  });
});

describe('how much may be missed', () => {
  test('follows from what was found in the newest draw of unread passages', async () => {
    const table = await newStudy(4, { fitted: true });
    expect((await table.ask('readingEvidence', null)).stopping).toBeNull();
    await table.ask('drawSample', { ...drawn, count: 10 });
    const { name, places } = await list(table, { count: 10 });
    for (const place of places) {
      await table.ask('markNone', { place, drawnBy: name, seenSuggestion: true });
    }
    const { stopping } = await table.ask('readingEvidence', null);
    // 1 - .05^(1/10): Hanley & Lippman-Hand 1983.
    expect(stopping).toMatchObject({ read: 10, coded: 0, missed: 0 });
    expect(stopping!.codedAtMost).toBeCloseTo(0.2589, 4);
    const { theme } = await table.ask('addTheme', { name: 'Shame', byHand: true, seeds: [] });
    await table.ask('codeByHand', {
      place: places[0],
      theme,
      memo: '',
      drawnBy: name,
      seenSuggestion: true,
    });
    // No fit can suggest a theme by hand: 1 in 10, exact (Clopper & Pearson 1934).
    const after = (await table.ask('readingEvidence', null)).stopping!;
    expect(after).toMatchObject({ read: 10, coded: 1, missed: 1 });
    expect(after.missedAtMost).toBeCloseTo(0.3942, 4);
  });
});

describe('strength set against decisions', () => {
  test('counts suggestions in random draws that were confirmed, rejected or found to be none', async () => {
    const table = await newStudy(6, { fitted: true });
    await table.ask('drawSample', { ...drawn, count: 40 });
    const { name, places } = await list(table, { count: 40 });
    const under = { drawnBy: name, seenSuggestion: true };
    let judged = 0;
    let confirmed = 0;
    for (const [index, place] of places.slice(0, 20).entries()) {
      const { suggestions } = await table.ask('passageView', { place });
      const [first] = suggestions;
      if (first === undefined) continue;
      if (index % 4 === 3) {
        judged += suggestions.length;
        await table.ask('markNone', { place, ...under });
      } else {
        judged++;
        const how = index % 4 === 2 ? 'reject' : 'confirm';
        if (how === 'confirm') confirmed++;
        await table.ask(how, { place, theme: first.theme, memo: '', ...under });
      }
    }
    const { calibration } = await table.ask('readingEvidence', null);
    expect(calibration).toMatchObject({ judged, confirmed });
    expect(judged).toBeGreaterThanOrEqual(10);
    expect(calibration.bins.reduce((sum, { of }) => sum + of, 0)).toBe(judged);
    for (const { low, high, count, of } of calibration.bins) {
      expect(low).toBeLessThanOrEqual(count / of);
      expect(high).toBeGreaterThanOrEqual(count / of);
    }
    // Beside a suggestion, once ten about as strong were judged.
    const open = (
      await Promise.all(places.slice(20).map((place) => table.ask('passageView', { place })))
    )
      .flatMap(({ suggestions }) => suggestions)
      .map(
        ({ strength, alike }) =>
          [
            calibration.bins.find(
              ({ from, to }) => strength >= from && (strength < to || to === 1),
            ),
            alike,
          ] as const,
      );
    for (const [bin, alike] of open) {
      expect(alike).toEqual(
        bin === undefined || bin.of < 10 ? null : { judged: bin.of, confirmed: bin.count },
      );
    }
    // What is read on another list is no part of it.
    const left = (await list(table, { kind: 'in order' })).places;
    for (const place of left.slice(0, 3)) {
      await table.ask('markNone', { place, ...seen });
    }
    expect((await table.ask('readingEvidence', null)).calibration.judged).toBe(judged);
  });
});

describe('a cold sample', () => {
  test('is drawn once, before the first fit', async () => {
    const table = await newStudy(3);
    expect(await table.refused('readingList', { ...request, kind: 'cold sample' })).toBe(
      'no cold sample',
    );
    const overview = await table.ask('drawSample', cold);
    expect(overview.coldSample).toEqual({ places: 6, read: 0, scored: false });
    expect(await table.refused('drawSample', { ...cold, seed: 8 })).toBe('cold sample there');
    expect((await coldList(table)).name).toBe('cold sample of 6, seed 7');
    const late = await newStudy(3, { fitted: true });
    expect(await late.refused('drawSample', cold)).toBe('fitted already');
    expect(await late.refused('scoreColdSample', null)).toBe('no cold sample');
  });

  test('is read without suggestions, enters no prior, and does both once it is scored', async () => {
    const table = await newStudy(4);
    await table.ask('drawSample', cold);
    const { name, places } = await coldList(table);
    const { theme } = await table.ask('addTheme', {
      name: 'Boats',
      byHand: false,
      seeds: ['ferry'],
    });
    // A window that says otherwise is not believed: nothing was in sight.
    const under = { drawnBy: name, seenSuggestion: true };
    for (const place of places.slice(0, 4)) {
      await table.ask('codeByHand', { place, theme, memo: '', ...under });
    }
    await table.ask('markNone', { place: places[4], ...under });
    expect(await table.refused('scoreColdSample', null)).toBe('no fit');
    await table.ask('fit', { kind: 'from scratch', themes: null });

    const held = await table.ask('passageView', { place: places[5] });
    expect(held).toMatchObject({ heldBack: true, suggestions: [], strongest: [] });
    const decided = await table.ask('passageView', { place: places[0] });
    // Held back from the priors: the fit knows nothing of them, so nothing has to be taken out.
    const [coding] = decided.codings;
    expect(coding.strengthAtDecision).toBeNull();
    expect((await table.ask('overview', null))!.waiting).toEqual([]);
    const strength = coding.strengthWithout!;
    expect((await table.ask('readingEvidence', null)).coldSample).toMatchObject({
      places: 6,
      read: 5,
      scoredAt: null,
      score: null,
    });

    const overview = await table.ask('scoreColdSample', null);
    expect(overview.coldSample).toEqual({ places: 6, read: 5, scored: true });
    expect(overview.waiting).toEqual(['1 cold sample scored']);
    expect((await table.ask('scoreColdSample', null)).revision).toBe(overview.revision);
    const { score } = (await table.ask('readingEvidence', null)).coldSample!;
    expect(score).toMatchObject({ coded: { of: 4 }, none: { of: 1 }, found: { of: 4 }, beyond: 0 });
    const row = score!.themes.find(({ id }) => id === theme)!;
    expect(row).toMatchObject({ coded: 4, modelled: true });
    expect(row.both).toBe(score!.found.count);
    const free = await table.ask('passageView', { place: places[5] });
    expect(free.heldBack).toBe(false);
    expect(free.strongest.length).toBeGreaterThan(0);

    await table.ask('fit', { kind: 're-fit', themes: null });
    const after = await table.ask('passageView', { place: places[0] });
    const now = after.strongest.find((one) => one.theme === theme)!.strength;
    expect(now).toBeGreaterThan(0.5);
    // The score stays what it was when the sample was scored.
    expect((await table.ask('readingEvidence', null)).coldSample!.score).toEqual(score);
    // And the strength without decisions is not carried away by them.
    expect(after.codings[0].strengthWithout!).toBeLessThanOrEqual(now);
    expect(Math.abs(after.codings[0].strengthWithout! - strength)).toBeLessThan(0.5);
  });

  test('needs something read in it to be scored', async () => {
    const table = await newStudy(3);
    await table.ask('drawSample', cold);
    await table.ask('fit', { kind: 'from scratch', themes: null });
    expect(await table.refused('scoreColdSample', null)).toBe('cold sample unread');
  });
});

describe('moving a coding and coding several', () => {
  test('a moved coding has what is known about its new theme', async () => {
    const table = await newStudy(3, { fitted: true });
    const [first] = (await transcriptsOf(table)).values();
    const place = {
      transcript: first.id,
      start: first.passages[0].start,
      end: first.passages[0].end,
    };
    const { suggestions } = await table.ask('passageView', { place });
    await table.ask('confirm', { place, theme: suggestions[0].theme, memo: 'Why', ...seen });
    const { theme } = await table.ask('addTheme', { name: 'Shame', byHand: true, seeds: [] });
    await table.ask('defineTheme', {
      theme,
      code: '',
      brief: 'Not said.',
      full: '',
      whenToUse: '',
      whenNotToUse: '',
      examples: '',
    });
    const view = () => table.ask('passageView', { place });
    const [made] = (await view()).codings;
    const moved = { transcript: first.id, coding: made.id, theme, ...seen };
    const overview = await table.ask('moveCoding', moved);
    expect(overview.undo).toBe('move of a coding to Shame');
    expect((await view()).codings).toMatchObject([
      { id: made.id, theme, standing: 'by hand', memo: 'Why', strengthAtDecision: null },
    ]);
    await table.ask('moveCoding', moved);
    expect((await table.ask('overview', null))!.revision).toBe(overview.revision);
    await table.ask('undo', null);
    expect((await view()).codings).toEqual([made]);
    await table.ask('codeByHand', { place, theme, memo: '', ...seen });
    expect(await table.refused('moveCoding', moved)).toBe('coded already');
    expect(await table.refused('moveCoding', { ...moved, coding: 'x' })).toBe('unknown coding');
    await table.ask('reject', { place, theme: made.theme, memo: '', ...seen });
    const rejected = (await view()).codings.find(({ standing }) => standing === 'rejected')!;
    expect(await table.refused('moveCoding', { ...moved, coding: rejected.id })).toBe(
      'moved rejection',
    );
  });

  test('what is coded in one gesture says so, and is undone in one', async () => {
    const table = await newStudy(3, { fitted: true });
    const { places } = await list(table, { kind: 'in order' });
    const { theme } = await table.ask('addTheme', { name: 'Waiting', byHand: true, seeds: [] });
    await table.ask('markNone', { place: places[0], ...seen });
    await table.ask('codeByHand', { place: places[1], theme, memo: '', ...seen });
    const three = places.slice(0, 3);
    const drawnBy = 'keyword in context: “boat” in all forms';
    await table.ask('codeTogether', { places: three, theme, drawnBy, seenSuggestion: true });
    const codings = async () =>
      (await Promise.all(three.map((place) => table.ask('passageView', { place })))).map((view) =>
        view.codings.map(({ standing, together }) => [standing, together]),
      );
    expect(await codings()).toEqual([[['by hand', 2]], [['by hand', null]], [['by hand', 2]]]);
    await table.ask('undo', null);
    expect(await codings()).toEqual([[], [['by hand', null]], []]);
    const off = [{ ...places[0], end: places[0].end - 1 }];
    expect(
      await table.refused('codeTogether', { places: off, theme, drawnBy, seenSuggestion: true }),
    ).toBe('place changed');
  });
});
