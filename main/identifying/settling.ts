import type { IdentifierKind } from '../../engine/spans/index.ts';
import { compareCodeUnits } from '../../engine/numbers/index.ts';
import type { Edit, EditOf, Identifier, Study } from '../../engine/study/index.ts';
import type { Draft } from '../desk.ts';
import { elsewhereEdits } from './elsewhere.ts';
import { rewordingDrafts, type Rewording } from './revising.ts';
import type { PlaceOfGroup } from './standing.ts';
import { inPlaceOf, replaceForms } from './words-of.ts';

/** What a person decided about something that was found, and where. */
export interface Settling {
  readonly kind: IdentifierKind;
  readonly decision: Identifier['decision'];
  /** Null unless something is put in its place. */
  readonly replacement: string | null;
  readonly places: readonly PlaceOfGroup[];
  /** Whether those are all there are, so that the decision holds for later transcripts. */
  readonly everywhere: boolean;
}

/**
 * The edits of several decisions at once: one revision a transcript, whatever number of names is
 * replaced in it. `elsewhere` puts stand-ins into names, memos and the codebook as well.
 */
export function settlingDrafts(
  study: Study,
  settlings: readonly Settling[],
  elsewhere: boolean,
  textOf: (transcript: string) => string,
  mintId: () => string,
): Draft[] {
  const known = new Map(study.identifiers);
  const drafts: Draft[] = settlings.map((settling) => {
    const edit = settled(known, settling, mintId);
    if (edit.to !== null) known.set(edit.identifier, edit.to);
    return { edit };
  });
  const replacing = settlings.filter(({ replacement }) => replacement !== null);
  if (elsewhere) drafts.push(...elsewhereDrafts(study, replacing));

  const byTranscript = new Map<string, { rewordings: Rewording[]; outside: Settling[] }>();
  for (const settling of replacing) {
    for (const { transcript, start, end, form } of settling.places) {
      const own = byTranscript.get(transcript) ?? { rewordings: [], outside: [] };
      byTranscript.set(transcript, own);
      const words = inPlaceOf(form, settling.replacement ?? '');
      own.rewordings.push({
        start,
        end,
        words: hasDeterminer(textOf(transcript), start) ? words.replace(/^an? /u, '') : words,
      });
      const turns = study.transcripts.get(transcript)?.turns ?? [];
      const isSaid = turns.some((turn) => turn.start <= start && end <= turn.end);
      if (!isSaid && !own.outside.includes(settling)) own.outside.push(settling);
    }
  }
  for (const [id, { rewordings, outside }] of byTranscript) {
    const transcript = study.transcripts.get(id);
    if (transcript === undefined) continue;
    const relabel = (label: string): string =>
      outside.reduce(
        (said, { places, replacement }) => replaceForms(said, formsOf(places), replacement ?? ''),
        label,
      );
    drafts.push(...rewordingDrafts(study, transcript, textOf(id), apart(rewordings), relabel));
  }
  return drafts;
}

/** "the Harbour Trust" becomes "the organisation", not "the an organisation". */
function hasDeterminer(text: string, at: number): boolean {
  return /\b(?:the|an?|my|your|his|her|its|our|their|this|that)\s$/iu.test(
    text.slice(Math.max(0, at - 8), at),
  );
}

/** One after the other over names and memos, so that an edit takes up what the one before left. */
function elsewhereDrafts(study: Study, replacing: readonly Settling[]): Draft[] {
  const all = replacing.map(({ places, replacement }) => ({
    forms: formsOf(places),
    replacement: replacement ?? '',
  }));
  const chained = new Map<string, Edit>();
  const drafts: Edit[] = [];
  for (const { forms, replacement } of all) {
    for (const edit of elsewhereEdits(study, forms, replacement)) {
      const key = subjectOf(edit);
      const before = chained.get(key);
      if (before === undefined) {
        chained.set(key, edit);
        drafts.push(edit);
      } else {
        const joined = joinedWith(before, forms, replacement);
        chained.set(key, joined);
        drafts.splice(drafts.indexOf(before), 1, joined);
      }
    }
  }
  return drafts.map((edit) => ({ edit }));
}

function subjectOf(edit: Edit): string {
  switch (edit.kind) {
    case 'transcriptRenamed':
    case 'transcriptDescribed':
      return `${edit.kind} ${edit.transcript}`;
    case 'participantDescribed':
      return `${edit.kind} ${edit.participant}`;
    case 'themeRenamed':
    case 'themeDefined':
      return `${edit.kind} ${edit.theme}`;
    case 'wordUnseeded':
      return `${edit.kind} ${edit.theme} ${edit.word}`;
    case 'memoRevised':
      return `${edit.kind} ${edit.memo}`;
    case 'codingRevised':
      return `${edit.kind} ${edit.coding}`;
    default:
      return edit.kind;
  }
}

/** An edit whose result has a further name replaced in it. */
function joinedWith(edit: Edit, forms: readonly string[], replacement: string): Edit {
  if (!('to' in edit)) return edit;
  const put = (value: unknown): unknown => {
    if (typeof value === 'string') return replaceForms(value, forms, replacement);
    if (Array.isArray(value)) return value.map(put);
    if (typeof value !== 'object' || value === null) return value;
    return Object.fromEntries(Object.entries(value).map(([key, each]) => [key, put(each)]));
  };
  return { ...edit, to: put(edit.to) } as Edit;
}

function settled(
  identifiers: ReadonlyMap<string, Identifier>,
  settling: Settling,
  mintId: () => string,
): EditOf<'identifierSettled'> {
  const { kind, decision, replacement, places, everywhere } = settling;
  const forms = formsOf(places);
  // The same stand-in for further ways of writing a name, or in later transcripts.
  const known =
    decision !== 'stand-in'
      ? undefined
      : [...identifiers.values()].find(
          (other) =>
            other.kind === kind && other.decision === decision && other.replacement === replacement,
        );
  const id = known?.id ?? mintId();
  const identifier: Identifier = {
    id,
    kind,
    forms: [...new Set([...(known?.forms ?? []), ...forms])].sort(compareCodeUnits),
    decision,
    replacement,
    putIn:
      replacement === null
        ? []
        : [
            ...new Set([...(known?.putIn ?? []), ...places.map(({ transcript }) => transcript)]),
          ].sort(compareCodeUnits),
    places:
      replacement !== null || everywhere
        ? null
        : places.map(({ transcript, start, end }) => ({ transcript, span: { start, end } })),
  };
  return { kind: 'identifierSettled', identifier: id, from: known ?? null, to: identifier };
}

export function formsOf(places: readonly PlaceOfGroup[]): string[] {
  return [...new Set(places.map(({ form }) => form))].sort(compareCodeUnits);
}

/** In order, each stretch once. */
function apart(rewordings: readonly Rewording[]): Rewording[] {
  const sorted = [...rewordings].sort((a, b) => a.start - b.start || b.end - a.end);
  const kept: Rewording[] = [];
  for (const each of sorted) {
    const last = kept.at(-1);
    if (last === undefined || each.start >= last.end) kept.push(each);
  }
  return kept;
}
