import type { TakeInRefused } from '../taking-in.ts';

/** Why another copy was not taken in. */
export const takeInSentences: Record<TakeInRefused['code'], string> = {
  'another study':
    'That file is another study and no copy of this one; choose a copy that was saved from this study.',
  'nothing new':
    'That copy holds nothing that is not here already, so nothing was changed; choose another one.',
  'does not fold':
    'The decisions in that copy do not follow from one another, so nothing was taken in; check that copy first.',
  'choose first':
    'Both copies changed the same decision, so nothing was taken in; choose for each which one stays.',
};

export const copyChanged =
  'That copy changed while you were choosing, so nothing was taken in; look at it again.';
