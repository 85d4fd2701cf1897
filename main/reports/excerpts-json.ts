import type { ReportFilter } from './excerpt-book.ts';
import type { CodedExcerpt } from './coded-excerpts.ts';

/** Coded excerpts as JSON, with the filter that they passed. */
export function excerptsJson(
  study: string,
  excerpts: readonly CodedExcerpt[],
  filter: ReportFilter,
): string {
  return `${JSON.stringify({ study, filter, excerpts }, null, 2)}\n`;
}
