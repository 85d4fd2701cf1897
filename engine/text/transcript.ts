import type { Role, Turn } from '../spans/index.ts';

/** What the engine needs of one transcript to derive passages and words. */
export interface TranscriptText {
  readonly id: string;
  /** Canonical: LF line ends, no byte order mark. */
  readonly text: string;
  /** In the order of the text, not overlapping. */
  readonly turns: readonly Turn[];
  /** By `speakerKey`; a speaker without a role is a participant. */
  readonly roles: Readonly<Record<string, Role>>;
  /** By `speakerKey`: whose words these are over the whole study. */
  readonly participants: Readonly<Record<string, string>>;
}

/** The key of a speaker in `roles` and `participants`: the label, or '' for turns without one. */
export function speakerKey(speaker: string | null): string {
  return speaker ?? '';
}

export function roleOf(transcript: Pick<TranscriptText, 'roles'>, speaker: string | null): Role {
  const key = speakerKey(speaker);
  return Object.hasOwn(transcript.roles, key) ? transcript.roles[key]! : 'participant';
}

/** The participant behind a label; one of the transcript's own where none was named. */
export function participantOf(transcript: TranscriptText, speaker: string | null): string {
  const key = speakerKey(speaker);
  return Object.hasOwn(transcript.participants, key)
    ? transcript.participants[key]!
    : `${transcript.id}/${key}`;
}
