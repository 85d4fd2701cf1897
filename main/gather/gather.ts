import { readFile } from 'node:fs/promises';
import type { BlobRef, Edit, Speaker, Study, Transcript } from '../../engine/study/index.ts';
import { compareCodeUnits } from '../../engine/numbers/index.ts';
import { guessInterviewers } from '../../engine/text/index.ts';
import type { Desk, DeskResult, Draft } from '../desk.ts';
import { readTranscript, type ReadFile } from '../formats/index.ts';
import { hashOf, type MintId } from '../ids.ts';
import { codeOf, type FoundFile, type MissedFile } from './find-files.ts';
import { transcriptNames } from './names.ts';
import { participantName } from './participants.ts';

/** A file that could not become a transcript, and why: main/sentences says it to a person. */
export interface SkippedFile {
  readonly file: string;
  readonly refusal: { readonly code: string };
}

export interface Gathered {
  readonly transcripts: readonly string[];
  readonly skipped: readonly SkippedFile[];
}

/** A file on the drive, or one whose bytes were handed over. */
export type SourceFile = FoundFile | HandedFile;

export interface HandedFile {
  readonly name: string;
  readonly bytes: Uint8Array;
}

interface Loaded {
  readonly file: { readonly name: string };
  readonly hash: string;
  readonly read: ReadFile;
}

/**
 * Reads files and gathers them as transcripts, one group of edits each, so that one transcript can
 * be taken back; or all under the `group` given. What cannot be read is skipped and named.
 * `interviewers` are labels; where none of them occurs in a transcript its interviewer is guessed.
 */
export async function gather(
  desk: Desk,
  files: readonly SourceFile[],
  interviewers: readonly string[],
  onProgress: (done: number, file: string) => void = () => {},
  oneGroup?: string,
): Promise<DeskResult<Gathered>> {
  const skipped: SkippedFile[] = [];
  const known = new Set([...desk.study.transcripts.values()].map(({ source }) => source.hash));
  const loaded: Loaded[] = [];
  for (const [index, file] of files.entries()) {
    onProgress(index, file.name);
    const result = await load(file);
    if ('refusal' in result) skipped.push({ file: file.name, refusal: result.refusal });
    else if (known.has(result.hash)) {
      skipped.push({ file: file.name, refusal: { code: 'duplicate' } });
    } else {
      known.add(result.hash);
      loaded.push(result);
    }
  }

  // Files of equal names in different folders: their order may not hang on where those lie.
  loaded.sort(
    (a, b) => compareCodeUnits(a.file.name, b.file.name) || compareCodeUnits(a.hash, b.hash),
  );
  const taken = new Set([...desk.study.transcripts.values()].map(({ name }) => name));
  const names = transcriptNames(
    loaded.map(({ file, hash }) => ({ name: file.name, hash })),
    taken,
  );
  const gathered: string[] = [];
  for (const [index, { file, hash, read }] of loaded.entries()) {
    const group = oneGroup ?? desk.context.mintId('group');
    const made = desk.make(drafts(desk, names[index], file, hash, read, interviewers), { group });
    if (!made.ok) return made;
    gathered.push(names[index]);
  }
  return { ok: true, value: { transcripts: gathered, skipped } };
}

async function load(
  file: SourceFile,
): Promise<Loaded | { readonly refusal: { readonly code: string } | MissedFile }> {
  let bytes: Uint8Array;
  try {
    // A file from the drive lets others be answered meanwhile; so must one that was handed over.
    if ('bytes' in file) await new Promise((resolve) => setImmediate(resolve));
    bytes = 'bytes' in file ? file.bytes : await readFile(file.path);
  } catch (error) {
    return { refusal: { code: codeOf(error) } };
  }
  const read = await readTranscript(bytes, file.name);
  return read.ok ? { file, hash: hashOf(bytes), read: read.value } : { refusal: read };
}

function drafts(
  desk: Desk,
  name: string,
  file: { readonly name: string },
  hash: string,
  read: ReadFile,
  interviewers: readonly string[],
): Draft[] {
  const { mintId } = desk.context;
  const { speakers, added } = castOf(desk, name, read, interviewers, mintId);
  const id = mintId('transcript');
  return [
    ...added.map((edit) => ({ edit })),
    {
      blobs: [Buffer.from(read.text, 'utf8')],
      edit: ([text]: readonly BlobRef[]): Edit => {
        const transcript: Transcript = {
          id,
          name,
          source: { fileName: file.name, format: read.format, hash },
          text,
          length: read.text.length,
          details: read.details,
          turns: read.turns,
          speakers,
        };
        return { kind: 'transcriptGathered', transcript };
      },
    },
  ];
}

/** Who speaks in a transcript: known participants are found by name, new ones are added. */
function castOf(
  desk: Desk,
  transcript: string,
  { text, turns, details }: ReadFile,
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
