/** Matches any of the forms as whole words; null where there are none. */
export function matcherOf(forms: readonly string[], ignoreCase = false): RegExp | null {
  const each = [...new Set(forms)]
    .filter((form) => form.trim() !== '')
    .sort((a, b) => b.length - a.length)
    .map((form) => form.replace(/[.*+?^${}()|[\]\\]/gu, '\\$&'));
  if (each.length === 0) return null;
  return new RegExp(
    `(?<![\\p{L}\\p{N}])(?:${each.join('|')})(?![\\p{L}\\p{N}])`,
    ignoreCase ? 'giu' : 'gu',
  );
}

/** A text with every form replaced, capitals kept where all of it is written so. */
export function replaceForms(text: string, forms: readonly string[], replacement: string): string {
  const matcher = matcherOf(forms);
  return matcher === null ? text : text.replace(matcher, (form) => inPlaceOf(form, replacement));
}

/** A replacement as it is written in the place of a form: RUTH -> ANNA. */
export function inPlaceOf(form: string, replacement: string): string {
  const shouted = [...form].length > 1 && form === form.toUpperCase() && /\p{Lu}{2}/u.test(form);
  return shouted && /^\p{Lu}[\p{Ll}\s-]+$/u.test(replacement)
    ? replacement.toUpperCase()
    : replacement;
}
