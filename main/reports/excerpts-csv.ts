import type { Study } from '../../engine/study/index.ts';
import { attributeNames, type CodedExcerpt } from './coded-excerpts.ts';
import { csv, type CsvOptions } from './csv.ts';
import { clock, decimals, yesNo } from './format.ts';

export const excerptColumns = [
  'excerpt_id',
  'transcript',
  'participant',
  'speaker',
  'start_time',
  'question_before',
  'passage',
  'start',
  'end',
  'text',
  'theme_id',
  'theme',
  'standing',
  'strength',
  'strength_at_decision',
  'seen_suggestion',
  'drawn_by',
  'reader',
  'decided_at',
  'codebook_version',
  'memo',
] as const;

/**
 * excerpts.csv: the columns above, then one for each attribute of the study. Of a stored study the
 * head of its chain stands in a last column.
 */
export function excerptsCsv(
  study: Study,
  excerpts: readonly CodedExcerpt[],
  options: CsvOptions,
  head: string | null = null,
): string {
  const attributes = attributeNames(study);
  return csv(
    [
      [...excerptColumns, ...attributes, ...(head === null ? [] : ['study_head'])],
      ...excerpts.map((excerpt) => [
        excerpt.id,
        excerpt.transcript,
        excerpt.participant,
        excerpt.speaker,
        clock(excerpt.startTime),
        excerpt.questionBefore,
        excerpt.passage,
        excerpt.span.start,
        excerpt.span.end,
        excerpt.text,
        excerpt.themeId,
        excerpt.theme,
        excerpt.standing,
        decimals(excerpt.strength),
        decimals(excerpt.strengthAtDecision),
        yesNo(excerpt.seenSuggestion),
        excerpt.drawnBy,
        excerpt.reader,
        excerpt.decidedAt,
        excerpt.codebookVersion,
        excerpt.memo,
        ...attributes.map((name) => excerpt.attributes[name] ?? ''),
        ...(head === null ? [] : [head]),
      ]),
    ],
    options,
  );
}
