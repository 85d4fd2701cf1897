import { describe, expect, test } from 'vitest';
import { modelledThemes } from '../../../engine/themes/index.ts';
import { fit, theme } from '../study/scene.ts';
import { studyOf } from './scene.ts';

const idsOf = (...args: Parameters<typeof studyOf>): string[] =>
  modelledThemes(studyOf(...args)).map(({ id }) => id);

describe('which themes a fit models', () => {
  test('those that a person asked for, before any fit', () => {
    expect(idsOf([theme('b'), theme('a')])).toEqual(['b', 'a']);
  });

  test('not those by hand, set aside or merged into another', () => {
    const themes = [
      theme('hand', { origin: 'by hand' }),
      theme('aside', { setAside: true }),
      theme('merged', { mergedInto: 'stays' }),
      theme('stays'),
    ];
    expect(idsOf(themes)).toEqual(['stays']);
  });

  test('candidates of the fit on screen, not those of others', () => {
    const fitted = { name: null, origin: 'fitted' } as const;
    const themes = [theme('old', fitted), theme('new', fitted)];
    const fits = [fit('one', { themes: ['old'] }), fit('two', { themes: ['new'] })];
    expect(idsOf(themes, fits)).toEqual(['new']);
  });

  test('a candidate that was set aside, fitted without and brought back', () => {
    const fitted = { name: null, origin: 'fitted' } as const;
    const start = { kind: 'warm', seed: 1, from: 'one' } as const;
    const fits = [
      fit('one', { themes: ['back', 'stays'] }),
      fit('two', { themes: ['stays'], start }),
    ];
    expect(idsOf([theme('back', fitted), theme('stays', fitted)], fits)).toEqual(['back', 'stays']);
    const aside = theme('back', { ...fitted, setAside: true });
    expect(idsOf([aside, theme('stays', fitted)], fits)).toEqual(['stays']);
  });

  test('a candidate of another fit stays where a person named or pinned it', () => {
    const themes = [
      theme('named', { origin: 'fitted' }),
      theme('pinned', { origin: 'fitted', name: null, pinned: true }),
    ];
    expect(idsOf(themes, [fit('two', { themes: [] })])).toEqual(['named', 'pinned']);
  });

  test('one that another was merged into, where that one is in the fit on screen', () => {
    const fitted = { name: null, origin: 'fitted' } as const;
    const themes = [theme('into', fitted), theme('from', { ...fitted, mergedInto: 'into' })];
    expect(idsOf(themes, [fit('one', { themes: ['from'] })])).toEqual(['into']);
  });
});

describe('what a merged theme brings along', () => {
  test('its seeds, over two merges, in code-unit order, less what is shut out', () => {
    const themes = [
      theme('top', { seeds: ['oar'], shutOut: ['net'] }),
      theme('middle', { mergedInto: 'top', seeds: ['net', 'boat'], shutOut: ['oar'] }),
      theme('bottom', { mergedInto: 'middle', seeds: ['Éire', 'boat'] }),
    ];
    expect(modelledThemes(studyOf(themes))).toEqual([
      {
        id: 'top',
        pinned: false,
        seeds: ['boat', 'oar', 'Éire'],
        shutOut: ['net'],
        absorbed: ['middle', 'bottom'],
      },
    ]);
  });
});
