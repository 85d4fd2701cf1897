import { defaultSettings } from '../../engine/themes/index.ts';
import { sentenceForFit } from '../sentences/sentences.ts';
import { fitForWindow } from './fit-for-window.ts';
import { isRefused } from './answers.ts';
import type { OpenStudy, Refinement } from './open-study.ts';
import type { Room } from './room.ts';

/**
 * Characters of transcripts times themes from which a full answer takes more than a second or two.
 * Below, a quick answer would be on screen for a moment only, and stay in the trail for ever.
 */
const worthwhile = 5_000_000;

/** Whether a fit from scratch shows a quick answer first. */
export function quickFirst({ study }: OpenStudy, themes: number, from = worthwhile): boolean {
  const { answer } = { ...defaultSettings, ...study.settings };
  let characters = 0;
  for (const { length } of study.transcripts.values()) characters += length;
  return answer === 'full' && characters * themes >= from;
}

/** Makes the full answer behind the quick one on screen; whoever listens is told how it goes. */
export function refine(room: Room, open: OpenStudy): void {
  const { fit } = open.study;
  if (fit === null) return;
  const stop = new AbortController();
  const refinement: Refinement = { fit, fraction: 0, stop };
  open.refinement = refinement;
  const tell = (fraction: number | null, said: string | null): void => {
    if (room.open === open && open.refinement === refinement) {
      room.tell('refining', { fraction, said });
    }
  };
  const signal = AbortSignal.any([stop.signal, open.closing.signal]);
  const onProgress = ({ fraction }: { readonly fraction: number }): void => {
    // Hundreds of sweeps a second would bury whoever listens.
    if (fraction < refinement.fraction + 0.01) return;
    refinement.fraction = fraction;
    tell(fraction, null);
  };
  void (async () => {
    let said: string | null = null;
    try {
      const made = await fitForWindow(
        open.desk,
        'refinement',
        { answer: 'full' },
        onProgress,
        signal,
      );
      if (isRefused(made) && made.code !== 'stopped') {
        said =
          made.code === 'changed while fitting'
            ? sentenceForFit({ code: 'changed while refining' })
            : made.refused;
      }
    } catch {
      said = sentenceForFit({ code: 'refinement failed' });
    }
    if (room.open !== open || open.refinement !== refinement) return;
    tell(null, said);
    open.refinement = null;
    try {
      await room.afterwards(open, true);
    } catch {
      // The drive is gone; the next call says so.
    }
  })();
}
