import { describe, expect, test } from 'vitest';
import type { Api, Events } from '../../../main/api.ts';
import { newStudy, passageOf, seen, type Table } from './table.ts';

/** A study whose fits from scratch show a quick answer first. */
async function newStudyInTwoSteps(people = 3): Promise<Table> {
  const table = await newStudy(people, { quickFrom: 0 });
  await table.ask('changeSettings', { settings: { answer: 'full' } });
  return table;
}

/** Everything told of a refinement until it ends. */
function refinementOf(table: Table): Promise<Events['refining'][]> {
  return new Promise((resolve) => {
    const told: Events['refining'][] = [];
    table.session.on('refining', (detail) => {
      told.push(detail);
      if (detail.fraction === null) resolve(told);
    });
  });
}

const shape = (table: Table): Promise<Api['shapeView']['gives']> => table.ask('shapeView', null);

describe('a fit from scratch that takes long', () => {
  test('shows the quick answer first, and the full one in its place for the same themes', async () => {
    const table = await newStudyInTwoSteps();
    const ended = refinementOf(table);
    const { overview } = await table.ask('fit', { kind: 'from scratch', themes: null });
    const quick = await shape(table);
    expect(quick.fit).toMatchObject({ kind: 'from scratch', answer: 'quick' });
    expect(overview.refining?.fit ?? quick.fit!.id).toBe(quick.fit!.id);
    const told = await ended;
    expect(told.at(-1)).toEqual({ fraction: null, said: null });
    const fractions = told.flatMap(({ fraction }) => fraction ?? []);
    expect(fractions).toEqual([...fractions].sort((a, b) => a - b));
    const full = await shape(table);
    expect(full.fit).toMatchObject({ kind: 'from scratch', answer: 'full' });
    expect(full.fits).toHaveLength(2);
    expect(full.themes.map(({ id }) => id)).toEqual(quick.themes.map(({ id }) => id));
    // Each theme is the one that it was: its words are nearly those of the quick answer.
    quick.themes.forEach(({ words }, i) => {
      const kept = words.filter((word) => full.themes[i].words.includes(word));
      expect(kept.length).toBeGreaterThan(words.length / 2);
    });
    expect(await table.ask('overview', null)).toMatchObject({ refining: null, waiting: [] });
  });

  test('keeps what is decided while the full answer is made', async () => {
    const table = await newStudyInTwoSteps();
    const ended = refinementOf(table);
    await table.ask('fit', { kind: 'from scratch', themes: null });
    const { place, view } = await passageOf(table, 'P1', 0);
    const { theme } = view.strongest[0];
    await table.ask('nameTheme', { theme, name: 'Named meanwhile' });
    await table.ask('confirm', { place, theme, memo: '', ...seen });
    expect((await ended).at(-1)).toEqual({ fraction: null, said: null });
    const after = await shape(table);
    expect(after.fit?.answer).toBe('full');
    expect(after.themes.find(({ id }) => id === theme)).toMatchObject({
      name: 'Named meanwhile',
      codings: 1,
    });
    expect((await table.ask('overview', null))!.waiting).toEqual(['1 coding confirmed']);
  });

  test('keeps the quick answer, and says so, where the themes changed meanwhile', async () => {
    const table = await newStudyInTwoSteps();
    const ended = refinementOf(table);
    await table.ask('fit', { kind: 'from scratch', themes: null });
    await table.ask('addTheme', { name: 'Another', byHand: false, seeds: ['ferry'] });
    const { said } = (await ended).at(-1)!;
    expect(said).toMatch(/the quick answer stays/u);
    expect((await shape(table)).fit?.answer).toBe('quick');
  });

  test('keeps the quick answer where the full one is stopped or a re-fit takes over', async () => {
    const table = await newStudyInTwoSteps();
    await table.ask('fit', { kind: 'from scratch', themes: null });
    expect(await table.ask('stopRefining', null)).toMatchObject({ refining: null });
    await table.ask('fit', { kind: 're-fit', themes: null });
    const { fit, fits } = await shape(table);
    expect(fit).toMatchObject({ kind: 're-fit', answer: 'quick' });
    expect(fits).toHaveLength(2);
  });

  test('goes straight to the full answer where that takes a moment only', async () => {
    const table = await newStudy(3);
    await table.ask('changeSettings', { settings: { answer: 'full' } });
    await table.ask('fit', { kind: 'from scratch', themes: null });
    const { fit, fits } = await shape(table);
    expect(fit?.answer).toBe('full');
    expect(fits).toHaveLength(1);
  });
});
