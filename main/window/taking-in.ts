import { basename, isAbsolute, resolve } from 'node:path';
import type { Api, Refused, TakeInView } from '../api.ts';
import { openStudyFile, type StudyFile } from '../project/index.ts';
import { sentenceFor } from '../sentences/sentences.ts';
import { copyChanged, takeInSentences } from '../sentences/taking-in.ts';
import { planTakeIn, takeIn, type Choice } from '../taking-in.ts';
import { give, refuse } from './answers.ts';
import type { OpenStudy } from './open-study.ts';
import type { Room } from './room.ts';
import type { Handlers } from './session-types.ts';

const textShown = 200;

/** Another copy's codings, memos and readers. */
export function takingInHandlers(room: Room): Pick<Handlers, 'takeInView' | 'takeIn'> {
  const { dialogs, about } = room.surroundings;
  const place = (path: string): string =>
    isAbsolute(path) ? path : resolve(about.studiesFolder, path);
  return {
    takeInView: room.look(async (open, { path, password }: Api['takeInView']['takes']) => {
      if (path === null && dialogs === null) return refuse('no dialog');
      const chosen = path ?? (await dialogs?.chooseStudy()) ?? null;
      if (chosen === null) return give(null);
      return withCopy(place(chosen), password, (copy) => viewOf(open, copy));
    }),

    takeIn: room.decide(async (open, { path, password, head, choices }: Api['takeIn']['takes']) => {
      if (open.file.readOnly) return refuse('reading only');
      return withCopy<Refused | null>(place(path), password, (copy) => {
        if (copy.head !== head) return { code: 'changed since', refused: copyChanged };
        const { reader, study } = open;
        if (!study.readers.has(reader.id)) {
          const added = open.desk.make([{ edit: { kind: 'readerAdded', reader } }]);
          if (!added.ok) return open.refusal(added);
        }
        const chosen = new Map<string, Choice>(Object.entries(choices));
        const taken = takeIn(open.desk, open.file, copy, chosen);
        if (taken.ok) return null;
        if (isTakeInRefusal(taken.code)) {
          return { code: taken.code, refused: takeInSentences[taken.code] };
        }
        return open.refusal(taken as Parameters<OpenStudy['refusal']>[0]);
      });
    }),
  };
}

function isTakeInRefusal(code: string): code is keyof typeof takeInSentences {
  return Object.hasOwn(takeInSentences, code);
}

/** Opens the other copy for reading alone, for as long as it takes. */
async function withCopy<Gives>(
  path: string,
  password: string | null,
  act: (copy: StudyFile) => Gives,
): Promise<Gives | Refused> {
  const opened = await openStudyFile(path, {
    readOnly: true,
    ...(password === null ? {} : { password }),
  });
  if (!opened.ok) return { code: opened.code, refused: sentenceFor(opened) };
  try {
    return act(opened.value);
  } finally {
    opened.value.close();
  }
}

function viewOf(open: OpenStudy, copy: StudyFile): { readonly value: TakeInView } | Refused {
  const plan = planTakeIn(open.desk, open.file, copy);
  if (!plan.ok) return { code: plan.code, refused: takeInSentences[plan.code] };
  const { value } = plan;
  return give({
    path: copy.path,
    name: basename(copy.path, '.understory'),
    head: value.head,
    readers: value.readers,
    themes: value.themes,
    codings: value.codings,
    removed: value.removed,
    nones: value.nones,
    memos: value.memos,
    left: value.left,
    conflicts: value.conflicts.map(({ id, what, mine, theirs, transcript, span, both }) => ({
      id,
      on:
        transcript === null
          ? 'A memo'
          : `${what === 'none' ? 'A passage' : 'A coding'} in ${open.study.transcripts.get(transcript)?.name ?? 'a transcript'}`,
      text:
        transcript === null || span === null
          ? ''
          : open.desk
              .text(transcript)
              .slice(span.start, Math.min(span.end, span.start + textShown)),
      mine,
      theirs,
      both,
    })),
  });
}
