import type { HowManyResult, SteadinessResult } from '../../engine/evidence/index.ts';
import type { Fit } from '../../engine/study/index.ts';
import type {
  EvidenceRequest,
  EvidenceView,
  HowManyView,
  Refused,
  SteadinessView,
} from '../api.ts';
import { gatherHowMany, gatherSteadiness, type EvidenceMade } from '../evidence.ts';
import { recommendationSentence } from '../reports/how-many.ts';
import { isEvidenceRefusal, sentenceForEvidence } from '../sentences/evidence.ts';
import {
  aboveFloorSentence,
  stayedSentence,
  strengthFloorSentence,
} from '../sentences/measured.ts';
import { sentenceFor } from '../sentences/sentences.ts';
import { give, refuse } from './answers.ts';
import type { OpenStudy } from './open-study.ts';
import type { Room } from './room.ts';
import type { CallContext, Handlers } from './session-types.ts';

export function evidenceHandlers(room: Room): Pick<Handlers, 'gatherEvidence' | 'evidenceView'> {
  return {
    gatherEvidence: room.look(async (open, request: EvidenceRequest, context) => {
      if (open.gathering) return refuse('evidence running');
      open.gathering = true;
      try {
        const refused = inWords(open, await gatherFor(open, request, context));
        return refused ?? (await room.afterwards(open));
      } finally {
        open.gathering = false;
      }
    }),

    evidenceView: room.look<null, EvidenceView>((open) => give(evidenceView(open))),
  };
}

function gatherFor(
  open: OpenStudy,
  request: EvidenceRequest,
  { onProgress, signal }: CallContext,
): Promise<EvidenceMade<unknown>> {
  const options = {
    signal: AbortSignal.any([signal, open.closing.signal]),
    onProgress: (fraction: number) => onProgress({ sweep: 0, bound: null, change: 0, fraction }),
  };
  if (request.what === 'steadiness') {
    return gatherSteadiness(open.desk, { ...options, resamples: request.resamples });
  }
  const { from, to } = request;
  const numbers = Array.from({ length: to - from + 1 }, (_, i) => from + i);
  return gatherHowMany(open.desk, { ...options, numbers });
}

function inWords(open: OpenStudy, made: EvidenceMade<unknown>): Refused | null {
  if (made.ok) return null;
  if (isEvidenceRefusal(made)) return { code: made.code, refused: sentenceForEvidence(made) };
  return 'subject' in made ? open.refusal(made) : { code: made.code, refused: sentenceFor(made) };
}

function evidenceView(open: OpenStudy): EvidenceView {
  // The fit as the study has it: what was unpacked knows nothing of what was measured since.
  const fit = open.study.fit === null ? undefined : open.study.fits.get(open.study.fit);
  const { steadiness = null, 'how many': howMany = null } = fit?.evidence ?? {};
  return {
    steadiness:
      fit === undefined || steadiness === null
        ? null
        : steadinessView(open, fit, steadiness as SteadinessResult),
    howMany: howMany === null ? null : howManyView(howMany as HowManyResult),
  };
}

function steadinessView({ now }: OpenStudy, fit: Fit, result: SteadinessResult): SteadinessView {
  const { floor } = result;
  const themes = fit.themes.flatMap((id, row) => {
    const column = now.themes.columnOfRow[row];
    // What was measured of one theme says nothing about what it was merged into.
    if (column < 0 || now.themes.rows[column].length > 1 || now.themeOf(id) !== id) return [];
    const { steadiness, passages, stayed, coherence } = result.themes[row];
    return [
      {
        id,
        label: now.label(id),
        steadiness,
        aboveFloor: steadiness > floor.steadiness,
        passages,
        stayed,
        coherence,
        sentence: stayedSentence(result.themes[row], result),
      },
    ];
  });
  return {
    refits: result.refits,
    refitsAtLeast: result.refitsAtLeast,
    people: result.people,
    leftOut: result.leftOut,
    themes,
    floor: {
      steadiness: floor.steadiness,
      coherence: floor.coherence,
      strength: floor.strength,
      stayed: floor.stayed,
    },
    perplexity: result.perplexity,
    perplexityFloor: floor.perplexity,
    sentences: [
      aboveFloorSentence(themes.filter(({ aboveFloor }) => aboveFloor).length, themes.length),
      strengthFloorSentence(floor.strength, now.settings.suggestions.strength),
    ],
  };
}

function howManyView({ people, groups, points, recommendation }: HowManyResult): HowManyView {
  return {
    people,
    groups,
    points: points.map((point) => ({
      themes: point.themes,
      perplexity: point.perplexity,
      coherence: point.coherence,
      coherenceError: point.coherenceError,
      steadiness: point.steadiness,
      steadinessError: point.steadinessError,
      floor: point.floor,
    })),
    range: rangeOf(recommendation),
    sentence: recommendationSentence(recommendation),
  };
}

function rangeOf(recommendation: HowManyResult['recommendation']): HowManyView['range'] {
  switch (recommendation.kind) {
    case 'range':
      return { from: recommendation.from, to: recommendation.to };
    case 'one':
      return { from: recommendation.themes, to: recommendation.themes };
    case 'none':
      return null;
  }
}
