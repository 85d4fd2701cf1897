import { resolve } from 'node:path';
import type { RecoveryView } from '../api.ts';
import { recoverStudy } from '../recovered.ts';
import { leftOutInWords, missingInWords } from '../sentences/recovery.ts';
import { sentenceFor } from '../sentences/sentences.ts';
import { give, isRefused } from './answers.ts';
import { free } from './keeping.ts';
import { openStudy } from './opening.ts';
import type { Room } from './room.ts';
import type { Handlers } from './session-types.ts';

/** How many lines a window is told of each kind; the rest is counted. */
const mostLines = 200;

export function recoveringHandlers(room: Room): Pick<Handlers, 'recoverStudy'> {
  const { about, now } = room.surroundings;
  return {
    recoverStudy: ({ path, to, password }) =>
      room.inTurn(async () => {
        const from = resolve(about.studiesFolder, path);
        const place = to === null ? free(from, 'recovered') : resolve(about.studiesFolder, to);
        const done = await recoverStudy(from, place, { password, by: 'recovery', now });
        if (!done.ok) return { code: done.code, refused: sentenceFor(done), path: from };
        const { kept, missing, leftOut, study } = done.value;
        const names = {
          theme: (id: string) => study.themes.get(id)?.name ?? 'a theme',
          transcript: (id: string) => study.transcripts.get(id)?.name ?? 'a transcript',
          participant: (id: string) => study.participants.get(id)?.name ?? 'a participant',
        };
        const opened = await openStudy(room, place, false, { password });
        if (isRefused(opened)) return opened;
        const view: RecoveryView = {
          overview: opened.value,
          path: place,
          kept,
          missing: counted(missing.map(missingInWords)),
          leftOut: counted(leftOut.map(({ edit, at }) => leftOutInWords(edit, at, names))),
        };
        return give(view);
      }),
  };
}

function counted(lines: readonly string[]): readonly string[] {
  if (lines.length <= mostLines) return lines;
  return [...lines.slice(0, mostLines), `and ${lines.length - mostLines} more`];
}
