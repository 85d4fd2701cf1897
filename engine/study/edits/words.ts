import { compareCodeUnits } from '../../numbers/index.ts';
import type { Edit } from '../edit.ts';
import { done, refused, type Result } from '../refusal.ts';
import type { Study, Theme, ThemeId } from '../study.ts';
import { isModelled } from '../themes.ts';
import { change, outsideModel } from './themes.ts';
import type { Rules } from './rule.ts';

interface WordEdit {
  readonly theme: ThemeId;
  readonly word: string;
}

export const wordRules: Rules<'wordSeeded' | 'wordUnseeded' | 'wordShutOut' | 'wordLetIn'> = {
  wordSeeded: {
    apply: (study, { theme, word }, restoring) =>
      changeWords(study, { theme, word }, restoring, (current) => {
        if (current.shutOut.includes(word)) return refused('word shut out there', word);
        if (current.seeds.includes(word)) return refused('word seeded there', word);
        return done({ ...current, seeds: withWord(current.seeds, word) });
      }),
    inverse: ({ theme, word }): Edit => ({ kind: 'wordUnseeded', theme, word }),
  },

  wordUnseeded: {
    apply: (study, { theme, word }) =>
      change(study, theme, (current) => {
        if (!current.seeds.includes(word)) return refused('word not seeded there', word);
        return done({ ...current, seeds: current.seeds.filter((other) => other !== word) });
      }),
    inverse: ({ theme, word }): Edit => ({ kind: 'wordSeeded', theme, word }),
  },

  wordShutOut: {
    apply: (study, { theme, word }, restoring) =>
      changeWords(study, { theme, word }, restoring, (current) => {
        if (current.seeds.includes(word)) return refused('word seeded there', word);
        if (current.shutOut.includes(word)) return refused('word shut out there', word);
        if (!restoring && isShutOutOfAllOthers(study, theme, word)) {
          return refused('shut out everywhere', word);
        }
        return done({ ...current, shutOut: withWord(current.shutOut, word) });
      }),
    inverse: ({ theme, word }): Edit => ({ kind: 'wordLetIn', theme, word }),
  },

  wordLetIn: {
    apply: (study, { theme, word }) =>
      change(study, theme, (current) => {
        if (!current.shutOut.includes(word)) return refused('word not shut out there', word);
        return done({ ...current, shutOut: current.shutOut.filter((other) => other !== word) });
      }),
    inverse: ({ theme, word }): Edit => ({ kind: 'wordShutOut', theme, word }),
  },
};

function changeWords(
  study: Study,
  { theme, word }: WordEdit,
  restoring: boolean,
  step: (theme: Theme) => Result<Theme>,
): Result<Study> {
  if (word.trim() === '') return refused('empty name', theme);
  return change(study, theme, (current) =>
    restoring || isModelled(current) ? step(current) : outsideModel(current),
  );
}

function withWord(words: readonly string[], word: string): string[] {
  return [...words, word].sort(compareCodeUnits);
}

/**
 * A word with no theme left to belong to could not be modelled. Before the first fit nobody knows
 * how many candidates will stand beside the themes asked for, so nothing is refused then; whoever
 * builds the priors has to look again.
 */
function isShutOutOfAllOthers(study: Study, theme: ThemeId, word: string): boolean {
  const fitted = study.fit === null ? undefined : study.fits.get(study.fit)?.themes;
  if (fitted === undefined) return false;
  const others = [...study.themes.values()].filter(
    (other) =>
      other.id !== theme &&
      isModelled(other) &&
      (other.origin === 'asked for' || fitted.includes(other.id)),
  );
  return others.every((other) => other.shutOut.includes(word));
}
