import type { Fit } from '../../engine/study/index.ts';
import type { Refused } from '../api.ts';
import type { Desk } from '../desk.ts';
import { fit, type FitKind, type FitMade, type FitStudyOptions } from '../fitting.ts';
import { sentenceFor, sentenceForFit } from '../sentences/sentences.ts';
import { wordLists } from '../word-lists.ts';
import { give } from './answers.ts';
import type { CallContext } from './session-types.ts';

/** Fits in a worker and tells how it goes; stopped, it leaves the study as it was. */
export async function fitForWindow(
  desk: Desk,
  kind: FitKind,
  given: Pick<FitStudyOptions, 'themes' | 'answer'>,
  onProgress: CallContext['onProgress'],
  signal: AbortSignal,
): Promise<{ readonly value: Fit } | Refused> {
  const made = await fit(desk, kind, wordLists, {
    signal,
    discardStopped: true,
    ...given,
    onProgress: ({ sweep, bound, change }, fraction) =>
      onProgress({ sweep, bound, change, fraction }),
  });
  if (made.ok) return give(made.value.fit);
  return isFitRefusal(made) ? fitRefused(made) : { code: made.code, refused: sentenceFor(made) };
}

export function fitRefused(refusal: Parameters<typeof sentenceForFit>[0]): Refused {
  return { code: refusal.code, refused: sentenceForFit(refusal) };
}

type NotMade = Exclude<FitMade, { readonly ok: true }>;
type FitRefusal = Extract<NotMade, Parameters<typeof sentenceForFit>[0]>;

const fitCodes = {
  'no words left': true,
  'more themes than passages': true,
  'no themes': true,
  'does not split': true,
  'word without a theme': true,
  'no fit to start from': true,
  'changed while fitting': true,
  stopped: true,
} satisfies Record<FitRefusal['code'], true>;

function isFitRefusal(refusal: NotMade): refusal is FitRefusal {
  return Object.hasOwn(fitCodes, refusal.code);
}
