import type { Fit } from '../engine/study/index.ts';
import {
  countedForm,
  preparationMethod,
  type Prepared,
  type TextSettings,
  type WordLists,
} from '../engine/text/index.ts';
import type { Fitted } from '../engine/themes/index.ts';
import { transcriptsInOrder, type Desk } from './desk.ts';
import { hashOf } from './ids.ts';

/** What a fit's words were counted from: kept with it, so that the same are not counted again. */
export function countingOf(
  desk: Desk,
  text: TextSettings,
  lists: WordLists,
  seeds: readonly string[],
): NonNullable<Fit['counting']> {
  const transcripts = transcriptsInOrder(desk.study).map(({ id, turns, speakers }) => [
    id,
    desk.textHash(id),
    turns,
    speakers,
  ]);
  return { source: hashOf([preparationMethod, transcripts, text, lists]), seeds };
}

/** The words of a fit, where counting under `now` would give them again; undefined where it may not. */
export function countedBefore(
  previous: Fitted | null,
  now: NonNullable<Fit['counting']>,
  text: TextSettings,
): { readonly words: Prepared; readonly hash: string } | undefined {
  const then = previous?.fit.counting;
  if (previous === null || then === undefined || then.source !== now.source) return undefined;
  const same = then.seeds.every((word) => now.seeds.includes(word));
  const further = now.seeds.filter((word) => !then.seeds.includes(word));
  if (!same || !further.every((word) => isCountedAnyway(word, previous.words, text))) {
    return undefined;
  }
  return { words: previous.words, hash: previous.fit.hashes.words };
}

/**
 * Whether seeding a word leaves the counts as they are: lists and limits let it in as it is. Where
 * stems are counted nobody can tell, since a seed also lets in those of its forms that are listed.
 */
function isCountedAnyway(word: string, words: Prepared, text: TextSettings): boolean {
  if (text.stemming) return false;
  const form = countedForm(word, text);
  return form !== null && words.vocabulary.includes(form);
}
