import type { BlobRef, Edit, FieldNote } from '../../engine/study/index.ts';
import type { Desk, Draft } from '../desk.ts';
import type { ReadOutcome } from '../work/run-read.ts';
import { readFiles } from '../work/run-read.ts';
import type { SideNote } from '../formats/index.ts';
import type { SkippedFile, SourceFile } from './source-file.ts';

/** A field note as a draft: kept beside, never counted. */
export function noteDraft(
  desk: Desk,
  note: Pick<FieldNote, 'name' | 'transcript' | 'source'>,
  text: string,
): Draft {
  const id = desk.context.mintId('note');
  return {
    blobs: [Buffer.from(text, 'utf8')],
    edit: ([blob]: readonly BlobRef[]): Edit => ({
      kind: 'fieldNoteKept',
      note: { id, ...note, text: blob, length: text.length },
    }),
  };
}

const kinds = { comment: 'Comment', footnote: 'Footnote', endnote: 'Endnote' } as const;

/** What stood beside the text of a document, as one note. */
export function sideNotesText(notes: readonly SideNote[]): string {
  return notes
    .map(({ kind, by, text }) => `${kinds[kind]}${by === null ? '' : ` by ${by}`}: ${text}`)
    .join('\n\n');
}

/** The drafts that keep files as field notes, their names, and what was left out. */
export async function fieldNoteDrafts(
  desk: Desk,
  files: readonly SourceFile[],
  transcript: string | null,
): Promise<{ readonly drafts: Draft[]; readonly kept: string[]; readonly skipped: SkippedFile[] }> {
  const drafts: Draft[] = [];
  const kept: string[] = [];
  const skipped: SkippedFile[] = [];
  const known = new Set([...desk.study.fieldNotes.values()].map(({ source }) => source.hash));
  const outcomes = await readFiles(files, 'note');
  for (const [index, read] of outcomes.entries()) {
    const file = files[index].name;
    if (!read.ok) skipped.push({ file, refusal: read });
    else if (known.has(read.hash)) skipped.push({ file, refusal: { code: 'duplicate' } });
    else {
      known.add(read.hash);
      const name = file.replace(/\.[^./]+$/u, '') || file;
      const source = { fileName: file, format: read.value.format, hash: read.hash };
      drafts.push(noteDraft(desk, { name, transcript, source }, textOf(read)));
      kept.push(name);
    }
  }
  return { drafts, kept, skipped };
}

function textOf(read: Extract<ReadOutcome, { readonly ok: true }>): string {
  if (read.kind === 'table') {
    return read.value.sheets
      .map(({ rows }) => rows.map((row) => row.join('\t')).join('\n'))
      .join('\n\n');
  }
  const { text, notes } = read.value;
  return notes.length === 0 ? text : `${text}\n\n${sideNotesText(notes)}`;
}
