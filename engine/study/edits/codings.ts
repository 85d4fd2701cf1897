import { sameSpan, type Span } from '../../spans/index.ts';
import { done, refused, type Refusal } from '../refusal.ts';
import type { CodingKnown } from '../edit.ts';
import type { Coding, CodingId, DecidedUnder, None, Study, ThemeId } from '../study.ts';
import { resolveTheme } from '../themes.ts';
import { label } from './themes.ts';
import { sameJson, withEntry, withInner, withoutEntry, type Rules } from './rule.ts';

export const codingRules: Rules<
  | 'codingMade'
  | 'codingRemoved'
  | 'codingRevised'
  | 'codingLookedAtAgain'
  | 'noneMarked'
  | 'noneCleared'
> = {
  codingMade: {
    apply(study, { coding }, restoring) {
      const fault = restoring ? null : codingFault(study, coding);
      if (fault !== null) return fault;
      const here = study.codings.get(coding.transcript) ?? new Map<string, Coding>();
      if (here.has(coding.id)) return refused('already there', coding.id);
      return done(withCodings(study, coding.transcript, withEntry(here, coding.id, coding)));
    },
    inverse: ({ coding }) => ({ kind: 'codingRemoved', coding }),
  },

  codingRemoved: {
    apply(study, { coding }) {
      const here = study.codings.get(coding.transcript);
      const current = here?.get(coding.id);
      if (here === undefined || current === undefined) return refused('unknown coding', coding.id);
      if (!sameJson(current, coding)) return refused('changed since', coding.id);
      return done(withCodings(study, coding.transcript, withoutEntry(here, coding.id)));
    },
    inverse: ({ coding }) => ({ kind: 'codingMade', coding }),
  },

  codingRevised: {
    apply(study, { transcript, coding: id, from, to }, restoring) {
      const here = study.codings.get(transcript);
      const current = here?.get(id);
      if (here === undefined || current === undefined) return refused('unknown coding', id);
      const { theme, standing, span, memo, under, strength, codebookVersion } = current;
      const known = from.known === undefined ? {} : { known: { under, strength, codebookVersion } };
      if (!sameJson({ theme, standing, span, memo, ...known }, from)) {
        return refused('changed since', id);
      }
      // Without it the coding would keep what was known about another theme.
      if (to.theme !== theme && (from.known === undefined || to.known === undefined)) {
        return refused('unusable value', id);
      }
      if (!restoring) {
        const fault =
          (sameSpan(to.span, span) ? null : spanFault(study, transcript, to.span)) ??
          (to.theme === theme ? null : themeFault(study, to.theme)) ??
          (to.known === undefined ? null : knownFault(study, id, to.known));
        if (fault !== null) return fault;
      }
      const { known: knownThen = {}, ...state } = to;
      const revised = { ...current, ...state, ...knownThen };
      return done(withCodings(study, transcript, withEntry(here, id, revised)));
    },
    inverse: ({ transcript, coding, from, to }) => ({
      kind: 'codingRevised',
      transcript,
      coding,
      from: to,
      to: from,
    }),
  },

  codingLookedAtAgain: {
    apply(study, { transcript, coding: id, from, to }, restoring) {
      const here = study.codings.get(transcript);
      const current = here?.get(id);
      if (here === undefined || current === undefined) return refused('unknown coding', id);
      if (current.codebookVersion !== from) return refused('changed since', id);
      if (!restoring) {
        if (to === from) return refused('same as before', id);
        const theme = resolveTheme(study, current.theme);
        // Only wordings that there were.
        if (theme === undefined || !Number.isInteger(to) || to < 1 || to > theme.version) {
          return refused('unusable value', id);
        }
      }
      const changed = withEntry(here, id, { ...current, codebookVersion: to });
      return done(withCodings(study, transcript, changed));
    },
    inverse: ({ transcript, coding, from, to }) => ({
      kind: 'codingLookedAtAgain',
      transcript,
      coding,
      from: to,
      to: from,
    }),
  },

  noneMarked: {
    apply(study, { none }, restoring) {
      const fault = restoring
        ? null
        : (spanFault(study, none.transcript, none.span) ?? underFault(study, none.under));
      if (fault !== null) return fault;
      const here = study.nones.get(none.transcript) ?? new Map<string, None>();
      if (here.has(none.id)) return refused('already there', none.id);
      return done({
        ...study,
        nones: withInner(study.nones, none.transcript, withEntry(here, none.id, none)),
      });
    },
    inverse: ({ none }) => ({ kind: 'noneCleared', none }),
  },

  noneCleared: {
    apply(study, { none }) {
      const here = study.nones.get(none.transcript);
      const current = here?.get(none.id);
      if (here === undefined || current === undefined) return refused('unknown coding', none.id);
      if (!sameJson(current, none)) return refused('changed since', none.id);
      return done({
        ...study,
        nones: withInner(study.nones, none.transcript, withoutEntry(here, none.id)),
      });
    },
    inverse: ({ none }) => ({ kind: 'noneMarked', none }),
  },
};

function withCodings(
  study: Study,
  transcript: string,
  codings: ReadonlyMap<string, Coding>,
): Study {
  return { ...study, codings: withInner(study.codings, transcript, codings) };
}

/** Refuses a span that is empty, reversed, fractional or past the end of its transcript. */
export function spanFault(study: Study, transcript: string, span: Span): Refusal | null {
  const current = study.transcripts.get(transcript);
  if (current === undefined) return refused('unknown transcript', transcript);
  const { start, end } = span;
  const whole = Number.isInteger(start) && Number.isInteger(end);
  if (!whole || start < 0 || end <= start || end > current.length) {
    return refused('outside the text', current.name);
  }
  return null;
}

function codingFault(study: Study, coding: Coding): Refusal | null {
  return (
    spanFault(study, coding.transcript, coding.span) ??
    themeFault(study, coding.theme) ??
    knownFault(study, coding.id, coding)
  );
}

function knownFault(
  study: Study,
  coding: CodingId,
  { strength, under }: CodingKnown,
): Refusal | null {
  if (strength !== null && !(strength >= 0 && strength <= 1)) {
    return refused('unusable value', coding);
  }
  return underFault(study, under);
}

function underFault(study: Study, { reader, fit }: DecidedUnder): Refusal | null {
  if (!study.readers.has(reader)) return refused('unknown reader', reader);
  if (fit !== null && !study.fits.has(fit) && !study.absentFits.has(fit)) {
    return refused('unknown fit', fit);
  }
  return null;
}

function themeFault(study: Study, id: ThemeId): Refusal | null {
  const theme = study.themes.get(id);
  if (theme === undefined) return refused('unknown theme', id);
  if (theme.mergedInto !== null) return refused('merged theme', label(theme));
  return null;
}
