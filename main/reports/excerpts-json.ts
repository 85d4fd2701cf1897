import type { ReportFilter } from './excerpt-book.ts';
import type { CodedExcerpt } from './coded-excerpts.ts';

/** Coded excerpts as JSON, with the filter that they passed and the head of the study's chain. */
export function excerptsJson(
  study: string,
  excerpts: readonly CodedExcerpt[],
  filter: ReportFilter,
  head: string,
): string {
  return `${JSON.stringify({ study, head, filter, excerpts }, null, 2)}\n`;
}
