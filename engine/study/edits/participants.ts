import { done, refused, type Refusal } from '../refusal.ts';
import type { Study } from '../study.ts';
import { sameJson, withEntry, withoutEntry, type Rules } from './rule.ts';

export const participantRules: Rules<
  'participantAdded' | 'participantRemoved' | 'participantDescribed'
> = {
  participantAdded: {
    apply(study, { participant }) {
      if (study.participants.has(participant.id)) return refused('already there', participant.name);
      const fault = nameFault(study, participant.name, participant.id);
      if (fault !== null) return fault;
      return done({
        ...study,
        participants: withEntry(study.participants, participant.id, participant),
      });
    },
    inverse: ({ participant }) => ({ kind: 'participantRemoved', participant }),
  },

  participantRemoved: {
    apply(study, { participant }) {
      const current = study.participants.get(participant.id);
      if (current === undefined) return refused('unknown participant', participant.name);
      if (!sameJson(current, participant)) return refused('changed since', current.name);
      for (const { speakers } of study.transcripts.values()) {
        if (speakers.some((speaker) => speaker.participant === participant.id)) {
          return refused('participant in use', current.name);
        }
      }
      return done({ ...study, participants: withoutEntry(study.participants, participant.id) });
    },
    inverse: ({ participant }) => ({ kind: 'participantAdded', participant }),
  },

  participantDescribed: {
    apply(study, { participant: id, from, to }) {
      const current = study.participants.get(id);
      if (current === undefined) return refused('unknown participant', from.name);
      const { name, attributes } = current;
      if (!sameJson({ name, attributes }, from)) return refused('changed since', current.name);
      const fault = nameFault(study, to.name, id);
      if (fault !== null) return fault;
      return done({
        ...study,
        participants: withEntry(study.participants, id, { id, ...to }),
      });
    },
    inverse: ({ participant, from, to }) => ({
      kind: 'participantDescribed',
      participant,
      from: to,
      to: from,
    }),
  },
};

function nameFault(study: Study, name: string, except: string): Refusal | null {
  if (name.trim() === '') return refused('empty name', except);
  for (const other of study.participants.values()) {
    if (other.id !== except && other.name === name) return refused('name taken', name);
  }
  return null;
}
