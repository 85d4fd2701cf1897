import { describe, expect, test } from 'vitest';
import type { FitProgress } from '../../../main/api.ts';
import { file, newStudy, passageOf, placeOf, seen, transcriptsOf } from './table.ts';

describe('strata', () => {
  test('hold every passage in reading order, with layers that add to one', async () => {
    const table = await newStudy(3, { fitted: true });
    const strata = await table.ask('strata', null);
    const transcripts = await transcriptsOf(table);
    expect(strata.bands.map(({ name, participant }) => [name, participant])).toEqual([
      ['P1', 'P1'],
      ['P2', 'P2'],
      ['P3', 'P3'],
    ]);
    const layers = strata.themes.length;
    expect(layers).toBe(2);
    for (const { transcript, name, from, passages } of strata.bands) {
      const view = transcripts.get(name)!;
      expect(transcript).toBe(view.id);
      expect(view.passages).toHaveLength(passages);
      view.passages.forEach((passage, index) => {
        const row = from + index;
        expect([...strata.places.slice(2 * row, 2 * row + 2)]).toEqual([
          passage.start,
          passage.end,
        ]);
        expect(strata.words[row]).toBe(passage.words);
        // Each answer follows a question.
        expect(strata.gaps[row]).toBe(1);
        const shares = strata.shares.slice(row * layers, (row + 1) * layers);
        expect(shares[0] + shares[1]).toBeCloseTo(1, 5);
        const strongest = strata.themes.indexOf(passage.strongest[0].theme);
        expect(shares[strongest]).toBeCloseTo(passage.strongest[0].strength, 6);
      });
    }
    expect(strata.ticks).toHaveLength(0);
  });

  test('mark what people coded, not what they rejected', async () => {
    const table = await newStudy(3, { fitted: true });
    const { theme } = await table.ask('addTheme', { name: 'Shame', byHand: true, seeds: [] });
    const { place, view } = await passageOf(table, 'P2', 1);
    const suggested = view.suggestions[0].theme;
    await table.ask('confirm', { place, theme: suggested, memo: '', ...seen });
    await table.ask('codeByHand', { place, theme, memo: '', ...seen });
    const next = await passageOf(table, 'P2', 2);
    await table.ask('reject', {
      place: next.place,
      theme: next.view.suggestions[0].theme,
      memo: '',
      ...seen,
    });
    const { ticks, themes, bands } = await table.ask('strata', null);
    const row = bands[1].from + 1;
    expect([...ticks]).toEqual([row, themes.indexOf(suggested), row, -1]);
  });

  test('before the first fit have bands and no layers', async () => {
    const table = await newStudy(2);
    const { bands, themes, shares, words } = await table.ask('strata', null);
    expect([bands.length, themes.length, shares.length]).toEqual([2, 0, 0]);
    expect(words.length).toBe((await table.ask('overview', null))!.passages);
  });
});

describe('a theme', () => {
  test('shows its words, whom it comes from, and its strongest passages, one a person first', async () => {
    const table = await newStudy(4, { fitted: true });
    const { themes, people } = await table.ask('shapeView', null);
    expect(people).toBe(4);
    const shares = themes.map(({ share }) => share!);
    expect(shares[0] + shares[1]).toBeCloseTo(1, 5);
    const words = new Set(themes.flatMap((row) => row.words));
    // The two subjects that were put in, each with its own words.
    expect(words.has('ferry') || words.has('harbour')).toBe(true);
    for (const { id, suggestions, suggestedPeople } of themes) {
      const view = await table.ask('themeView', { theme: id });
      expect(view.words[0].probability).toBeGreaterThanOrEqual(view.words[1].probability);
      expect(view.ofPeople).toBe(4);
      expect(view.mostFromOnePerson!.share).toBeGreaterThanOrEqual(0.25);
      // Two questions are asked as often, one before each subject.
      expect(view.mostAfterOneQuestion!.share).toBeGreaterThan(0.5);
      const first = view.passages.slice(0, 4).map(({ participant }) => participant);
      expect(new Set(first).size).toBe(4);
      expect(view.passages[0].strength).toBeGreaterThanOrEqual(view.passages[3].strength);
      expect(view.passages[0]).toMatchObject({ standing: 'suggested', coding: null });
      const { text } = (await transcriptsOf(table)).get(view.passages[0].transcriptName)!;
      expect(text).toContain(view.passages[0].text);
      expect(suggestions).toBeGreaterThan(0);
      expect(suggestedPeople).toBe(4);
    }
  });

  test('counts people by the passages that were coded with it', async () => {
    const table = await newStudy(3, { fitted: true });
    const { theme } = await table.ask('addTheme', { name: 'Shame', byHand: true, seeds: [] });
    for (const [name, index] of [
      ['P1', 0],
      ['P1', 1],
      ['P3', 0],
    ] as const) {
      const { place } = await passageOf(table, name, index);
      await table.ask('codeByHand', { place, theme, memo: '', ...seen });
    }
    const { row, passages } = await table.ask('themeView', { theme });
    expect(row).toMatchObject({
      codings: 3,
      confirmedPeople: 2,
      suggestions: 0,
      share: null,
      modelled: false,
      words: [],
    });
    expect(passages.map(({ participant, standing }) => [participant, standing])).toEqual([
      ['P1', 'by hand'],
      ['P3', 'by hand'],
      ['P1', 'by hand'],
    ]);
  });

  test('that is set aside comes last, and nothing is suggested for it', async () => {
    const table = await newStudy(3, { fitted: true });
    const [first, second] = (await table.ask('shapeView', null)).themes;
    await table.ask('setThemeAside', { theme: first.id, aside: true });
    const { themes } = await table.ask('shapeView', null);
    expect(themes.map(({ id }) => id)).toEqual([second.id, first.id]);
    expect(themes[1]).toMatchObject({ setAside: true, suggestions: 0 });
    expect(await table.ask('overview', null)).toMatchObject({ themes: 1 });
  });
});

describe('decisions on themes that cannot be made', () => {
  test('are refused in sentences that name the theme as it is seen', async () => {
    const table = await newStudy(3, { fitted: true });
    const [first, second] = (await table.ask('shapeView', null)).themes;
    const { theme: shame } = await table.ask('addTheme', {
      name: 'Shame',
      byHand: true,
      seeds: [],
    });
    expect(await table.refused('nameTheme', { theme: first.id, name: 'shame ' })).toBe(
      'name taken',
    );
    expect(await table.refused('nameTheme', { theme: first.id, name: ' ' })).toBe('empty name');
    expect(await table.refused('nameTheme', { theme: 'x', name: 'A' })).toBe('unknown theme');
    expect(await table.refused('themeView', { theme: 'x' })).toBe('unknown theme');
    expect(await table.refused('mergeThemes', { into: first.id, from: [first.id] })).toBe(
      'merge into itself',
    );
    expect(await table.refused('mergeThemes', { into: shame, from: [first.id] })).toBe(
      'theme by hand',
    );
    const taken = { name: 'Shame', byHand: true, seeds: [] };
    expect(await table.refused('addTheme', taken)).toBe('name taken');
    expect(await table.refused('addTheme', { ...taken, name: ' ' })).toBe('empty name');
    const seeded = { name: 'A', byHand: true, seeds: ['boat'] };
    expect(await table.refused('addTheme', seeded)).toBe('seeds by hand');
    const two = { name: 'A', byHand: false, seeds: ['two words'] };
    expect(await table.refused('addTheme', two)).toBe('not one word');
    expect(await table.refused('pinTheme', { theme: shame, pinned: true })).toBe('theme by hand');
    const seed = { theme: first.id, seeded: true };
    expect(await table.refused('seedWord', { ...seed, word: 'two words' })).toBe('not one word');
    expect(await table.refused('seedWord', { ...seed, theme: shame, word: 'boat' })).toBe(
      'theme by hand',
    );
    await table.ask('shutOutWord', { theme: first.id, word: 'Ferry', shutOut: true });
    expect(await table.refused('seedWord', { ...seed, word: 'ferry' })).toBe('word shut out there');
    expect(
      await table.refused('shutOutWord', { theme: second.id, word: 'ferry', shutOut: true }),
    ).toBe('shut out everywhere');
    await table.ask('seedWord', { ...seed, word: 'teacher' });
    expect(
      await table.refused('shutOutWord', { theme: first.id, word: 'TEACHER', shutOut: true }),
    ).toBe('word seeded there');
    const order = [first.id, first.id];
    expect(await table.refused('orderThemes', { themes: order })).toBe('order out of date');
    expect(await table.refused('orderThemes', { themes: ['x'] })).toBe('order out of date');
    expect(await table.refused('chooseFit', { fit: 'x' })).toBe('unknown fit');
    await table.ask('mergeThemes', { into: first.id, from: [second.id] });
    const answer = await table.answer('nameTheme', { theme: second.id, name: 'A' });
    expect(answer).toMatchObject({ code: 'merged theme' });
    expect('refused' in answer && answer.refused).not.toContain(second.id);
  });

  test('what is so already is let be', async () => {
    const table = await newStudy(3, { fitted: true });
    const { themes } = await table.ask('shapeView', null);
    const [{ id: theme }] = themes;
    await table.ask('nameTheme', { theme, name: 'Boats' });
    await table.ask('pinTheme', { theme, pinned: true });
    await table.ask('seedWord', { theme, word: 'ferry', seeded: true });
    const { revision } = (await table.ask('overview', null))!;
    const empty = { code: '', brief: '', full: '', whenToUse: '', whenNotToUse: '', examples: '' };
    await table.ask('nameTheme', { theme, name: ' Boats ' });
    await table.ask('defineTheme', { theme, ...empty });
    await table.ask('pinTheme', { theme, pinned: true });
    await table.ask('setThemeAside', { theme, aside: false });
    await table.ask('seedWord', { theme, word: 'FERRY', seeded: true });
    await table.ask('seedWord', { theme, word: 'pier', seeded: false });
    await table.ask('shutOutWord', { theme, word: 'pier', shutOut: false });
    await table.ask('orderThemes', { themes: themes.map(({ id }) => id) });
    expect((await table.ask('overview', null))!.revision).toBe(revision);
    await table.ask('seedWord', { theme, word: 'Ferry', seeded: false });
    expect((await table.ask('themeView', { theme })).seeds).toEqual([]);
  });

  test('a stem from the screen is kept as the word that people say for it', async () => {
    const table = await newStudy(3);
    await table.ask('changeSettings', { settings: { 'text.stemming': true } });
    await table.ask('fit', { kind: 'from scratch', themes: null });
    const [{ id: theme }] = (await table.ask('shapeView', null)).themes;
    const view = await table.ask('wordView', { form: 'ferry' });
    expect(view.form).not.toBe('ferry');
    await table.ask('seedWord', { theme, word: view.form, seeded: true });
    expect((await table.ask('themeView', { theme })).seeds).toEqual(['ferry']);
    expect(await table.refused('shutOutWord', { theme, word: 'ferries', shutOut: true })).toBe(
      'word seeded there',
    );
  });
});

describe('a word', () => {
  test('is shown with everything it joins, where it is said and which themes use it', async () => {
    const table = await newStudy(3, { fitted: true });
    const view = await table.ask('wordView', { form: 'Teacher' });
    const all = [...(await transcriptsOf(table)).values()].map(({ text }) => text).join('\n');
    const said = all.match(/\bteacher\b/giu)!.length;
    expect(view).toMatchObject({ form: 'teacher', occurrences: said, people: 3 });
    expect(view.lines).toHaveLength(said);
    for (const { before, word, after } of view.lines) {
      expect(word).toMatch(/^teacher$/iu);
      expect(before + word + after).not.toContain('Interviewer');
    }
    expect(view.themes[0].share).toBeGreaterThan(0.5);
    expect(view.themes.reduce((sum, { share }) => sum + share, 0)).toBeLessThanOrEqual(1.000001);
    expect(await table.refused('wordView', { form: 'submarine' })).toBe('word not said');
    expect(await table.refused('wordView', { form: 'two words' })).toBe('not one word');
  });

  test('is found before the first fit as well, without themes', async () => {
    const table = await newStudy(2);
    expect(await table.ask('wordView', { form: 'teacher' })).toMatchObject({
      people: 2,
      themes: [],
    });
  });
});

describe('fitting', () => {
  test('tells how it goes, and other calls are answered meanwhile', async () => {
    const table = await newStudy(3);
    const points: FitProgress[] = [];
    const order: string[] = [];
    const fit = table
      .ask('fit', { kind: 'from scratch', themes: 3 }, { onProgress: (one) => points.push(one) })
      .then((result) => {
        order.push('fit');
        return result;
      });
    expect(await table.refused('fit', { kind: 'from scratch', themes: null })).toBe('fit running');
    await table.ask('overview', null).then(() => order.push('overview'));
    const { overview, moved } = await fit;
    expect(order).toEqual(['overview', 'fit']);
    expect(overview).toMatchObject({ themes: 3, undo: 'fit from scratch', fitted: true });
    expect(moved).toBeNull();
    expect(points.length).toBeGreaterThan(1);
    const fractions = points.map(({ fraction }) => fraction);
    expect(fractions).toEqual([...fractions].sort((a, b) => a - b));
    // The number asked for is the study's from then on, and goes with the fit.
    expect((await table.ask('gatherView', null)).settings.themes).toBe(3);
    await table.ask('undo', null);
    expect((await table.ask('gatherView', null)).settings.themes).toBe(2);
    expect((await table.ask('overview', null))!.fitted).toBe(false);
  });

  test('that is stopped leaves the study as it was', async () => {
    const table = await newStudy(3);
    const before = await table.ask('overview', null);
    const stop = new AbortController();
    const answer = await table.session.handlers.fit(
      { kind: 'from scratch', themes: 5 },
      { signal: stop.signal, onProgress: () => stop.abort() },
    );
    expect(answer).toMatchObject({ code: 'stopped' });
    expect(await table.ask('overview', null)).toEqual(before);
    await table.ask('fit', { kind: 'from scratch', themes: null });
  });

  test('ends when the study is closed', async () => {
    const table = await newStudy(3);
    const fit = table.answer('fit', { kind: 'from scratch', themes: 8 });
    await table.ask('closeStudy', null);
    expect(await fit).toMatchObject({ code: 'stopped' });
  });

  test('lets decisions made meanwhile wait for the next one', async () => {
    const table = await newStudy(3, { fitted: true });
    const { place, view } = await passageOf(table);
    const fit = table.ask('fit', { kind: 're-fit', themes: null });
    await table.ask('confirm', { place, theme: view.suggestions[0].theme, memo: '', ...seen });
    const { overview } = await fit;
    expect(overview.waiting).toEqual(['1 coding confirmed']);
    expect((await table.ask('fit', { kind: 're-fit', themes: null })).overview.waiting).toEqual([]);
  });

  test('is let go where a transcript went meanwhile', async () => {
    const table = await newStudy(3, { fitted: true });
    const { transcripts } = await table.ask('gatherView', null);
    const fit = table.answer('fit', { kind: 're-fit', themes: null });
    await table.ask('removeTranscript', { transcript: transcripts[0].id });
    expect(await fit).toMatchObject({ code: 'changed while fitting' });
  });

  test('is refused in sentences where there is nothing to fit', async () => {
    const table = await newStudy(0);
    expect(await table.refused('fit', { kind: 're-fit', themes: null })).toBe(
      'no fit to start from',
    );
    expect(await table.refused('fit', { kind: 'from scratch', themes: null })).toBe(
      'no words left',
    );
    expect(await table.refused('fit', { kind: 'from scratch', themes: 1000 })).toBe('setting');
    await table.ask('addTranscripts', {
      files: [file('a.txt', 'Interviewer: So?\nP1: The ferry, the ferry.\n')],
    });
    await table.ask('changeSettings', { settings: { 'text.minimumPassages': 1 } });
    expect(await table.refused('fit', { kind: 'from scratch', themes: 50 })).toBe(
      'more themes than passages',
    );
  });

  test('a re-fit keeps names and decisions, and the fit before can be gone back to', async () => {
    const table = await newStudy(3, { fitted: true });
    const { themes } = await table.ask('shapeView', null);
    await table.ask('nameTheme', { theme: themes[0].id, name: 'First' });
    const { place, view } = await passageOf(table);
    const suggested = view.suggestions[0];
    await table.ask('reject', { place, theme: suggested.theme, memo: '', ...seen });
    const { moved } = await table.ask('fit', { kind: 're-fit', themes: null });
    expect(moved?.passages.map((one) => placeOf(one.transcript, one))).toContainEqual(place);
    expect(await table.ask('moved', null)).toEqual(moved);
    const shape = await table.ask('shapeView', null);
    expect(shape.fits).toHaveLength(2);
    expect(shape.themes.map(({ id, name }) => [id, name])).toEqual([
      [themes[0].id, 'First'],
      [themes[1].id, null],
    ]);
    expect((await passageOf(table)).view.codings).toMatchObject([{ standing: 'rejected' }]);
    await table.ask('chooseFit', { fit: shape.before! });
    expect((await table.ask('shapeView', null)).fit?.id).toBe(shape.fits[0].id);
    expect((await passageOf(table)).view.strongest[0].strength).toBe(suggested.strength);
    expect(await table.ask('moved', null)).toBeNull();
  });
});
