import type { Span } from './span.ts';

/**
 * One speaker's words up to the next change of speaker. The span holds what was said, without the
 * label in front of it; it may hold line breaks.
 */
export interface Turn extends Span {
  /** The label as it stands in the transcript, or null where none was given. */
  readonly speaker: string | null;
  /** Milliseconds from the start of the recording, or null where the source gives no time. */
  readonly startTime: number | null;
  readonly endTime: number | null;
  /** The question of the interview guide that it asks; absent where nobody said so. */
  readonly question?: string;
}

/** A line before the first turn ("Date: 3 May"): kept with the transcript, never taken for speech. */
export interface Detail {
  readonly name: string;
  readonly value: string;
}

/** What a person's part in a transcript is. Only participants' words are modelled. */
export type Role = 'interviewer' | 'participant' | 'other';
