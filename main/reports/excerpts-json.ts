import type { CodedExcerpt } from './coded-excerpts.ts';

/** Coded excerpts as JSON, with the filter that they passed. */
export function excerptsJson(
  study: string,
  excerpts: readonly CodedExcerpt[],
  standings: readonly string[],
): string {
  return `${JSON.stringify({ study, filter: { standings }, excerpts }, null, 2)}\n`;
}
