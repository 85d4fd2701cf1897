import { type Exported, type Identifier, type TranscriptId } from '../../engine/study/index.ts';
import type { Desk, DeskContext } from '../desk.ts';
import type { StudyFile } from '../project/index.ts';
import { movedDates } from '../identifying/standing.ts';
import { erase, fitsOfOtherWords, type Erased, type EraseOptions, type Erasure } from './erase.ts';
import { mentionsOf, type Mention } from './mentions.ts';
import { nothingRedacted } from './redact.ts';
import { nameFinder, nameKeyOf, namesIn, searchable, type GoneName } from './words.ts';

/** An original that is still somewhere, and what stands for it. */
export interface SealedName extends GoneName {
  readonly kind: Identifier['kind'];
  readonly mentions: readonly Mention[];
}

/** What a seal takes away. */
export interface SealPlan {
  /** Transcripts with earlier wordings. */
  readonly transcripts: readonly TranscriptId[];
  /** Earlier wordings that go. */
  readonly wordings: number;
  /** Names, places and the like whose originals go. */
  readonly originals: number;
  readonly fits: number;
  /** Reports that left the study before; they may hold originals. */
  readonly exported: readonly Exported[];
  /** Originals that stand elsewhere too; those that are chosen are replaced there by their stand-ins. */
  readonly names: readonly SealedName[];
}

export type SealPlanned =
  | { readonly ok: true; readonly value: SealPlan }
  | { readonly ok: false; readonly code: 'nothing to seal' };

/** The list of stand-ins itself forgets its originals, and so do the edits that made it. */
const goesAnyway: ReadonlySet<Mention['where']> = new Set(['stand-in', 'the trail']);

/** What would go, before anything does. */
export function planSeal(file: StudyFile, desk: Desk): SealPlanned {
  const { study } = desk;
  const wordings = earlierWordings(file, desk);
  const replaced = [...study.identifiers.values()].filter(
    ({ replacement, forms }) => replacement !== null && forms.length > 0,
  );
  if (wordings.length === 0 && replaced.length === 0) {
    return { ok: false, code: 'nothing to seal' };
  }
  const names = namesOf(replaced)
    .map((each) => ({ ...each, mentions: mentionsOf(desk, [each.name], new Set()) }))
    .filter(({ mentions }) => mentions.some(({ where }) => !goesAnyway.has(where)));
  return {
    ok: true,
    value: {
      transcripts: [...new Set(wordings.map(({ transcript }) => transcript))],
      wordings: wordings.length,
      originals: replaced.length,
      fits: fitsOfOtherWords([...desk.entries], study).size,
      exported: study.exported,
      names,
    },
  };
}

/**
 * Seals: earlier wordings of every transcript, the originals behind stand-ins, and the words of fits
 * that were made of them go for good. `names` are originals that are replaced wherever they stand.
 */
export async function seal(
  file: StudyFile,
  desk: Desk,
  context: DeskContext,
  { names: chosen }: { readonly names: readonly string[] },
  options: EraseOptions,
): Promise<Erased | Extract<SealPlanned, { readonly ok: false }>> {
  const plan = planSeal(file, desk);
  if (!plan.ok) return plan;
  const { study } = desk;
  const wanted = new Set(chosen.map(nameKeyOf));
  const names = namesOf([...study.identifiers.values()]).filter(({ name }) =>
    wanted.has(nameKeyOf(name)),
  );
  const finder = nameFinder(names);
  const markings = new Map(
    [...study.transcripts.keys()].flatMap((id) => {
      const found = finder === null ? [] : namesIn(desk.text(id), finder);
      return found.length === 0 ? [] : [[id, found] as const];
    }),
  );
  const transcripts = [...new Set([...plan.value.transcripts, ...markings.keys()])];
  const erasure: Erasure = {
    because: 'seal',
    decision: { kind: 'originalsSealed', transcripts },
    markings,
    redaction: { ...nothingRedacted, names, sealed: new Set(study.transcripts.keys()) },
  };
  return erase(file, context, erasure, options);
}

/** Forms of what was replaced, longest first, each once. */
function namesOf(identifiers: readonly Identifier[]): (GoneName & Pick<Identifier, 'kind'>)[] {
  return identifiers.flatMap(({ forms, replacement, kind }) =>
    // The number of days by which dates were moved is no name; it goes with the forms of its record.
    replacement === null || replacement === movedDates
      ? []
      : searchable(forms).map((name) => ({ name, mark: replacement, kind })),
  );
}

/** Wordings that are still in the file and that no transcript stands in any more. */
function earlierWordings(
  { records }: StudyFile,
  { study, entries }: Desk,
): { readonly transcript: TranscriptId; readonly sequence: number }[] {
  const found = new Map<number, TranscriptId>();
  for (const { edit } of entries) {
    if (edit.kind !== 'textRevised') continue;
    for (const { text } of [edit.from, edit.to]) found.set(text.sequence, edit.transcript);
  }
  return [...found]
    .map(([sequence, transcript]) => ({ sequence, transcript }))
    .filter(({ sequence, transcript }) => {
      const current = study.transcripts.get(transcript);
      const kept = records[sequence - 1]?.removed === false;
      return current !== undefined && kept && current.text.sequence !== sequence;
    });
}
