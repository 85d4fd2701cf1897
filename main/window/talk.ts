import type { Transcript } from '../../engine/study/index.ts';
import { speakerKey } from '../../engine/text/index.ts';
import { KeptEach } from './kept.ts';
import { pause, scannerFor } from './passages-now.ts';
import type { StudyNow } from './study-now.ts';

/** How much a label says in a transcript. */
export interface Talk {
  readonly turns: number;
  readonly words: number;
}

const kept = new WeakMap<StudyNow, KeptEach<string, ReadonlyMap<string, Talk>>>();

/**
 * How much everybody says in every transcript, interviewers as well, by `speakerKey`. Counted a
 * transcript at a time, so that the window stays alive, and kept.
 */
export async function talkOf(
  now: StudyNow,
): Promise<ReadonlyMap<string, ReadonlyMap<string, Talk>>> {
  const each = kept.get(now) ?? new KeptEach();
  kept.set(now, each);
  const all = new Map<string, ReadonlyMap<string, Talk>>();
  const { language } = now.settings.text;
  for (const transcript of now.transcripts) {
    const on = [transcript.text.sequence, transcript.turns, language];
    const isNew = !each.has(transcript.id, on);
    const talk = each.get(transcript.id, on, () => talkIn(now, transcript));
    all.set(transcript.id, talk);
    if (isNew) await pause();
  }
  return all;
}

function talkIn(now: StudyNow, { id, turns }: Transcript): ReadonlyMap<string, Talk> {
  const scan = scannerFor(now.settings.text.language);
  const text = now.desk.text(id);
  const talk = new Map<string, { turns: number; words: number }>();
  for (const turn of turns) {
    const key = speakerKey(turn.speaker);
    const own = talk.get(key) ?? { turns: 0, words: 0 };
    talk.set(key, own);
    own.turns++;
    scan(text, turn, () => own.words++);
  }
  return talk;
}
