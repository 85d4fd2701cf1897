import type { NamedFile, TrailRequest, TrailView, VerifyView } from '../api.ts';
import { editKinds } from '../../engine/study/index.ts';
import {
  filterTrail,
  trailCsv,
  trailLines,
  trailMarkdown,
  type TrailLine,
} from '../reports/trail.ts';
import {
  fitCheckInWords,
  headInWords,
  limitOfTheChain,
  outcomeInWords,
  trailFaultInWords,
} from '../sentences/verify.ts';
import { kindInWords } from '../sentences/edit-kinds.ts';
import { leastHeadDigits, verify } from '../verify.ts';
import { give, refuse } from './answers.ts';
import { safeFileName } from './file-names.ts';
import { namesIn } from './history.ts';
import { Kept } from './kept.ts';
import type { OpenStudy } from './open-study.ts';
import type { Room } from './room.ts';
import type { Handlers } from './session-types.ts';

/** The study held against itself, and its trail as people read it. */
export function provingHandlers(
  room: Room,
): Pick<Handlers, 'verifyStudy' | 'trailView' | 'trailFile'> {
  return {
    verifyStudy: room.look(async (open, { head }: { head: string | null }, context) => {
      const noted = head?.trim() ?? '';
      const usable = noted === '' || /^[0-9a-f]{12,64}$/iu.test(noted);
      if (!usable) return refuse('no chain hash', String(leastHeadDigits));
      if (open.fitting) return refuse('fit running');
      const signal = AbortSignal.any([context.signal, open.closing.signal]);
      const found = await verify(open.file, {
        signal,
        ...(noted === '' ? {} : { head: noted }),
        onProgress: (done, of, fraction) =>
          context.onProgress({
            sweep: done,
            bound: null,
            change: 0,
            fraction: of === 0 ? 1 : (done + fraction) / of,
          }),
      });
      const view: VerifyView = {
        outcome: found.outcome,
        sentence: outcomeInWords(found),
        faults: found.faults.map(trailFaultInWords),
        fits: found.fits.map(fitCheckInWords),
        noted: found.noted === null ? limitOfTheChain : headInWords(found.noted),
        head: found.head,
      };
      return give(view);
    }),

    trailView: room.look((open, request: TrailRequest) => give(trailView(open, request))),

    trailFile: room.look(
      (open, { format, ...request }: TrailRequest & { format: 'csv' | 'markdown' }) => {
        const lines = wanted(open, request);
        const { head } = open.file;
        const content =
          format === 'csv'
            ? trailCsv(lines, head, { guard: true })
            : trailMarkdown(open.study, lines, head);
        const file: NamedFile = {
          fileName: `${safeFileName(open.study.name)} trail.${format === 'csv' ? 'csv' : 'md'}`,
          bytes: new TextEncoder().encode(content),
        };
        return give(file);
      },
    ),
  };
}

const kept = new WeakMap<OpenStudy, Kept<readonly TrailLine[]>>();

function allLines(open: OpenStudy): readonly TrailLine[] {
  const own = kept.get(open) ?? new Kept<readonly TrailLine[]>();
  kept.set(open, own);
  return own.get([open.study], () => trailLines(open.desk, namesIn(open)));
}

function wanted(open: OpenStudy, { by, kind, since, theme }: TrailRequest): readonly TrailLine[] {
  return filterTrail(allLines(open), {
    ...(by === null ? {} : { by }),
    ...(kind === null ? {} : { kind }),
    ...(since === null ? {} : { since }),
    ...(theme === null ? {} : { theme }),
  });
}

function trailView(open: OpenStudy, request: TrailRequest): TrailView {
  const all = allLines(open);
  const there = new Set(all.map(({ kind }) => kind));
  return {
    head: open.file.head,
    of: all.length,
    readers: [...new Set(all.map(({ by }) => by))],
    kinds: editKinds
      .filter((kind) => there.has(kind))
      .map((kind) => ({ kind, label: kindInWords(kind) })),
    lines: [...wanted(open, request)].reverse().map((line) => ({
      record: line.record,
      at: line.at,
      by: line.by,
      heading: line.heading,
      what: line.what,
      on: line.on,
      undoes: line.undoes,
      takenBack: line.takenBack,
    })),
  };
}
