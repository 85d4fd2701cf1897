import type { ReadingEvidence, Strata } from '../api.ts';
import { closesTrail } from '../../engine/study/index.ts';
import { give, refuse } from './answers.ts';
import { codebookHandlers } from './codebook-import.ts';
import { evidenceHandlers } from './evidence.ts';
import { fieldNoteHandlers } from './field-notes.ts';
import { find } from './find.ts';
import { fitHandlers } from './fits.ts';
import { forgettingHandlers } from './forgetting.ts';
import { gatheringHandlers } from './gathering.ts';
import { headingHandlers } from './headings.ts';
import { redoInWords, undoInWords } from './history.ts';
import { identifierHandlers } from './identifiers.ts';
import { mergePreview } from './merge-preview.ts';
import { keepingHandlers } from './keeping.ts';
import { recoveringHandlers } from './recovering.ts';
import { movedFloor } from './moved-floor.ts';
import { closeStudy, openingHandlers, openStudy } from './opening.ts';
import { lockingHandlers, lockStudy, watchIdle } from './locking.ts';
import type { OpenStudy } from './open-study.ts';
import { provingHandlers } from './proving.ts';
import { readingHandlers } from './reading.ts';
import { readingEvidence } from './reading-evidence.ts';
import { readingKeptHandlers } from './reading-kept.ts';
import { reportHandlers } from './report.ts';
import { Room } from './room.ts';
import type { Handlers, Session, Surroundings } from './session-types.ts';
import { search } from './search.ts';
import { seedCheck } from './seed-check.ts';
import { shapeView } from './shape-view.ts';
import { strataFigure } from './strata-figure.ts';
import { splitHandlers } from './split.ts';
import { strata } from './strata.ts';
import { takingInHandlers } from './taking-in.ts';
import { themeDecisions } from './theme-decisions.ts';
import { themePassages } from './theme-passages.ts';
import { themeSpread } from './theme-spread.ts';
import { themeFromPassages } from './theme-from-passages.ts';
import { themeView } from './theme-view.ts';
import { wordView } from './word-view.ts';

/** One window at work on one study at a time: answers every method of the api. */
export function createSession(surroundings: Surroundings): Session {
  const room = new Room(surroundings);
  const endWatch = watchIdle(room);
  const handlers: Handlers = {
    ...openingHandlers(room),
    ...keepingHandlers(room),
    ...recoveringHandlers(room),
    ...lockingHandlers(room),
    ...gatheringHandlers(room),
    ...fieldNoteHandlers(room),
    ...codebookHandlers(room),
    ...identifierHandlers(room),
    ...fitHandlers(room),
    ...evidenceHandlers(room),
    ...splitHandlers(room),
    ...themeFromPassages(room),
    ...themeDecisions(room),
    ...headingHandlers(room),
    ...readingHandlers(room),
    ...readingKeptHandlers(room),
    ...reportHandlers(room),
    ...provingHandlers(room),
    ...forgettingHandlers(room),
    ...takingInHandlers(room),
    undo: room.look((open) => takeBack(room, open, 'undo')),
    redo: room.look((open) => takeBack(room, open, 'redo')),
    shapeView: room.look<null, ReturnType<typeof shapeView>>((open) => give(shapeView(open))),
    strata: room.look<null, Strata>((open) => give(strata(open))),
    strataFigure: room.look(strataFigure),
    themeView: room.look(themeView),
    themePassages: room.look(themePassages),
    themeSpread: room.look(themeSpread),
    movedFloor: room.look(movedFloor),
    mergePreview: room.look(mergePreview),
    seedCheck: room.look(seedCheck),
    wordView: room.look(wordView),
    readingEvidence: room.look<null, ReadingEvidence>((open) => give(readingEvidence(open))),
    search: room.look(search),
    find: room.look(async (open, { text }: { text: string }) => give(await find(open, text))),
  };
  return {
    handlers,
    on: (event, listener) => room.on(event, listener),
    openPath: (path) => room.inTurn(() => openStudy(room, path, false)),
    lock: () =>
      room.inTurn(async () => {
        if (room.lock.idleMinutes() > 0) lockStudy(room, 'idle');
      }),
    close: () =>
      room.inTurn(async () => {
        endWatch();
        closeStudy(room);
      }),
  };
}

async function takeBack(room: Room, open: OpenStudy, which: 'undo' | 'redo') {
  const did = which === 'undo' ? undoInWords(open) : redoInWords(open);
  if (did === null && which === 'undo' && isClosed(open)) return refuse('erased for good');
  const made = did === null ? null : open.desk[which]();
  if (made !== null && !made.ok) return open.refusal(made);
  const after = await room.afterwards(open);
  return 'refused' in after
    ? after
    : give({ did: made === null ? null : did, overview: after.value });
}

/** Whether what could be undone ends at an act of erasing. */
function isClosed({ study, desk }: OpenStudy): boolean {
  if (study.undo !== null) return false;
  for (const { edit } of desk.entries) if (closesTrail(edit.kind)) return true;
  return false;
}
