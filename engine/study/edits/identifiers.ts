import { identifierKinds } from '../../spans/index.ts';
import { done, refused, type Refusal } from '../refusal.ts';
import type { Identifier, Study } from '../study.ts';
import { spanFault } from './codings.ts';
import { sameJson, withEntry, withoutEntry, type Rules } from './rule.ts';

export const identifierRules: Rules<'identifierSettled'> = {
  identifierSettled: {
    apply(study, { identifier: id, from, to }, restoring) {
      const current = study.identifiers.get(id) ?? null;
      if (!sameJson(current, from)) return refused('changed since', from?.forms[0] ?? id);
      if (to === null) {
        return done({ ...study, identifiers: withoutEntry(study.identifiers, id) });
      }
      const fault = identifierFault(study, id, to, restoring);
      if (fault !== null) return fault;
      return done({ ...study, identifiers: withEntry(study.identifiers, id, to) });
    },
    inverse: ({ identifier, from, to }) => ({
      kind: 'identifierSettled',
      identifier,
      from: to,
      to: from,
    }),
  },
};

function identifierFault(
  study: Study,
  id: string,
  { kind, decision, replacement, places, ...identifier }: Identifier,
  restoring: boolean,
): Refusal | null {
  const replaces = decision === 'stand-in' || decision === 'generalised';
  if (identifier.id !== id || !identifierKinds.includes(kind)) return refused('unusable value', id);
  if (replaces && (replacement ?? '').trim() === '') return refused('empty name', id);
  if (!replaces && replacement !== null) return refused('unusable value', replacement);
  if (replaces && places !== null) return refused('unusable value', id);
  // A span that lost its words, or whose transcript went, was fit to stand once.
  if (restoring) return null;
  for (const { transcript, span } of places ?? []) {
    // A trail has to fold when a person was withdrawn, and the transcript with them.
    if (!study.transcripts.has(transcript)) continue;
    const fault = spanFault(study, transcript, span);
    if (fault !== null) return fault;
  }
  return null;
}
