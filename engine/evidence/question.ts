import type { Span } from '../spans/index.ts';
import { wordsOf, type Language } from '../text/index.ts';

/**
 * A question as it is told from others: its words in their counted spelling, without what stands
 * between them. Null for no question or one without words.
 */
export function sameQuestion(text: string, span: Span | null, language: Language): string | null {
  if (span === null) return null;
  const forms = wordsOf(text, span, language).map(({ form }) => form);
  return forms.length === 0 ? null : forms.join(' ');
}
