import { describe, expect, test } from 'vitest';
import { newStudy, passageOf, placeOf, seen, transcriptsOf, type Table } from './table.ts';

const blank = { code: '', brief: '', full: '', whenToUse: '', whenNotToUse: '', examples: '' };

async function firstTheme(table: Table): Promise<string> {
  return (await table.ask('shapeView', null)).themes[0].id;
}

const earlier = (theme: string) =>
  ({
    kind: 'earlier wording',
    theme,
    transcript: null,
    unreadOnly: true,
    count: 0,
    seed: 0,
  }) as const;

describe('wordings of a codebook entry', () => {
  test('are numbered and kept, with how many codings were made under each', async () => {
    const table = await newStudy(3, { fitted: true });
    const theme = await firstTheme(table);
    const { place } = await passageOf(table, 'P1');
    await table.ask('codeByHand', { place, theme, memo: '', ...seen });
    await table.ask('defineTheme', { theme, ...blank, brief: 'Crossing by boat' });
    await table.ask('defineTheme', { theme, ...blank, brief: 'Crossing', code: 'CROSS' });
    const other = await passageOf(table, 'P2');
    await table.ask('codeByHand', { place: other.place, theme, memo: '', ...seen });
    const view = await table.ask('themeView', { theme });
    expect(
      view.wordings.map(({ version, definition, codings, reader }) => [
        version,
        definition.code,
        definition.brief,
        codings,
        reader,
      ]),
    ).toEqual([
      [1, '', '', 1, ''],
      [2, '', 'Crossing by boat', 0, 'Ada'],
      [3, 'CROSS', 'Crossing', 1, 'Ada'],
    ]);
    expect(view.row.code).toBe('CROSS');
    await table.ask('undo', null);
    await table.ask('undo', null);
    expect((await table.ask('themeView', { theme })).wordings.map((one) => one.version)).toEqual([
      1, 2,
    ]);
  });

  test('make a reading list of what was coded under an earlier one, until it is looked at again', async () => {
    const table = await newStudy(3, { fitted: true });
    const theme = await firstTheme(table);
    for (const name of ['P1', 'P2']) {
      const { place } = await passageOf(table, name);
      await table.ask('codeByHand', { place, theme, memo: '', ...seen });
    }
    const third = await passageOf(table, 'P3', 1);
    await table.ask('reject', { place: third.place, theme, memo: '', ...seen });
    expect((await table.ask('readingList', earlier(theme))).places).toEqual([]);

    await table.ask('defineTheme', { theme, ...blank, whenToUse: 'Boats only' });
    const list = await table.ask('readingList', earlier(theme));
    expect(list.name).toMatch(/^earlier wording: candidate/u);
    expect(list.places).toHaveLength(3);
    expect((await table.ask('themeView', { theme })).earlierCodings).toBe(3);
    const shown = await table.ask('themePassages', { theme, list: 'earlier wording' });
    expect(shown.map(({ version }) => version)).toEqual([1, 1, 1]);

    const first = shown.find(({ standing }) => standing === 'by hand')!;
    await table.ask('keepCoding', { transcript: first.transcript, coding: first.coding! });
    expect((await table.ask('readingList', earlier(theme))).places).toHaveLength(2);
    // Decided once more in Read, it is looked at again as well: a rejection by rejecting.
    await table.ask('reject', { place: third.place, theme, memo: '', ...seen });
    const { place } = await passageOf(table, 'P2');
    await table.ask('confirm', { place, theme, memo: '', ...seen });
    expect((await table.ask('themeView', { theme })).earlierCodings).toBe(0);
    expect((await table.ask('overview', null))!.undo).toBe('keeping of a coding under wording 2');
    await table.ask('undo', null);
    expect((await table.ask('themeView', { theme })).earlierCodings).toBe(1);
    expect(await table.refused('keepCoding', { transcript: place.transcript, coding: 'x' })).toBe(
      'unknown coding',
    );
    expect(await table.refused('readingList', { ...earlier(theme), theme: null })).toBe(
      'unknown theme',
    );
  });

  test('that differ in code or examples only ask for no second look', async () => {
    const table = await newStudy(2, { fitted: true });
    const theme = await firstTheme(table);
    const { place } = await passageOf(table);
    await table.ask('codeByHand', { place, theme, memo: '', ...seen });
    await table.ask('defineTheme', { theme, ...blank, code: 'C', examples: '“the ferry”' });
    expect(await table.ask('themeView', { theme })).toMatchObject({
      version: 2,
      earlierCodings: 0,
    });
  });

  test('have a code that no other theme has', async () => {
    const table = await newStudy(2, { fitted: true });
    const [one, two] = (await table.ask('shapeView', null)).themes;
    await table.ask('defineTheme', { theme: one.id, ...blank, code: 'SEA' });
    expect(await table.refused('defineTheme', { theme: two.id, ...blank, code: ' sea ' })).toBe(
      'code taken',
    );
  });
});

describe('headings', () => {
  test('stand over themes, and going away leave them under none', async () => {
    const table = await newStudy(2, { fitted: true });
    const [one, two] = (await table.ask('shapeView', null)).themes;
    await table.ask('addHeading', { name: ' Getting about ', themes: [one.id] });
    let view = await table.ask('shapeView', null);
    const [heading] = view.headings;
    expect(heading.name).toBe('Getting about');
    expect(view.themes.map((row) => row.heading)).toEqual([heading.id, null]);
    await table.ask('putUnder', { theme: two.id, heading: heading.id });
    await table.ask('changeHeading', {
      heading: heading.id,
      name: 'Travel',
      themes: [one.id, two.id],
    });
    await table.ask('removeHeading', { heading: heading.id });
    view = await table.ask('shapeView', null);
    expect(view.headings).toEqual([]);
    expect(view.themes.map((row) => row.heading)).toEqual([null, null]);
    expect(await table.ask('undo', null)).toMatchObject({
      did: 'removal of the heading Travel',
    });
    view = await table.ask('shapeView', null);
    expect(view.themes.map((row) => row.heading)).toEqual([heading.id, heading.id]);
    // No model: nothing waits for a re-fit.
    expect((await table.ask('overview', null))!.waiting).toEqual([]);
    await table.ask('changeHeading', { heading: heading.id, name: 'Travel ', themes: [two.id] });
    view = await table.ask('shapeView', null);
    expect(view.themes.map((row) => row.heading)).toEqual([null, heading.id]);
    expect(await table.refused('addHeading', { name: 'travel', themes: [] })).toBe('name taken');
    expect(await table.refused('addHeading', { name: ' ', themes: [] })).toBe('empty name');
    expect(await table.refused('putUnder', { theme: one.id, heading: 'x' })).toBe(
      'unknown heading',
    );
    expect(await table.refused('removeHeading', { heading: 'x' })).toBe('unknown heading');
    expect(await table.refused('changeHeading', { heading: 'x', name: 'A', themes: [] })).toBe(
      'unknown heading',
    );
  });
});

describe('a merge', () => {
  test('is seen before it is made, and refused in the preview where it would be', async () => {
    const table = await newStudy(3, { fitted: true });
    const [one, two] = (await table.ask('shapeView', null)).themes;
    const { place } = await passageOf(table, 'P1');
    for (const { id } of [one, two]) {
      await table.ask('codeByHand', { place, theme: id, memo: '', ...seen });
    }
    const other = await passageOf(table, 'P2');
    await table.ask('codeByHand', { place: other.place, theme: two.id, memo: '', ...seen });
    const { revision } = (await table.ask('overview', null))!;
    const preview = await table.ask('mergePreview', { into: one.id, from: [two.id] });
    expect(preview).toMatchObject({ people: 2, codings: 3, codedTwice: 1 });
    expect(preview.share).toBeCloseTo(1, 5);
    expect(preview.words).toContain('ferry');
    expect(preview.words).toContain('teacher');
    expect((await table.ask('overview', null))!.revision).toBe(revision);
    const merge = { into: one.id, from: [one.id] };
    expect(await table.refused('mergePreview', merge)).toBe('merge into itself');
    expect(await table.refused('mergePreview', { ...merge, from: ['x'] })).toBe('unknown theme');
  });
});

describe('a theme looked at closely', () => {
  test('has words by probability and by term score', async () => {
    const table = await newStudy(3, { fitted: true });
    const { words, tellingWords } = await table.ask('themeView', {
      theme: await firstTheme(table),
    });
    const scores = tellingWords.map(({ termScore }) => termScore);
    expect(scores).toEqual([...scores].sort((a, b) => b - a));
    expect(scores.every((score) => score > 0)).toBe(true);
    const both = words.find(({ form }) => form === tellingWords[0].form);
    expect(both).toEqual(tellingWords[0]);
  });

  test('tells for whom it is, and after which question', async () => {
    const table = await newStudy(3, { fitted: true });
    const theme = await firstTheme(table);
    await table.ask('addAttributes', {
      name: 'attributes.csv',
      bytes: new TextEncoder().encode('participant,island\nP1,Nes\nP2,Nes\n'),
    });
    const { place } = await passageOf(table, 'P2');
    await table.ask('codeByHand', { place, theme, memo: '', ...seen });
    const spread = await table.ask('themeSpread', { theme });
    expect(spread.attributes).toEqual([
      {
        name: 'island',
        values: [
          { value: 'Nes', people: 2, coded: 1, led: 2 },
          { value: null, people: 1, coded: 0, led: 1 },
        ],
      },
    ]);
    expect(spread.questions[0]).toMatchObject({ people: 3 });
    expect(spread.questions[0].share).toBeGreaterThan(0.5);
    expect(await table.refused('themeSpread', { theme: 'x' })).toBe('unknown theme');
  });

  test('shows what lies nearest the edge and was decided on by nobody, and what was rejected', async () => {
    const table = await newStudy(3, { fitted: true });
    const theme = await firstTheme(table);
    const before = await table.ask('themePassages', { theme, list: 'nearest the edge' });
    const distance = before.map(({ strength }) => Math.abs(strength - 0.5));
    expect(distance[0]).toBeLessThanOrEqual(distance[1]);
    const place = placeOf(before[0].transcript, before[0]);
    await table.ask('reject', { place, theme, memo: '', ...seen });
    const after = await table.ask('themePassages', { theme, list: 'nearest the edge' });
    expect(after.map((one) => placeOf(one.transcript, one))).not.toContainEqual(place);
    expect(await table.ask('themePassages', { theme, list: 'rejected' })).toMatchObject([
      { ...place, standing: 'rejected' },
    ]);
    expect(await table.refused('themePassages', { theme: 'x', list: 'rejected' })).toBe(
      'unknown theme',
    );
  });

  test('warns of a seed that is everywhere, that would swallow it, or that nobody says', async () => {
    const table = await newStudy(3, { fitted: true });
    const theme = await firstTheme(table);
    const check = (words: string[]) => table.ask('seedCheck', { theme, words });
    expect(await check(['submarine'])).toEqual([expect.stringContaining('not among')]);
    expect(await check(['submarine', 'SUBMARINE'])).toHaveLength(1);
    await table.ask('seedWord', { theme, word: 'submarine', seeded: true });
    expect((await table.ask('themeView', { theme })).seedCautions).toHaveLength(1);
    expect(await table.ask('seedCheck', { theme: null, words: [] })).toEqual([]);
    expect(await table.refused('seedCheck', { theme: 'x', words: [] })).toBe('unknown theme');
  });
});

describe('fits that are kept', () => {
  test('have names, and stand side by side', async () => {
    const table = await newStudy(3, { fitted: true });
    await table.ask('fit', { kind: 'from scratch', themes: 3 });
    const { fits } = await table.ask('shapeView', null);
    const [first, second] = fits;
    await table.ask('nameFit', { fit: first.id, name: ' First look ' });
    expect((await table.ask('shapeView', null)).fits[0]).toMatchObject({
      name: 'First look',
      label: 'First look',
      themes: 2,
    });
    const compared = await table.ask('compareFits', { first: first.id, second: second.id });
    expect(compared.first.label).toBe('First look');
    expect(compared.pairs).toHaveLength(2);
    expect(compared.onlySecond).toHaveLength(1);
    expect(compared.pairs[0].cosine).toBeGreaterThan(0.5);
    expect(compared.words.both).toBe(compared.words.either);
    const same = await table.ask('compareFits', { first: first.id, second: first.id });
    expect([same.agreement, same.adjustedRand]).toEqual([1, 1]);
    await table.ask('nameFit', { fit: first.id, name: '' });
    expect((await table.ask('shapeView', null)).fits[0].name).toBeNull();
    expect(await table.refused('nameFit', { fit: 'x', name: 'A' })).toBe('unknown fit');
    const unknown = { first: first.id, second: 'x' };
    expect(await table.refused('compareFits', unknown)).toBe('unknown fit');
  });
});

describe('the floor of what moved', () => {
  test('is what a re-fit moves without any new decision, and none for a fit from scratch', async () => {
    const table = await newStudy(3, { fitted: true });
    expect(await table.ask('movedFloor', null)).toBeNull();
    const { place, view } = await passageOf(table);
    const { theme } = view.suggestions[0];
    await table.ask('reject', { place, theme, memo: '', ...seen });
    const { moved } = await table.ask('fit', { kind: 're-fit', themes: null });
    expect(moved!.passages.length).toBeGreaterThan(0);
    expect(await table.ask('movedFloor', null)).toEqual({ passages: 0, themes: 0 });
  });
});

describe('the strata as a drawing', () => {
  test('have a band a transcript in the order asked for, with the chosen theme inked', async () => {
    const table = await newStudy(3, { fitted: true });
    const strata = await table.ask('strata', null);
    const layers = strata.themes.length;
    for (let band = 0; band < 3; band++) {
      expect(strata.bandShares[band * layers] + strata.bandShares[band * layers + 1]).toBeCloseTo(
        1,
        5,
      );
    }
    expect(strata.bands.map(({ gathered }) => gathered)).toEqual([0, 1, 2]);
    const ids = strata.bands.map(({ transcript }) => transcript);
    const { fileName, bytes } = await table.ask('strataFigure', {
      theme: strata.themes[0],
      transcripts: [ids[2], ids[0]],
    });
    expect(fileName).toBe('Crossings strata.svg');
    const svg = new TextDecoder().decode(bytes);
    expect([...svg.matchAll(/>(P\d)</gu)].map(([, name]) => name)).toEqual(['P3', 'P1', 'P2']);
    expect(svg.match(/fill="#2f5d46"/gu)).toHaveLength(3);
    expect(svg).not.toMatch(/NaN|Infinity|undefined/u);
    const unknown = { theme: 'x', transcripts: [] };
    expect(await table.refused('strataFigure', unknown)).toBe('unknown theme');
    expect((await transcriptsOf(table)).size).toBe(3);
  });
});
