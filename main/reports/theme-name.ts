import type { Theme } from '../../engine/study/index.ts';
import { candidateWords, type Fitted } from '../../engine/themes/index.ts';

/** What a theme is called in reports: its name, or what marks it as a candidate. */
export function themeName(theme: Theme, fitted: Fitted | null): string {
  if (theme.name !== null) return theme.name;
  const words = fitted === null ? [] : candidateWords(fitted, theme.id);
  return words.length === 0 ? 'candidate' : `candidate: ${words.join(', ')}`;
}
