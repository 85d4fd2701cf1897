import { mapSpan } from '../../engine/spans/index.ts';
import {
  spansLost,
  type BlobRef,
  type Edit,
  type Speaker,
  type Study,
  type Transcript,
  type TranscriptId,
} from '../../engine/study/index.ts';
import { compareCodeUnits } from '../../engine/numbers/index.ts';
import { guessInterviewers } from '../../engine/text/index.ts';
import type { Desk, DeskResult, Draft } from '../desk.ts';
import type { ReadFile, ReadTable } from '../formats/index.ts';
import type { MintId } from '../ids.ts';
import { readFiles } from '../work/run-read.ts';
import { answersOf, type TablePlan } from './answers.ts';
import { noteDraft, sideNotesText } from './beside.ts';
import { differences } from './differences.ts';
import { transcriptNames } from './names.ts';
import { participantName } from './participants.ts';
import type { SkippedFile, SourceFile } from './source-file.ts';

export interface Gathered {
  readonly transcripts: readonly string[];
  readonly skipped: readonly SkippedFile[];
  /** Tables among the files: a person says which columns hold answers. */
  readonly tables: readonly FoundTable[];
  /** Where asked to be told: files that a transcript came from once before, with other words. */
  readonly doubles: readonly Double[];
}

export interface FoundTable {
  readonly file: string;
  readonly hash: string;
  readonly table: ReadTable;
}

export interface Double extends Loaded {
  readonly transcript: TranscriptId;
}

export interface Loaded {
  readonly file: { readonly name: string };
  readonly hash: string;
  readonly read: ReadFile;
}

/** How files are gathered. */
export interface GatherOptions {
  /** Labels; where none of them occurs in a transcript its interviewer is guessed. */
  readonly interviewers: readonly string[];
  /** May throw to stop. */
  readonly onProgress?: (done: number, file: string) => void;
  /** All under this group; otherwise one for each transcript, so that it can be taken back alone. */
  readonly group?: string;
  /** Whether files of a name that the study knows, with other words, are given back as doubles. */
  readonly askAboutDoubles?: boolean;
}

/** Reads files and gathers them as transcripts. What cannot be read is skipped and named. */
export async function gather(
  desk: Desk,
  files: readonly SourceFile[],
  { interviewers, onProgress, group, askAboutDoubles = false }: GatherOptions,
): Promise<DeskResult<Gathered>> {
  const skipped: SkippedFile[] = [];
  const tables: FoundTable[] = [];
  const doubles: Double[] = [];
  const known = new Set([...desk.study.transcripts.values()].map(({ source }) => source.hash));
  const byFile = new Map(
    [...desk.study.transcripts.values()].map(({ id, source }) => [source.fileName, id]),
  );
  const loaded: Loaded[] = [];
  const outcomes = await readFiles(files, 'transcript', onProgress);
  for (const [index, file] of files.entries()) {
    const read = outcomes[index];
    if (!read.ok) skipped.push({ file: file.name, refusal: read });
    else if (known.has(read.hash)) {
      skipped.push({ file: file.name, refusal: { code: 'duplicate' } });
    } else if (read.kind === 'table') {
      known.add(read.hash);
      tables.push({ file: file.name, hash: read.hash, table: read.value });
    } else {
      known.add(read.hash);
      const one = { file: { name: file.name }, hash: read.hash, read: read.value };
      const transcript = askAboutDoubles ? byFile.get(file.name) : undefined;
      if (transcript === undefined) loaded.push(one);
      else if (desk.text(transcript) === read.value.text) {
        skipped.push({ file: file.name, refusal: { code: 'duplicate' } });
      } else doubles.push({ ...one, transcript });
    }
  }
  const transcripts = gatherLoaded(desk, loaded, interviewers, group);
  if (!transcripts.ok) return transcripts;
  return { ok: true, value: { transcripts: transcripts.value, skipped, tables, doubles } };
}

/** Gathers what was read; the names of the transcripts. */
export function gatherLoaded(
  desk: Desk,
  given: readonly Loaded[],
  interviewers: readonly string[],
  oneGroup?: string,
): DeskResult<readonly string[]> {
  // Files of equal names in different folders: their order may not hang on where those lie.
  const loaded = [...given].sort(
    (a, b) => compareCodeUnits(a.file.name, b.file.name) || compareCodeUnits(a.hash, b.hash),
  );
  const names = namesFor(desk.study, loaded);
  for (const [index, one] of loaded.entries()) {
    const group = oneGroup ?? desk.context.mintId('group');
    const made = desk.make(drafts(desk, names[index], one, interviewers), { group });
    if (!made.ok) return made;
  }
  return { ok: true, value: names };
}

function namesFor(
  study: Study,
  loaded: readonly { readonly file: { readonly name: string }; readonly hash: string }[],
): string[] {
  const taken = new Set([...study.transcripts.values()].map(({ name }) => name));
  return transcriptNames(
    loaded.map(({ file, hash }) => ({ name: file.name, hash })),
    taken,
  );
}

function drafts(
  desk: Desk,
  name: string,
  { file, hash, read }: Loaded,
  interviewers: readonly string[],
): Draft[] {
  const { mintId } = desk.context;
  const { speakers, added } = castOf(desk, name, read, interviewers, mintId);
  const id = mintId('transcript');
  const source = { fileName: file.name, format: read.format, hash };
  const transcript = {
    id,
    name,
    source,
    details: read.details,
    turns: read.turns,
    speakers,
  };
  const beside = `Beside ${name}`;
  return [
    ...added.map((edit) => ({ edit })),
    gatheringDraft(transcript, read.text),
    ...(read.notes.length === 0
      ? []
      : [noteDraft(desk, { name: beside, transcript: id, source }, sideNotesText(read.notes))]),
  ];
}

function gatheringDraft(transcript: Omit<Transcript, 'text' | 'length'>, text: string): Draft {
  const { id, name, source, ...rest } = transcript;
  return {
    blobs: [Buffer.from(text, 'utf8')],
    edit: ([blob]: readonly BlobRef[]): Edit => ({
      kind: 'transcriptGathered',
      transcript: { id, name, source, text: blob, length: text.length, ...rest },
    }),
  };
}

/**
 * The drafts that make a transcript of a table of answers, its people and their attributes; null
 * where the columns of text hold nothing.
 */
export function answerDrafts(
  desk: Desk,
  { file, hash, table }: FoundTable,
  plan: TablePlan,
): { readonly name: string; readonly drafts: readonly Draft[]; readonly described: number } | null {
  const sheet = table.sheets.find(({ name }) => name === plan.sheet) ?? table.sheets[0];
  const [name] = namesFor(desk.study, [{ file: { name: file }, hash }]);
  const answers = answersOf(sheet, plan, name);
  if (answers === null) return null;
  const { mintId } = desk.context;
  const known = new Map([...desk.study.participants.values()].map((one) => [one.name, one]));
  const people: Edit[] = [];
  let described = 0;
  const speakers: Speaker[] = [{ label: answers.asking, role: 'interviewer', participant: null }];
  for (const { label, name: person, attributes } of answers.people) {
    const one = known.get(person);
    if (Object.keys(attributes).length > 0) described++;
    if (one === undefined) {
      const participant = { id: mintId('participant'), name: person, attributes };
      known.set(person, participant);
      people.push({ kind: 'participantAdded', participant });
      speakers.push({ label, role: 'participant', participant: participant.id });
      continue;
    }
    const to = { name: one.name, attributes: { ...one.attributes, ...attributes } };
    const from = { name: one.name, attributes: one.attributes };
    if (JSON.stringify(from) !== JSON.stringify(to)) {
      people.push({ kind: 'participantDescribed', participant: one.id, from, to });
    }
    speakers.push({ label, role: 'participant', participant: one.id });
  }
  const source = { fileName: file, format: table.format, hash };
  const id = mintId('transcript');
  const transcript = { id, name, source, details: [], turns: answers.turns, speakers };
  return {
    name,
    described,
    drafts: [...people.map((edit) => ({ edit })), gatheringDraft(transcript, answers.text)],
  };
}

/**
 * The drafts that put the words of a newer file in the place of a transcript's: what stands in both
 * keeps its codings. Null where codings stand on words that the new text no longer has: how many.
 */
export function replacingDrafts(
  desk: Desk,
  { transcript: id, read }: Double,
  interviewers: readonly string[],
): { readonly drafts: readonly Draft[] } | { readonly orphaned: number } {
  const { study } = desk;
  const transcript = study.transcripts.get(id)!;
  const replacements = differences(desk.text(id), read.text);
  const spans = [
    ...(study.codings.get(id)?.values() ?? []),
    ...(study.nones.get(id)?.values() ?? []),
  ].map(({ span }) => span);
  const orphaned = spans.filter((span) => {
    const { start, end } = mapSpan(span, replacements);
    return start === end && span.start !== span.end;
  }).length;
  if (orphaned > 0) return { orphaned };

  const cast = castOf(desk, transcript.name, read, interviewers, desk.context.mintId);
  const own = new Set(transcript.speakers.map(({ label }) => label));
  const added = cast.speakers.filter(({ label }) => !own.has(label));
  const newcomers = new Set(added.map(({ participant }) => participant));
  const speakers = [...transcript.speakers, ...added];
  const from = { text: transcript.text, length: transcript.length, turns: transcript.turns };
  const lost = spansLost(study, { transcript: id, replacements, placed: [] });
  return {
    drafts: [
      ...cast.added
        .filter((edit) => edit.kind === 'participantAdded' && newcomers.has(edit.participant.id))
        .map((edit) => ({ edit })),
      ...(added.length === 0
        ? []
        : [
            {
              edit: {
                kind: 'speakersAssigned',
                transcript: id,
                from: transcript.speakers,
                to: speakers,
              } as const,
            },
          ]),
      {
        blobs: [Buffer.from(read.text, 'utf8')],
        edit: ([text]: readonly BlobRef[]): Edit => ({
          kind: 'textRevised',
          transcript: id,
          from,
          to: { text, length: read.text.length, turns: read.turns },
          replacements,
          placed: [],
          lost,
        }),
      },
    ],
  };
}

/** Who speaks in a transcript: known participants are found by name, new ones are added. */
function castOf(
  desk: Desk,
  transcript: string,
  { text, turns, details }: Pick<ReadFile, 'text' | 'turns' | 'details'>,
  interviewers: readonly string[],
  mintId: MintId,
): { readonly speakers: Speaker[]; readonly added: Edit[] } {
  const labels = [...new Set(turns.map(({ speaker }) => speaker))];
  const asking =
    interviewersAmong(labels, interviewers) ?? new Set(guessInterviewers(text, turns, details));
  const others = labels.filter((label) => label === null || !asking.has(label));
  const byName = new Map([...desk.study.participants.values()].map(({ id, name }) => [name, id]));
  const added: Edit[] = [];
  const speakers = labels.map((label): Speaker => {
    if (label !== null && asking.has(label)) {
      return { label, role: 'interviewer', participant: null };
    }
    const name = participantName(label, transcript, others.length);
    let participant = byName.get(name);
    if (participant === undefined) {
      participant = mintId('participant');
      byName.set(name, participant);
      added.push({
        kind: 'participantAdded',
        participant: { id: participant, name, attributes: {} },
      });
    }
    return { label, role: 'participant', participant };
  });
  return { speakers, added };
}

/** The labels that a person said are interviewers, or null where this transcript has none of them. */
export function interviewersAmong(
  labels: readonly (string | null)[],
  interviewers: readonly string[],
): ReadonlySet<string> | null {
  const wanted = new Set(interviewers.map(labelKey));
  const found = labels.filter((label) => label !== null && wanted.has(labelKey(label)));
  return found.length === 0 ? null : new Set(found as string[]);
}

/** Those of the labels that no interviewer of the study has. */
export function labelsNotFound(study: Study, labels: readonly string[]): string[] {
  const found = new Set<string>();
  for (const { speakers } of study.transcripts.values()) {
    for (const { label, role } of speakers) {
      if (label !== null && role === 'interviewer') found.add(labelKey(label));
    }
  }
  return [...new Set(labels)].filter((label) => !found.has(labelKey(label)));
}

function labelKey(label: string): string {
  return label.normalize('NFC').trim().replace(/:$/u, '').toLowerCase();
}
