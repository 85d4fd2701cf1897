import {
  apply,
  editKinds,
  emptyStudy,
  type Edit,
  type Entry,
  type FitId,
  type Study,
} from '../engine/study/index.ts';
import { openStudyFile, recoverStudyFile, StudyFileFault } from './project/index.ts';
import type { MissingPart, Result, StudyFile } from './project/index.ts';
import { blobsIn } from './unused.ts';

/** A record that did not come over, and what it was as far as that can be told. */
export interface Missing {
  readonly sequence: number;
  readonly kind: MissingPart['kind'];
  /** For a blob: a decision that speaks of it. */
  readonly of: Edit | null;
  /** Times of the whole decisions around it, ISO 8601; null where there is none. */
  readonly after: string | null;
  readonly before: string | null;
}

export interface Recovered {
  /** Records that came over. */
  readonly kept: number;
  readonly missing: readonly Missing[];
  /** Decisions that are whole and rest on something that is missing. */
  readonly leftOut: readonly Entry[];
  /** Fits whose numbers are missing; what was decided after them stays. */
  readonly forgotten: readonly FitId[];
  /** What came over, for the names in it. */
  readonly study: Study;
}

/**
 * Recovers a damaged study into a new file that can be opened: brings over what is whole (see
 * `recoverStudyFile`), and leaves out decisions that no longer follow. The damaged file is only read.
 * Failures are those of `recoverStudyFile` and of opening the new file; 'damaged' where not even the
 * start of the study came over.
 */
export async function recoverStudy(
  from: string,
  to: string,
  {
    password,
    by,
    now,
  }: {
    readonly password?: string | undefined;
    readonly by: string;
    readonly now: () => string;
  },
): Promise<Result<Recovered>> {
  const recovery = await recoverStudyFile(from, to, { password });
  if (!recovery.ok) return recovery;
  const opened = await openStudyFile(to, { password });
  if (!opened.ok) return opened;
  const file = opened.value;
  try {
    const entries = [...file.edits()].map(({ sequence, json }) => ({
      ...(json as Omit<Entry, 'sequence'>),
      sequence,
    }));
    const lost = new Set(recovery.value.missing.map(({ sequence }) => sequence));
    const { study, out } = whatFollows(entries, lost);
    const forgotten = [...study.fits.values()]
      .filter(({ words, result }) => lost.has(words.sequence) || lost.has(result.sequence))
      .map(({ id }) => id);
    if (out.size > 0) {
      const compacted = await file.compact(out);
      if (!compacted.ok) return compacted;
    }
    if (forgotten.length > 0) {
      const edit: Edit = { kind: 'fitsForgotten', fits: forgotten };
      const written = file.append([], () => ({ at: now(), by, edit }));
      if (!written.ok) return written;
    }
    const value: Recovered = {
      kept: recovery.value.kept,
      missing: recovery.value.missing.map((part) => asMissing(part, entries)),
      leftOut: entries.filter(({ sequence }) => out.has(sequence)),
      forgotten,
      study,
    };
    return { ok: true, value };
  } catch (error) {
    if (error instanceof StudyFileFault) return error.failure;
    throw error;
  } finally {
    closeQuietly(file);
  }
}

/** The study of the decisions that still follow from one another, and those that do not. */
function whatFollows(
  entries: readonly Entry[],
  lost: ReadonlySet<number>,
): { readonly study: Study; readonly out: ReadonlySet<number> } {
  const known = new Set<string>(editKinds);
  const out = new Set<number>();
  for (;;) {
    let study = emptyStudy;
    for (const entry of entries) {
      if (out.has(entry.sequence)) continue;
      const next = known.has(entry.edit.kind) ? apply(study, entry) : null;
      if (next?.ok === true) study = next.value;
      else out.add(entry.sequence);
    }
    // A transcript without its text cannot be shown: whatever speaks of that text is left out.
    const needed = new Set<number>();
    blobsIn(study.transcripts, (sequence) => lost.has(sequence) && needed.add(sequence));
    const before = out.size;
    for (const { sequence, edit } of entries) {
      if (!out.has(sequence)) blobsIn(edit, (blob) => needed.has(blob) && out.add(sequence));
    }
    if (out.size === before) return { study, out };
  }
}

function asMissing({ sequence, kind }: MissingPart, entries: readonly Entry[]): Missing {
  const of = entries.find(({ edit }) => {
    let found = false;
    blobsIn(edit, (blob) => (found ||= blob === sequence));
    return found;
  });
  return {
    sequence,
    kind,
    of: of?.edit ?? null,
    after: entries.findLast((entry) => entry.sequence < sequence)?.at ?? null,
    before: entries.find((entry) => entry.sequence > sequence)?.at ?? null,
  };
}

function closeQuietly(file: StudyFile): void {
  if (!file.compacting) file.close();
}
