import { mapSpan, type Replacement, type Span, type Turn } from '../../engine/spans/index.ts';
import {
  spansLost,
  type BlobRef,
  type Edit,
  type EditOf,
  type Speaker,
  type Study,
  type Transcript,
} from '../../engine/study/index.ts';
import type { Draft } from '../desk.ts';

/** A stretch of a transcript and the words that are put in its place. */
export interface Rewording extends Span {
  readonly words: string;
}

/** A text with stretches reworded; they are in order and apart. */
export function reworded(text: string, rewordings: readonly Rewording[]): string {
  let result = '';
  let from = 0;
  for (const { start, end, words } of rewordings) {
    result += text.slice(from, start) + words;
    from = end;
  }
  return result + text.slice(from);
}

/**
 * What rewords a transcript: codings, memos and turns move with the words, and speakers whose labels
 * are reworded are called so from then on. `relabel` gives a label its new wording; two labels that
 * come to read the same are one speaker.
 */
export function rewordingDrafts(
  study: Study,
  transcript: Transcript,
  text: string,
  rewordings: readonly Rewording[],
  relabel: (label: string) => string = (label) => label,
): Draft[] {
  const replacements: Replacement[] = rewordings.map(({ start, end, words }) => ({
    start,
    end,
    inserted: words.length,
  }));
  const turns = transcript.turns.map((turn): Turn => ({
    ...mapSpan(turn, replacements),
    speaker: turn.speaker === null ? null : relabel(turn.speaker),
  }));
  const speakers: Speaker[] = [];
  for (const speaker of transcript.speakers) {
    const label = speaker.label === null ? null : relabel(speaker.label);
    if (!speakers.some((other) => other.label === label)) speakers.push({ ...speaker, label });
  }
  const isRelabelled = JSON.stringify(speakers) !== JSON.stringify(transcript.speakers);
  const both = [
    ...transcript.speakers,
    ...speakers.filter(({ label }) => !transcript.speakers.some((other) => other.label === label)),
  ];
  const assign = (from: readonly Speaker[], to: readonly Speaker[]): Edit => ({
    kind: 'speakersAssigned',
    transcript: transcript.id,
    from,
    to,
  });
  return [
    ...(isRelabelled && both.length > transcript.speakers.length
      ? [{ edit: assign(transcript.speakers, both) }]
      : []),
    revisionDraft(study, transcript, reworded(text, rewordings), turns, replacements),
    ...(isRelabelled ? [{ edit: assign(both, speakers) }] : []),
  ];
}

/** One revision of a transcript's text and turns. */
export function revisionDraft(
  study: Study,
  { id, text: before, length, turns: turnsBefore }: Transcript,
  text: string,
  turns: readonly Turn[],
  replacements: readonly Replacement[],
): Draft {
  const revision = { transcript: id, replacements, placed: [] };
  const lost = spansLost(study, revision);
  const sameText = replacements.length === 0;
  const edit = (ref: BlobRef): EditOf<'textRevised'> => ({
    kind: 'textRevised',
    ...revision,
    from: { text: before, length, turns: turnsBefore },
    to: { text: ref, length: text.length, turns },
    lost,
  });
  return sameText
    ? { edit: edit(before) }
    : { blobs: [Buffer.from(text, 'utf8')], edit: ([ref]) => edit(ref) };
}
