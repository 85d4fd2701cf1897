import type { FitDone } from '../../engine/themes/index.ts';
import type { Desk } from '../desk.ts';
import { fit, type FitKind } from '../fitting.ts';
import { sentenceFor, sentenceForFit } from '../sentences/sentences.ts';
import { wordLists } from '../word-lists.ts';
import { ProgressLine, Stop, stopIfAsked, type Terminal } from './terminal.ts';

/** Fits with a line of progress; stops the command where it is refused. */
export async function fitWithProgress(
  desk: Desk,
  kind: FitKind,
  terminal: Terminal,
): Promise<FitDone> {
  const line = new ProgressLine(terminal);
  const made = await fit(desk, kind, wordLists, {
    signal: terminal.signal,
    onProgress: ({ bound }, fraction) => {
      const evaluated = bound === null ? '' : `, bound evaluated at this sweep ${bound.toFixed(1)}`;
      line.show(`Fitting: ${Math.floor(fraction * 100)} %${evaluated}`, fraction);
    },
  });
  line.end();
  stopIfAsked(terminal);
  if (!made.ok) throw new Stop(isFitRefusal(made) ? sentenceForFit(made) : sentenceFor(made));
  return made.value.done;
}

type Refused = Exclude<Awaited<ReturnType<typeof fit>>, { readonly ok: true }>;
type FitRefusal = Extract<Refused, Parameters<typeof sentenceForFit>[0]>;

/** A record, so that no code of them can be forgotten. */
const fitCodes: Record<FitRefusal['code'], true> = {
  'no words left': true,
  'more themes than passages': true,
  'no themes': true,
  'does not split': true,
  'word without a theme': true,
  'no fit to start from': true,
  'changed while fitting': true,
  stopped: true,
};

function isFitRefusal(refusal: Refused): refusal is FitRefusal {
  return Object.hasOwn(fitCodes, refusal.code);
}
