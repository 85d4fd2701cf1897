import { done, refused } from '../refusal.ts';
import type { Study, TakenIn } from '../study.ts';
import { sameJson, type Rules } from './rule.ts';

/** What leaves the study as a report, and what comes in from another copy of it. */
export const copyRules: Rules<'copyTakenIn' | 'copyLetGo' | 'reportExported'> = {
  copyTakenIn: {
    apply(study, { copy }) {
      if (study.takenIn.some(({ head }) => head === copy.head)) {
        return refused('already there', copy.head);
      }
      return done({
        ...study,
        takenIn: [...study.takenIn, copy],
        absentFits: new Set([...study.absentFits, ...copy.fits]),
      });
    },
    inverse: ({ copy }) => ({ kind: 'copyLetGo', copy }),
  },

  copyLetGo: {
    apply(study, { copy }) {
      const last = study.takenIn.at(-1);
      if (last === undefined || !sameJson(last, copy)) return refused('changed since', copy.head);
      return done({
        ...study,
        takenIn: study.takenIn.slice(0, -1),
        absentFits: without(study, copy),
      });
    },
    inverse: ({ copy }) => ({ kind: 'copyTakenIn', copy }),
  },

  reportExported: {
    apply: (study, { report }) => done({ ...study, exported: [...study.exported, report] }),
    // It left the machine: no undo of ours brings it back.
    inverse: () => null,
  },
};

/** Fits that an earlier copy had brought as well stay known. */
function without(study: Study, { fits }: TakenIn): ReadonlySet<string> {
  const earlier = new Set(study.takenIn.slice(0, -1).flatMap((copy) => copy.fits));
  return new Set([...study.absentFits].filter((id) => !fits.includes(id) || earlier.has(id)));
}
