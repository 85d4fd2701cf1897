import { describe, expect, it } from 'vitest';
import {
  isModelled,
  nameKey,
  resolveTheme,
  themesWithDecisions,
  visibleThemes,
  type Edit,
} from '../../../engine/study/index.ts';
import { after, candidate, coding, fit, island, memo, theme } from './scene.ts';

const late = theme('late', { name: null, origin: 'fitted' });
const refit: Edit = {
  kind: 'modelFitted',
  fit: fit('second-fit', { themes: ['sea', 'work', 'late'] }),
  found: [late],
  before: 'first-fit',
};

const seen = (...edits: readonly Edit[]) =>
  visibleThemes(after(island, ...edits)).map(({ id }) => id);

describe('a merged theme', () => {
  const twice = after(
    island,
    { kind: 'themesMerged', into: 'work', from: ['candidate'] },
    { kind: 'themesMerged', into: 'sea', from: ['work'] },
  );

  it('resolves to the one that holds its codings now, over several merges', () => {
    expect(resolveTheme(twice, 'candidate')?.id).toBe('sea');
    expect(resolveTheme(twice, 'sea')?.id).toBe('sea');
    expect(resolveTheme(twice, 'nowhere')).toBeUndefined();
  });

  it('is not seen any more', () => {
    expect(visibleThemes(twice).map(({ id }) => id)).toEqual(['sea', 'silence']);
  });
});

describe('a theme takes part in the model', () => {
  it('unless it is by hand, set aside or merged away', () => {
    expect(isModelled(theme('t'))).toBe(true);
    expect(isModelled(candidate)).toBe(true);
    expect(isModelled(theme('t', { origin: 'by hand' }))).toBe(false);
    expect(isModelled(theme('t', { setAside: true }))).toBe(false);
    expect(isModelled(theme('t', { mergedInto: 'sea' }))).toBe(false);
  });
});

describe('a candidate of an earlier fit', () => {
  it('vanishes when another fit is on screen', () => {
    expect(seen()).toEqual(['sea', 'silence', 'work', 'candidate']);
    expect(seen(refit)).toEqual(['sea', 'silence', 'work', 'late']);
  });

  it('comes back with its fit', () => {
    expect(seen(refit, { kind: 'fitChosen', from: 'second-fit', to: 'first-fit' })).toEqual([
      'sea',
      'silence',
      'work',
      'candidate',
    ]);
  });

  const decisions: Record<string, Edit> = {
    'a name': { kind: 'themeRenamed', theme: 'candidate', from: null, to: 'Weather' },
    'a pin': { kind: 'themePinned', theme: 'candidate' },
    'being set aside': { kind: 'themeSetAside', theme: 'candidate' },
    'a seed': { kind: 'wordSeeded', theme: 'candidate', word: 'rain' },
    'a word shut out': { kind: 'wordShutOut', theme: 'candidate', word: 'rain' },
    'a codebook entry': {
      kind: 'themeDefined',
      theme: 'candidate',
      from: { version: 1, definition: candidate.definition },
      to: { version: 2, definition: { ...candidate.definition, brief: 'Rain and wind' } },
    },
    'a theme merged into it': { kind: 'themesMerged', into: 'candidate', from: ['silence'] },
    'a confirmed coding': { kind: 'codingMade', coding: coding('c', { theme: 'candidate' }) },
    'a rejected coding': {
      kind: 'codingMade',
      coding: coding('c', { theme: 'candidate', standing: 'rejected' }),
    },
    'a memo': { kind: 'memoWritten', memo: memo('m', { kind: 'theme', theme: 'candidate' }) },
  };

  for (const [decision, edit] of Object.entries(decisions)) {
    it(`stays where a person gave it ${decision}`, () => {
      expect(seen(edit, refit)).toContain('candidate');
      expect([...themesWithDecisions(after(island, edit, refit))]).toContain('candidate');
    });
  }

  it('carries no decision by having been found', () => {
    expect([...themesWithDecisions(after(island, refit))].sort()).toEqual([
      'sea',
      'silence',
      'work',
    ]);
  });
});

describe('two names of themes', () => {
  it('are one where case and spaces alone differ, or how an accent is stored', () => {
    expect(nameKey('  The   Sea ')).toBe(nameKey('the sea'));
    expect(nameKey('Caf\u00e9')).toBe(nameKey('Cafe\u0301'));
    expect(nameKey('Sea')).not.toBe(nameKey('Seas'));
  });
});
