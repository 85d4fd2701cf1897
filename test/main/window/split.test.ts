import { describe, expect, test } from 'vitest';
import { newStudy, passageOf, placeOf, seen, transcriptsOf, type Table } from './table.ts';

/** A study in which one theme holds both things that people talk about. */
async function oneTheme(): Promise<{ readonly table: Table; readonly theme: string }> {
  const table = await newStudy(4);
  await table.ask('fit', { kind: 'from scratch', themes: 1 });
  const { themes } = await table.ask('shapeView', null);
  return { table, theme: themes[0].id };
}

const crossing = ['ferry', 'harbour', 'swell', 'skipper', 'ticket', 'crossing', 'cancelled'];
const lessons = ['school', 'teacher', 'children', 'homework', 'lessons'];

describe('a split', () => {
  test('is shown with both halves before anything is decided', async () => {
    const { table, theme } = await oneTheme();
    const before = await table.ask('overview', null);
    const { halves, cosine, label } = await table.ask('splitPreview', { theme });
    expect((await table.ask('overview', null))!.revision).toBe(before!.revision);
    expect(label).not.toBe('');
    expect(cosine).toBeLessThan(0.5);
    expect(halves[0].share + halves[1].share).toBeCloseTo(1, 5);
    expect(halves[0].passages + halves[1].passages).toBe(before!.passages);
    const shown = halves.map(({ words }) => words.slice(0, 8).map(({ form }) => form));
    const about = [crossing, lessons].map((subject) =>
      shown.findIndex((words) => words.some((word) => subject.includes(word))),
    );
    expect(about.toSorted()).toEqual([0, 1]);
    shown.forEach((words, side) => {
      const other = about[0] === side ? lessons : crossing;
      expect(words.filter((word) => other.includes(word))).toEqual([]);
    });
    for (const { strongest, people } of halves) {
      expect(people).toBe(4);
      expect(new Set(strongest.slice(0, 4).map(({ participant }) => participant)).size).toBe(4);
      expect(strongest[0].text.length).toBeGreaterThan(20);
    }
  });

  test('keeps name and codings with the half that was coded, and says where it did not', async () => {
    const { table, theme } = await oneTheme();
    await table.ask('nameTheme', { theme, name: 'Life here' });
    for (const name of ['P1', 'P2', 'P3']) {
      const { passages, text, id } = (await transcriptsOf(table)).get(name)!;
      const onSchool = passages.find(({ start, end }) => /teacher/u.test(text.slice(start, end)))!;
      await table.ask('confirm', { place: placeOf(id, onSchool), theme, memo: '', ...seen });
    }
    const { passages, text, id } = (await transcriptsOf(table)).get('P4')!;
    const onFerry = passages.find(({ start, end }) => /ferry/u.test(text.slice(start, end)))!;
    await table.ask('confirm', { place: placeOf(id, onFerry), theme, memo: '', ...seen });

    const { halves, sentence } = await table.ask('splitPreview', { theme });
    expect(halves.map(({ codings }) => codings)).toEqual([3, 1]);
    expect(halves[0].words.map(({ form }) => form)).toContain('teacher');
    expect(sentence).toMatch(/“Life here” with its name, its seeds and its 4 codings/u);
    expect(sentence).toMatch(/One of them is on a passage/u);

    const { theme: into, overview } = await table.ask('splitTheme', { theme });
    expect(overview.undo).toBe('split of Life here');
    const after = await table.ask('shapeView', null);
    expect(after.themes.find((row) => row.id === theme)).toMatchObject({
      name: 'Life here',
      codings: 4,
    });
    expect(after.themes.find((row) => row.id === into)).toMatchObject({ name: null, codings: 0 });
    // As it was shown, but that a person’s decision on a passage now stands in its proportions.
    const words = await table.ask('themeView', { theme: into });
    expect(words.words.slice(0, 5).map(({ form }) => form)).toEqual(
      halves[1].words.slice(0, 5).map(({ form }) => form),
    );

    await table.ask('undo', null);
    expect((await table.ask('shapeView', null)).themes.map((row) => row.id)).toEqual([theme]);
    await table.ask('redo', null);
    expect((await table.ask('shapeView', null)).themes).toHaveLength(2);
    await table.ask('fit', { kind: 're-fit', themes: null });
    expect((await table.ask('shapeView', null)).themes).toHaveLength(2);
  });

  test('is refused with a sentence where there is nothing to split by', async () => {
    const { table, theme } = await oneTheme();
    const byHand = await table.ask('addTheme', { name: 'By hand', byHand: true, seeds: [] });
    expect(await table.refused('splitPreview', { theme: byHand.theme })).toBe('split by hand');
    expect(await table.refused('splitTheme', { theme: 'nothing' })).toBe('unknown theme');
    await table.ask('pinTheme', { theme, pinned: true });
    expect(await table.refused('splitTheme', { theme })).toBe('split pinned');
    await table.ask('pinTheme', { theme, pinned: false });
    await table.ask('seedWord', { theme, word: 'ferry', seeded: true });
    expect(await table.refused('splitTheme', { theme })).toBe('split before a re-fit');
    const asked = await table.ask('addTheme', { name: 'Asked', byHand: false, seeds: ['gate'] });
    expect(await table.refused('splitTheme', { theme: asked.theme })).toBe('split before a re-fit');
    const before = await newStudy(2);
    expect(await before.refused('splitPreview', { theme: 'a' })).toBe('no fit to start from');
    const small = await newStudy(1);
    await small.ask('fit', { kind: 'from scratch', themes: 2 });
    const { themes } = await small.ask('shapeView', null);
    const smallest = themes.reduce((least, row) => (row.share! < least.share! ? row : least));
    expect(await small.refused('splitTheme', { theme: smallest.id })).toBe('too small to split');
  });
});

describe('a theme from marked passages', () => {
  test('is coded by hand there and found elsewhere by the next fit', async () => {
    const { table, theme } = await oneTheme();
    const { passages, text, id } = (await transcriptsOf(table)).get('P1')!;
    const marked = passages.filter(({ start, end }) => /teacher/u.test(text.slice(start, end)));
    const { theme: school, overview } = await table.ask('addThemeFromPassages', {
      name: 'School',
      passages: marked.slice(0, 2).map((passage) => placeOf(id, passage)),
    });
    expect(overview).toMatchObject({
      undo: 'new theme School',
      waiting: ['1 new theme', '2 codings by hand'],
    });
    await table.ask('fit', { kind: 're-fit', themes: null });
    const view = await table.ask('themeView', { theme: school });
    expect(view.row).toMatchObject({ name: 'School', modelled: true, codings: 2 });
    const first = view.words.slice(0, 6).map(({ form }) => form);
    expect(first.filter((word) => lessons.includes(word)).length).toBeGreaterThanOrEqual(4);
    // What the others say about school is offered for it, what they say about the ferry is not.
    const other = (await transcriptsOf(table)).get('P3')!;
    for (const passage of other.passages) {
      const onSchool = /teacher/u.test(other.text.slice(passage.start, passage.end));
      const [strongest] = passage.strongest;
      expect(strongest.theme).toBe(onSchool ? school : theme);
    }
    // From scratch it is found again around the same passages.
    await table.ask('fit', { kind: 'from scratch', themes: 2 });
    const again = await table.ask('themeView', { theme: school });
    const found = again.words.slice(0, 6).map(({ form }) => form);
    expect(found.filter((word) => lessons.includes(word)).length).toBeGreaterThanOrEqual(4);
  });

  test('is one decision, and is refused without passages', async () => {
    const { table } = await oneTheme();
    const { place } = await passageOf(table, 'P2', 1);
    await table.ask('addThemeFromPassages', { name: 'School', passages: [place, place] });
    await table.ask('undo', null);
    expect((await table.ask('shapeView', null)).themes).toHaveLength(1);
    const codings = (await passageOf(table, 'P2', 1)).view.codings;
    expect(codings).toEqual([]);
    const none = { name: 'School', passages: [] };
    expect(await table.refused('addThemeFromPassages', none)).toBe('no passages marked');
    const bad = { name: ' ', passages: [place] };
    expect(await table.refused('addThemeFromPassages', bad)).toBe('empty name');
  });
});
