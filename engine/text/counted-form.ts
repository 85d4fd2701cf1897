import type { TextSettings } from './settings.ts';
import { stemmerFor } from './stemming.ts';
import { formOf } from './words.ts';

/** The vocabulary entry that a typed word would be counted under; null for no single word. */
export function countedForm(
  word: string,
  settings: Pick<TextSettings, 'language' | 'stemming'>,
): string | null {
  const form = formOf(word, settings.language);
  if (form === null) return null;
  return settings.stemming ? stemmerFor(settings.language)(form) : form;
}
