import type { Turn } from '../../spans/index.ts';
import { done, refused } from '../refusal.ts';
import type { GuideQuestion, QuestionId, Study } from '../study.ts';
import { sameJson, withEntry, type Rules } from './rule.ts';

export const guideRules: Rules<'guideRevised' | 'turnsTagged'> = {
  guideRevised: {
    apply(study, { from, to }) {
      if (!sameJson(study.guide, from)) return refused('changed since', study.name);
      const seen = new Set<QuestionId>();
      for (const { id, text } of to) {
        if (text.trim() === '') return refused('empty name', id);
        if (seen.has(id)) return refused('already there', text);
        seen.add(id);
      }
      const asked = questionsAsked(study);
      const gone = from.find(({ id }) => !seen.has(id) && asked.has(id));
      if (gone !== undefined) return refused('question in use', gone.text);
      return done({ ...study, guide: to });
    },
    inverse: ({ from, to }) => ({ kind: 'guideRevised', from: to, to: from }),
  },

  turnsTagged: {
    apply(study, { transcript, changes }) {
      const current = study.transcripts.get(transcript);
      if (current === undefined) return refused('unknown transcript', transcript);
      const known = new Set(study.guide.map(({ id }) => id));
      const turns = [...current.turns];
      for (const { turn: index, from, to } of changes) {
        const turn = turns[index];
        if (turn === undefined) return refused('outside the text', current.name);
        if ((turn.question ?? null) !== from) return refused('changed since', current.name);
        if (to !== null && !known.has(to)) return refused('unknown question', to);
        turns[index] = to === null ? untagged(turn) : { ...turn, question: to };
      }
      return done({
        ...study,
        transcripts: withEntry(study.transcripts, transcript, { ...current, turns }),
      });
    },
    inverse: ({ transcript, changes }) => ({
      kind: 'turnsTagged',
      transcript,
      changes: [...changes].reverse().map(({ turn, from, to }) => ({ turn, from: to, to: from })),
    }),
  },
};

function untagged({ question: _question, ...turn }: Turn): Turn {
  return turn;
}

/** Questions of the guide that turns ask. */
function questionsAsked({ transcripts }: Study): ReadonlySet<GuideQuestion['id']> {
  return new Set(
    [...transcripts.values()].flatMap(({ turns }) =>
      turns.flatMap(({ question }) => question ?? []),
    ),
  );
}
