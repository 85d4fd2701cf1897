import type { Study } from '../../engine/study/index.ts';
import type { Api, AttributesOutcome, Counted, GatherOutcome, Refused } from '../api.ts';
import type { Draft } from '../desk.ts';
import { decode } from '../formats/index.ts';
import { guessPlan } from '../gather/answers.ts';
import {
  attributeEdits,
  attributeTableIn,
  readAttributeTable,
  type AttributeTable,
} from '../gather/attributes.ts';
import { findFiles } from '../gather/find-files.ts';
import {
  answerDrafts,
  gather,
  gatherLoaded,
  replacingDrafts,
  type FoundTable,
  type Gathered,
} from '../gather/gather.ts';
import type { HandedFile, SourceFile } from '../gather/source-file.ts';
import { sentenceForSkipped, type FileRefusal } from '../sentences/sentences.ts';
import { give, isRefused, refuse } from './answers.ts';
import { countedWords, gatherView } from './gather-view.ts';
import type { OpenStudy } from './open-study.ts';
import { people } from './people.ts';
import type { Room } from './room.ts';
import type { Handlers } from './session-types.ts';
import { waitingFiles } from './waiting-files.ts';
import { transcriptView } from './transcript-view.ts';

export function gatheringHandlers(
  room: Room,
): Pick<
  Handlers,
  | 'chooseTranscripts'
  | 'addTranscripts'
  | 'addTable'
  | 'leaveTable'
  | 'settleDoubles'
  | 'addAttributes'
  | 'gatherView'
  | 'counted'
  | 'transcriptView'
  | 'renameTranscript'
  | 'removeTranscript'
  | 'assignSpeaker'
  | 'describeParticipant'
  | 'changeSettings'
> {
  const { dialogs } = room.surroundings;
  return {
    chooseTranscripts: room.look<null, GatherOutcome | null>(async (open, _, context) => {
      const paths = dialogs === null ? null : await room.away(dialogs.chooseTranscripts());
      if (paths === null || paths.length === 0) return give(null);
      const { found, missed } = await findFiles(paths, '/');
      const outcome = await add(room, open, found, (fraction) => {
        context.onProgress({ sweep: 0, bound: null, change: 0, fraction });
      });
      if (isRefused(outcome)) return outcome;
      const skipped = missed.map(({ name, code }) => ({
        file: name,
        sentence: sentenceForSkipped({ code }),
      }));
      return give({ ...outcome.value, skipped: [...skipped, ...outcome.value.skipped] });
    }),

    addTranscripts: room.look(async (open, { files }: { files: readonly HandedFile[] }) =>
      files.length === 0 ? refuse('no files') : add(room, open, files),
    ),

    addTable: room.look(
      async (open, { table: token, sheet, text, participant, attributes }: AddTable) => {
        const found = waitingFiles(open).tables.get(token);
        if (found === undefined) return refuse('no such table');
        const made = answerDrafts(open.desk, found, { sheet, text, participant, attributes });
        if (made === null) return refuse('no answers', found.file);
        const refused = open.decide(made.drafts);
        if (refused !== null) return refused;
        waitingFiles(open).tables.delete(token);
        const after = await room.afterwards(open);
        if (isRefused(after)) return after;
        return give({ ...nothingGathered, gathered: [made.name] });
      },
    ),

    leaveTable: room.look<Api['leaveTable']['takes'], null>((open, { table }) => {
      waitingFiles(open).tables.delete(table);
      return give(null);
    }),

    settleDoubles: room.look((open, { choices }: Api['settleDoubles']['takes']) =>
      room.inTurn(async () =>
        room.open === open ? settle(room, open, choices) : refuse('no study'),
      ),
    ),

    addAttributes: room.look(async (open, { name, bytes }: HandedFile) => {
      const decoded = decode(bytes);
      if (!decoded.ok) return { code: decoded.code, refused: sentenceForSkipped(decoded) };
      const table = readAttributeTable(decoded.text);
      if (table === null) return refuse('no attribute table', name);
      const described = describe(open.study, table);
      const refused = open.decide(described.drafts);
      if (refused !== null) return refused;
      const after = await room.afterwards(open);
      return isRefused(after) ? after : give(described.outcome);
    }),

    gatherView: room.look<null, Awaited<ReturnType<typeof gatherView>>>(async (open) =>
      give(await gatherView(open)),
    ),

    counted: room.look<null, Counted | null>(async (open) => give(await countedWords(open))),

    transcriptView: room.look((open, { transcript }: { transcript: string }) =>
      transcriptView(open, transcript),
    ),

    ...people(room),
  };
}

/**
 * Gathers files under one group. A table of attributes among them is not skipped but read, once the
 * transcripts are there.
 */
function add(
  room: Room,
  open: OpenStudy,
  files: readonly SourceFile[],
  onProgress?: (fraction: number) => void,
): Promise<{ readonly value: GatherOutcome } | Refused> {
  // One after the other, or the same file could come in twice; and a study is not closed in between.
  return room.inTurn(async () =>
    room.open === open ? addFiles(room, open, files, onProgress) : refuse('no study'),
  );
}

async function addFiles(
  room: Room,
  open: OpenStudy,
  files: readonly SourceFile[],
  onProgress?: (fraction: number) => void,
): Promise<{ readonly value: GatherOutcome } | Refused> {
  const { desk } = open;
  const group = desk.context.mintId('group');
  const gathered = await gather(desk, files, {
    interviewers: askingIn(open.study),
    group,
    askAboutDoubles: true,
    onProgress: (done) => onProgress?.(done / files.length),
  });
  if (!gathered.ok) return open.refusal(gathered);

  const outcomes: AttributesOutcome[] = [];
  const answers: FoundTable[] = [];
  for (const found of gathered.value.tables) {
    const table = attributesIn(found);
    if (table === null) {
      answers.push(found);
      continue;
    }
    const described = describe(open.study, table);
    const made = desk.make(described.drafts, { group });
    if (!made.ok) return open.refusal(made);
    outcomes.push(described.outcome);
  }
  return outcomeOf(room, open, { ...gathered.value, tables: answers }, outcomes);
}

async function outcomeOf(
  room: Room,
  open: OpenStudy,
  { transcripts, skipped, tables, doubles }: Gathered,
  attributes: readonly AttributesOutcome[],
): Promise<{ readonly value: GatherOutcome } | Refused> {
  const after = await room.afterwards(open);
  if (isRefused(after)) return after;
  const waiting = waitingFiles(open);
  return give({
    gathered: transcripts,
    skipped: skipped.map(({ file, refusal }) => ({
      file,
      sentence: sentenceForSkipped(refusal as FileRefusal),
    })),
    tables: tables.map((found) => waiting.table(found)),
    doubles: doubles.map((found) => waiting.double(open, found)),
    attributes:
      attributes.length === 0
        ? null
        : {
            described: attributes.reduce((sum, { described }) => sum + described, 0),
            unmatched: attributes.flatMap(({ unmatched }) => unmatched),
          },
  });
}

type AddTable = Api['addTable']['takes'];

const nothingGathered: GatherOutcome = {
  gathered: [],
  skipped: [],
  attributes: null,
  tables: [],
  doubles: [],
};

/** Does with files of known names what a person chose: leaves them, takes their words, or both. */
async function settle(
  room: Room,
  open: OpenStudy,
  choices: Api['settleDoubles']['takes']['choices'],
): Promise<{ readonly value: GatherOutcome } | Refused> {
  const { desk } = open;
  const waiting = waitingFiles(open);
  const group = desk.context.mintId('group');
  const gathered: string[] = [];
  const skipped: { file: string; sentence: string }[] = [];
  for (const { double: token, choice } of choices) {
    const double = waiting.doubles.get(token);
    waiting.doubles.delete(token);
    if (double === undefined || choice === 'skip') continue;
    const asking = askingIn(open.study);
    if (choice === 'keep both') {
      const made = gatherLoaded(desk, [double], asking, group);
      if (!made.ok) return open.refusal(made);
      gathered.push(...made.value);
      continue;
    }
    const transcript = open.study.transcripts.get(double.transcript);
    if (transcript === undefined) continue;
    const replacing = replacingDrafts(desk, double, asking);
    if ('orphaned' in replacing) {
      const { refused: sentence } = refuse('words of codings gone', transcript.name);
      skipped.push({ file: double.file.name, sentence });
      continue;
    }
    const made = desk.make(replacing.drafts, { group });
    if (!made.ok) return open.refusal(made);
    gathered.push(transcript.name);
  }
  const after = await room.afterwards(open);
  return isRefused(after) ? after : give({ ...nothingGathered, gathered, skipped });
}

/** The attributes in a table; null where it is one of answers. */
function attributesIn({ table: { sheets } }: FoundTable): AttributeTable | null {
  const [sheet] = sheets;
  return guessPlan(sheet) === null ? attributeTableIn(sheet.rows) : null;
}

function describe(
  study: Study,
  table: AttributeTable,
): { readonly drafts: Draft[]; readonly outcome: AttributesOutcome } {
  const { edits, unmatched } = attributeEdits(study, table);
  const changing = edits.filter(
    (edit) =>
      edit.kind !== 'participantDescribed' || JSON.stringify(edit.from) !== JSON.stringify(edit.to),
  );
  return {
    drafts: changing.map((edit) => ({ edit })),
    outcome: { described: edits.length, unmatched },
  };
}

/** Labels that stand for interviewers wherever they stand in the study so far. */
function askingIn({ transcripts }: Study): string[] {
  const roles = new Map<string, Set<string>>();
  for (const { speakers } of transcripts.values()) {
    for (const { label, role } of speakers) {
      if (label !== null) roles.set(label, (roles.get(label) ?? new Set()).add(role));
    }
  }
  return [...roles].flatMap(([label, own]) =>
    own.size === 1 && own.has('interviewer') ? [label] : [],
  );
}
