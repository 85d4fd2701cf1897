import { isHeldBack, resolveTheme, type Study, type ThemeId } from '../study/index.ts';
import type { Span } from '../spans/index.ts';

/** A person's word on one theme at one place, as the model takes it in. */
export interface Decided {
  readonly transcript: string;
  readonly span: Span;
  readonly theme: ThemeId;
  /** True for confirmed and by hand, false for rejected. */
  readonly applies: boolean;
}

/**
 * Every decision about a theme, merges followed, in an order that does not depend on its making.
 * Those in a cold sample that was not scored yet stay out.
 */
export function decisions(study: Study): Decided[] {
  const all: Decided[] = [];
  for (const transcript of study.transcripts.keys()) {
    for (const coding of study.codings.get(transcript)?.values() ?? []) {
      const theme = resolveTheme(study, coding.theme);
      if (theme === undefined || isHeldBack(study, transcript, coding.span)) continue;
      all.push({
        transcript,
        span: { start: coding.span.start, end: coding.span.end },
        theme: theme.id,
        applies: coding.standing !== 'rejected',
      });
    }
  }
  return all;
}
