import { readFile } from 'node:fs/promises';
import type { Study } from '../../engine/study/index.ts';
import type { AttributesOutcome, Counted, GatherOutcome, Refused } from '../api.ts';
import type { Draft } from '../desk.ts';
import { decode } from '../formats/index.ts';
import { attributeEdits, readAttributeTable } from '../gather/attributes.ts';
import { findFiles } from '../gather/find-files.ts';
import { gather, type HandedFile, type SourceFile } from '../gather/gather.ts';
import { sentenceForSkipped, type FileRefusal } from '../sentences/sentences.ts';
import { give, isRefused, refuse } from './answers.ts';
import { countedWords, gatherView } from './gather-view.ts';
import type { OpenStudy } from './open-study.ts';
import { people } from './people.ts';
import type { Room } from './room.ts';
import type { Handlers } from './session-types.ts';
import { transcriptView } from './transcript-view.ts';

export function gatheringHandlers(
  room: Room,
): Pick<
  Handlers,
  | 'chooseTranscripts'
  | 'addTranscripts'
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
    chooseTranscripts: room.look<null, GatherOutcome | null>(async (open) => {
      const paths = dialogs === null ? null : await dialogs.chooseTranscripts();
      if (paths === null || paths.length === 0) return give(null);
      const { found, missed } = await findFiles(paths, '/');
      const outcome = await add(room, open, found);
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

    addAttributes: room.look(async (open, { name, bytes }: HandedFile) => {
      const decoded = decode(bytes);
      if (!decoded.ok) return { code: decoded.code, refused: sentenceForSkipped(decoded) };
      const described = describe(open.study, decoded.text);
      if (described === null) return refuse('no attribute table', name);
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
): Promise<{ readonly value: GatherOutcome } | Refused> {
  // One after the other, or the same file could come in twice; and a study is not closed in between.
  return room.inTurn(async () =>
    room.open === open ? addFiles(room, open, files) : refuse('no study'),
  );
}

async function addFiles(
  room: Room,
  open: OpenStudy,
  files: readonly SourceFile[],
): Promise<{ readonly value: GatherOutcome } | Refused> {
  const { desk } = open;
  const tables = new Map<SourceFile, string>();
  for (const file of files) {
    const text = await tableIn(file);
    if (text !== null) tables.set(file, text);
  }
  const transcripts = files.filter((file) => !tables.has(file));
  const group = desk.context.mintId('group');
  const gathered = await gather(desk, transcripts, askingIn(open.study), undefined, group);
  if (!gathered.ok) return open.refusal(gathered);

  const outcomes: AttributesOutcome[] = [];
  for (const text of tables.values()) {
    const described = describe(open.study, text);
    if (described === null) continue;
    const made = desk.make(described.drafts, { group });
    if (!made.ok) return open.refusal(made);
    outcomes.push(described.outcome);
  }
  const after = await room.afterwards(open);
  if (isRefused(after)) return after;
  return give({
    gathered: gathered.value.transcripts,
    skipped: gathered.value.skipped.map(({ file, refusal }) => ({
      file,
      sentence: sentenceForSkipped(refusal as FileRefusal),
    })),
    attributes:
      outcomes.length === 0
        ? null
        : {
            described: outcomes.reduce((sum, { described }) => sum + described, 0),
            unmatched: outcomes.flatMap(({ unmatched }) => unmatched),
          },
  });
}

/** The text of a file that is a table of attributes; null for any other. */
async function tableIn(file: SourceFile): Promise<string | null> {
  if (!/\.(csv|tsv)$/iu.test(file.name)) return null;
  try {
    const decoded = decode('bytes' in file ? file.bytes : await readFile(file.path));
    return decoded.ok && readAttributeTable(decoded.text) !== null ? decoded.text : null;
  } catch {
    // It stays among the transcripts and is named there with the reason.
    return null;
  }
}

function describe(
  study: Study,
  text: string,
): { readonly drafts: Draft[]; readonly outcome: AttributesOutcome } | null {
  const table = readAttributeTable(text);
  if (table === null) return null;
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
