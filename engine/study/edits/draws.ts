import { coldSampleOf } from '../draws.ts';
import { done, refused, type Refusal } from '../refusal.ts';
import type { Draw, Study } from '../study.ts';
import { spanFault } from './codings.ts';
import { sameJson, withEntry, withoutEntry, type Rules } from './rule.ts';

export const drawRules: Rules<'drawMade' | 'drawRemoved' | 'drawScored'> = {
  drawMade: {
    apply(study, { draw }, restoring) {
      if (study.draws.has(draw.id)) return refused('already there', draw.name);
      const fault = restoring ? null : drawFault(study, draw);
      if (fault !== null) return fault;
      return done({ ...study, draws: withEntry(study.draws, draw.id, draw) });
    },
    inverse: ({ draw }) => ({ kind: 'drawRemoved', draw }),
  },

  drawRemoved: {
    apply(study, { draw }) {
      const current = study.draws.get(draw.id);
      if (current === undefined) return refused('unknown draw', draw.name);
      if (!sameJson(current, draw)) return refused('changed since', current.name);
      return done({ ...study, draws: withoutEntry(study.draws, draw.id) });
    },
    inverse: ({ draw }) => ({ kind: 'drawMade', draw }),
  },

  drawScored: {
    apply(study, { draw: id, from, to }, restoring) {
      const draw = study.draws.get(id);
      if (draw?.kind !== 'cold sample') return refused('unknown draw', id);
      if (!sameJson(draw.scored, from)) return refused('changed since', draw.name);
      if (to !== null && !restoring) {
        if (!study.fits.has(to.fit) && !study.absentFits.has(to.fit)) {
          return refused('unknown fit', to.fit);
        }
        if (!study.readers.has(to.reader)) return refused('unknown reader', to.reader);
      }
      return done({ ...study, draws: withEntry(study.draws, id, { ...draw, scored: to }) });
    },
    inverse: ({ draw, from, to }) => ({ kind: 'drawScored', draw, from: to, to: from }),
  },
};

function drawFault(study: Study, draw: Draw): Refusal | null {
  if (draw.name.trim() === '') return refused('empty name', draw.id);
  for (const { name } of study.draws.values()) {
    if (name === draw.name) return refused('already there', name);
  }
  if (!study.readers.has(draw.reader)) return refused('unknown reader', draw.reader);
  if (draw.scored !== null) return refused('unusable value', draw.name);
  if (draw.kind === 'cold sample') {
    const other = coldSampleOf(study);
    if (other !== null) return refused('already there', other.name);
    // Whoever knows a fit does not read cold.
    if (study.fits.size > 0) return refused('fitted already', draw.name);
  }
  for (const { transcript, span } of draw.places) {
    // A trail has to fold when a person was withdrawn, and the transcript with them.
    if (!study.transcripts.has(transcript)) continue;
    const fault = spanFault(study, transcript, span);
    if (fault !== null) return fault;
  }
  return null;
}
