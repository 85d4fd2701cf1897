import { mapSpan, overlap, type Replacement, type Span } from '../engine/spans/index.ts';
import { invertReplacements } from '../engine/spans/index.ts';
import {
  apply,
  emptyStudy,
  nameKey,
  type Coding,
  type Edit,
  type Entry,
  type Memo,
  type None,
  type Refusal,
  type Study,
  type TakenIn,
  type Theme,
  type TranscriptId,
} from '../engine/study/index.ts';
import type { Desk, DeskResult, Draft } from './desk.ts';
import type { StudyFile } from './project/index.ts';

/** A decision that both copies changed since they parted, each in its own way. */
export interface Conflict {
  /** The coding, mark or memo: an id that both copies know, or theirs. */
  readonly id: string;
  readonly what: 'coding' | 'none' | 'memo';
  /** Null where it was removed. */
  readonly mine: string | null;
  readonly theirs: string | null;
  readonly transcript: TranscriptId | null;
  readonly span: Span | null;
  /** Whether both can stand side by side. */
  readonly both: boolean;
}

export type Choice = 'mine' | 'theirs' | 'both';

/** What another copy of the study would bring. */
export interface TakeInPlan {
  readonly head: string;
  /** The last record that both copies share. */
  readonly shared: number;
  readonly readers: readonly string[];
  readonly themes: readonly string[];
  readonly codings: number;
  readonly removed: number;
  readonly nones: number;
  readonly memos: number;
  /** Decisions on material that is not here: withdrawn, sealed, or gathered in the other copy alone. */
  readonly left: number;
  readonly conflicts: readonly Conflict[];
}

export type TakeInRefused = {
  readonly ok: false;
  readonly code: 'another study' | 'nothing new' | 'does not fold' | 'choose first';
};

export type TakeInPlanned = { readonly ok: true; readonly value: TakeInPlan } | TakeInRefused;

/** What taking another copy in would come to. The other file is open, for reading alone. */
export function planTakeIn(desk: Desk, mine: StudyFile, theirs: StudyFile): TakeInPlanned {
  const compared = compare(desk, mine, theirs);
  if (!compared.ok) return compared;
  const { value } = compared;
  const merge = mergeOf(desk.study, value);
  if (isEmpty(merge) && merge.left === 0) return { ok: false, code: 'nothing new' };
  return {
    ok: true,
    value: {
      head: value.head,
      shared: value.shared,
      readers: merge.readers.map(({ name }) => name),
      themes: merge.themes.map(({ name }) => name ?? 'a candidate'),
      codings: count(merge.edits, 'codingMade', 'codingRevised'),
      removed: count(merge.edits, 'codingRemoved', 'noneCleared', 'memoErased'),
      nones: count(merge.edits, 'noneMarked'),
      memos: count(merge.edits, 'memoWritten', 'memoRevised'),
      left: merge.left,
      conflicts: merge.conflicts.map(({ conflict }) => conflict),
    },
  };
}

/**
 * Takes the other copy's codings, marks, memos and readers in, as one gesture: the copy as it was then
 * and ordinary edits. Every conflict needs its choice. Taking the same copy in again changes nothing.
 */
export function takeIn(
  desk: Desk,
  mine: StudyFile,
  theirs: StudyFile,
  choices: ReadonlyMap<string, Choice>,
): DeskResult<readonly number[]> | TakeInRefused {
  const compared = compare(desk, mine, theirs);
  if (!compared.ok) return compared;
  const { value } = compared;
  const merge = mergeOf(desk.study, value);
  if (isEmpty(merge)) return { ok: false, code: 'nothing new' };
  const chosen: Edit[] = [];
  for (const { conflict, theirs: take, both } of merge.conflicts) {
    const choice = choices.get(conflict.id);
    if (choice === undefined || (choice === 'both' && both === null)) {
      return { ok: false, code: 'choose first' };
    }
    if (choice === 'theirs') chosen.push(...take);
    if (choice === 'both') chosen.push(...(both?.(desk.context.mintId) ?? []));
  }
  const edits: Edit[] = [
    ...merge.readers.map((reader): Edit => ({ kind: 'readerAdded', reader })),
    ...merge.themes.map((theme): Edit => ({ kind: 'themeAdded', theme, place: null })),
    ...merge.edits,
    ...chosen,
  ];
  const branch = Buffer.from(edits.map((edit) => `${JSON.stringify(edit)}\n`).join(''), 'utf8');
  const copy = (blob: TakenIn['branch']): TakenIn => ({
    head: value.head,
    shared: value.shared,
    records: theirs.records.length,
    fits: merge.fits,
    branch: blob,
  });
  const first: Draft = {
    blobs: edits.length === 0 ? [] : [branch],
    edit: ([blob]) => ({ kind: 'copyTakenIn', copy: copy(blob ?? null) }),
  };
  return desk.make([first, ...edits.map((edit) => ({ edit }))], {
    group: desk.context.mintId('group'),
  });
}

interface Compared {
  readonly head: string;
  readonly shared: number;
  /** Their study when it was taken in before, or where the copies parted; and as it is now. */
  readonly then: Study;
  readonly now: Study;
  /** From their wording of a transcript to the one that both had, and from there to ours. */
  readonly toOurs: (transcript: TranscriptId, span: Span) => Span;
}

function compare(
  desk: Desk,
  mine: StudyFile,
  theirs: StudyFile,
): { readonly ok: true; readonly value: Compared } | TakeInRefused {
  if (mine.studyId !== theirs.studyId) return { ok: false, code: 'another study' };
  const { takenIn } = desk.study;
  if (theirs.head === mine.head || takenIn.some(({ head }) => head === theirs.head)) {
    return { ok: false, code: 'nothing new' };
  }
  const shared = lastShared(mine, theirs);
  const chain = new Map([...theirs.chain()].map(({ sequence, hash }) => [hash, sequence]));
  if (chain.has(mine.head) === false && shared === theirs.records.length) {
    // Ours goes on from where theirs ends.
    return { ok: false, code: 'nothing new' };
  }
  const before = Math.max(shared, ...takenIn.map(({ head }) => chain.get(head) ?? 0));
  let then = emptyStudy;
  let now = emptyStudy;
  const branch: Entry[] = [];
  for (const { sequence, json } of theirs.edits()) {
    const entry = { ...(json as Omit<Entry, 'sequence'>), sequence };
    const next = applied(now, entry);
    if (next === null) return { ok: false, code: 'does not fold' };
    now = next;
    if (sequence <= before) then = next;
    if (sequence > shared) branch.push(entry);
  }
  const ours = [...desk.entries].filter(({ sequence }) => sequence > shared);
  const back = revisions(branch);
  const forth = revisions(ours);
  const toOurs = (transcript: TranscriptId, span: Span): Span => {
    const common = (back.get(transcript) ?? []).reduceRight(
      (at, replacements) => mapSpan(at, invertReplacements(replacements)),
      span,
    );
    return (forth.get(transcript) ?? []).reduce(
      (at, replacements) => mapSpan(at, replacements),
      common,
    );
  };
  return { ok: true, value: { head: theirs.head, shared, then, now, toOurs } };
}

function applied(study: Study, entry: Entry): Study | null {
  try {
    const next = apply(study, entry);
    return next.ok ? next.value : null;
  } catch {
    return null;
  }
}

function revisions(entries: readonly Entry[]): Map<TranscriptId, (readonly Replacement[])[]> {
  const found = new Map<TranscriptId, (readonly Replacement[])[]>();
  for (const { edit } of entries) {
    if (edit.kind !== 'textRevised') continue;
    found.set(edit.transcript, [...(found.get(edit.transcript) ?? []), edit.replacements]);
  }
  return found;
}

/** The last record up to which the two chains are one; a locked and a sealed copy share it as well. */
function lastShared(mine: StudyFile, theirs: StudyFile): number {
  const other = theirs.chain();
  let shared = 0;
  for (const { sequence, hash } of mine.chain()) {
    const next = other.next();
    if (next.done === true || next.value.hash !== hash) break;
    shared = sequence;
  }
  return shared;
}

interface OpenConflict {
  readonly conflict: Conflict;
  readonly theirs: readonly Edit[];
  readonly both: ((mint: (what: string) => string) => readonly Edit[]) | null;
}

interface Merge {
  readonly readers: Study['readers'] extends ReadonlyMap<string, infer Reader> ? Reader[] : never;
  readonly themes: Theme[];
  readonly fits: string[];
  readonly edits: Edit[];
  readonly conflicts: OpenConflict[];
  left: number;
}

function mergeOf(mine: Study, { then, now, toOurs }: Compared): Merge {
  const merge: Merge = {
    readers: [...now.readers.values()].filter(({ id }) => !mine.readers.has(id)),
    themes: [],
    fits: [...now.fits.keys(), ...now.absentFits].filter(
      (id) => !mine.fits.has(id) && !mine.absentFits.has(id),
    ),
    edits: [],
    conflicts: [],
    left: 0,
  };
  const themes = themesFor(mine, now, merge);
  const place = (transcript: TranscriptId, span: Span): Span | null => {
    const here = mine.transcripts.get(transcript);
    if (here === undefined) return null;
    const at = toOurs(transcript, span);
    if (at.end <= at.start || at.end > here.length) return null;
    const gone = here.speakers.filter(({ role }) => role === 'other').map(({ label }) => label);
    const emptied = [...mine.withdrawn.values()].some(({ shared }) => shared.includes(transcript));
    const inEmptied = here.turns.some(
      (turn) => gone.includes(turn.speaker) && overlap(turn, at) > 0,
    );
    return emptied && inEmptied ? null : at;
  };
  mergeCodings(mine, then, now, merge, place, themes);
  mergeNones(mine, then, now, merge, place);
  mergeMemos(mine, then, now, merge, place, themes);
  // Readers and themes come only with what needs them.
  const needed = JSON.stringify([merge.edits, merge.conflicts.map(({ theirs }) => theirs)]);
  return {
    ...merge,
    readers: merge.readers.filter(({ id }) => needed.includes(JSON.stringify(id))),
    themes: merge.themes.filter(({ id }) => needed.includes(JSON.stringify(id))),
  };
}

/** Which of our themes stands for one of theirs; what is not here comes along, out of the model. */
function themesFor(mine: Study, now: Study, merge: Merge): (id: string) => string | null {
  const byName = new Map(
    [...mine.themes.values()].flatMap(({ id, name, mergedInto }) =>
      name === null || mergedInto !== null ? [] : [[nameKey(name), id] as const],
    ),
  );
  const known = new Map<string, string | null>();
  return (given) => {
    let id = given;
    for (let theme = now.themes.get(id); theme !== undefined && theme.mergedInto !== null;) {
      id = theme.mergedInto;
      theme = now.themes.get(id);
    }
    const cached = known.get(id);
    if (cached !== undefined) return cached;
    const here = mine.themes.get(id);
    let found: string | null;
    if (here !== undefined) {
      found = here.id;
      for (let theme = here; theme.mergedInto !== null;) {
        const next = mine.themes.get(theme.mergedInto);
        if (next === undefined) break;
        theme = next;
        found = theme.id;
      }
    } else {
      const theirs = now.themes.get(id);
      const named = theirs?.name ?? null;
      const namesake = named === null ? undefined : byName.get(nameKey(named));
      if (namesake !== undefined) found = namesake;
      else if (theirs === undefined) found = null;
      else {
        const name = theirs.name ?? `A candidate of the other copy (${id.slice(0, 6)})`;
        // A candidate that only the other copy fitted has no words here.
        const origin = theirs.origin === 'fitted' ? 'asked for' : theirs.origin;
        merge.themes.push({ ...theirs, name, origin, pinned: false, mergedInto: null });
        found = id;
      }
    }
    known.set(id, found);
    return found;
  };
}

type Place = (transcript: TranscriptId, span: Span) => Span | null;

function mergeCodings(
  mine: Study,
  then: Study,
  now: Study,
  merge: Merge,
  place: Place,
  themes: (id: string) => string | null,
): void {
  const [before, after, here] = [flat(then.codings), flat(now.codings), flat(mine.codings)];
  for (const [id, theirs] of after) {
    const was = before.get(id);
    if (was !== undefined && same(was, theirs)) continue;
    const span = place(theirs.transcript, theirs.span);
    const theme = themes(theirs.theme);
    if (span === null || theme === null) {
      merge.left++;
      continue;
    }
    const coding: Coding = { ...theirs, span, theme };
    const ours = here.get(id);
    if (was === undefined) {
      if (ours !== undefined) continue;
      const rival = opposed(here, coding);
      const make: Edit = { kind: 'codingMade', coding };
      if (rival === undefined) merge.edits.push(make);
      else {
        merge.conflicts.push({
          conflict: conflictOf('coding', id, rival, coding, now, true),
          theirs: [{ kind: 'codingRemoved', coding: rival }, make],
          both: () => [make],
        });
      }
      continue;
    }
    if (ours !== undefined && same(ours, coding)) continue;
    if (ours !== undefined && same(stateOf(ours), stateOf(inOurs(was, place, themes)))) {
      merge.edits.push(revise(ours, coding));
      continue;
    }
    merge.conflicts.push({
      conflict: conflictOf('coding', id, ours ?? null, coding, now, ours !== undefined),
      theirs: ours === undefined ? [{ kind: 'codingMade', coding }] : [revise(ours, coding)],
      both:
        ours === undefined
          ? null
          : (mint) => [{ kind: 'codingMade', coding: { ...coding, id: mint('coding') } }],
    });
  }
  for (const [id, was] of before) {
    const ours = here.get(id);
    if (after.has(id) || ours === undefined) continue;
    if (place(was.transcript, was.span) === null) continue;
    const remove: Edit = { kind: 'codingRemoved', coding: ours };
    if (same(stateOf(ours), stateOf(inOurs(was, place, themes)))) merge.edits.push(remove);
    else {
      merge.conflicts.push({
        conflict: conflictOf('coding', id, ours, null, mine, false),
        theirs: [remove],
        both: null,
      });
    }
  }
}

function mergeNones(mine: Study, then: Study, now: Study, merge: Merge, place: Place): void {
  const [before, after, here] = [flat(then.nones), flat(now.nones), flat(mine.nones)];
  const codings = flat(mine.codings);
  for (const [id, theirs] of after) {
    if (before.has(id) || here.has(id)) continue;
    const span = place(theirs.transcript, theirs.span);
    if (span === null) {
      merge.left++;
      continue;
    }
    const none: None = { ...theirs, span };
    const mark: Edit = { kind: 'noneMarked', none };
    const coded = [...codings.values()].find(
      (one) =>
        one.transcript === none.transcript &&
        one.standing !== 'rejected' &&
        one.under.reader === none.under.reader &&
        overlap(one.span, span) > 0,
    );
    if (coded === undefined) merge.edits.push(mark);
    else {
      merge.conflicts.push({
        conflict: {
          id,
          what: 'none',
          mine: themeLabel(mine, coded.theme),
          theirs: 'no theme applies',
          transcript: none.transcript,
          span,
          both: false,
        },
        theirs: [{ kind: 'codingRemoved', coding: coded }, mark],
        both: null,
      });
    }
  }
  for (const [id] of before) {
    const ours = here.get(id);
    if (!after.has(id) && ours !== undefined) merge.edits.push({ kind: 'noneCleared', none: ours });
  }
}

function mergeMemos(
  mine: Study,
  then: Study,
  now: Study,
  merge: Merge,
  place: Place,
  themes: (id: string) => string | null,
): void {
  for (const [id, theirs] of now.memos) {
    const was = then.memos.get(id);
    if (was !== undefined && was.text === theirs.text) continue;
    const ours = mine.memos.get(id);
    const subject = subjectHere(theirs, mine, place, themes);
    if (subject === null) {
      merge.left++;
      continue;
    }
    const memo: Memo = { ...theirs, subject };
    if (ours === undefined && was === undefined) {
      merge.edits.push({ kind: 'memoWritten', memo });
    } else if (ours !== undefined && ours.text !== theirs.text) {
      const revised: Edit = { kind: 'memoRevised', memo: id, from: ours.text, to: theirs.text };
      if (was !== undefined && was.text === ours.text) merge.edits.push(revised);
      else {
        merge.conflicts.push({
          conflict: memoConflict(id, ours.text, theirs.text, true),
          theirs: [revised],
          both: (mint) => [{ kind: 'memoWritten', memo: { ...memo, id: mint('memo') } }],
        });
      }
    } else if (ours === undefined) {
      merge.conflicts.push({
        conflict: memoConflict(id, null, theirs.text, false),
        theirs: [{ kind: 'memoWritten', memo }],
        both: null,
      });
    }
  }
  for (const [id, was] of then.memos) {
    const ours = mine.memos.get(id);
    if (now.memos.has(id) || ours === undefined) continue;
    const erase: Edit = { kind: 'memoErased', memo: ours };
    if (ours.text === was.text) merge.edits.push(erase);
    else {
      merge.conflicts.push({
        conflict: memoConflict(id, ours.text, null, false),
        theirs: [erase],
        both: null,
      });
    }
  }
}

function subjectHere(
  { subject }: Memo,
  mine: Study,
  place: Place,
  themes: (id: string) => string | null,
): Memo['subject'] | null {
  switch (subject.kind) {
    case 'study':
      return subject;
    case 'transcript':
      return mine.transcripts.has(subject.transcript) ? subject : null;
    case 'passage': {
      const span = place(subject.transcript, subject.span);
      return span === null ? null : { ...subject, span };
    }
    case 'theme': {
      const theme = themes(subject.theme);
      return theme === null ? null : { ...subject, theme };
    }
  }
}

/** The same reader decided otherwise, here, on the same words and the same theme. */
function opposed(here: ReadonlyMap<string, Coding>, theirs: Coding): Coding | undefined {
  return [...here.values()].find(
    (ours) =>
      ours.transcript === theirs.transcript &&
      ours.theme === theirs.theme &&
      ours.under.reader === theirs.under.reader &&
      (ours.standing === 'rejected') !== (theirs.standing === 'rejected') &&
      overlap(ours.span, theirs.span) > 0,
  );
}

function conflictOf(
  what: 'coding',
  id: string,
  mine: Coding | null,
  theirs: Coding | null,
  study: Study,
  both: boolean,
): Conflict {
  const said = (coding: Coding | null): string | null =>
    coding === null
      ? null
      : [themeLabel(study, coding.theme), coding.standing, coding.memo]
          .filter((part) => part !== '')
          .join(', ');
  const { transcript, span } = (theirs ?? mine) as Coding;
  return { id, what, mine: said(mine), theirs: said(theirs), transcript, span, both };
}

function memoConflict(
  id: string,
  mine: string | null,
  theirs: string | null,
  both: boolean,
): Conflict {
  return { id, what: 'memo', mine, theirs, transcript: null, span: null, both };
}

function themeLabel(study: Study, id: string): string {
  return study.themes.get(id)?.name ?? 'a candidate';
}

/** A coding of theirs as it would stand here. */
function inOurs(coding: Coding, place: Place, themes: (id: string) => string | null): Coding {
  return {
    ...coding,
    span: place(coding.transcript, coding.span) ?? coding.span,
    theme: themes(coding.theme) ?? coding.theme,
  };
}

function stateOf({ theme, standing, span, memo }: Coding) {
  return { theme, standing, span: { start: span.start, end: span.end }, memo };
}

function revise(from: Coding, to: Coding): Edit {
  return {
    kind: 'codingRevised',
    transcript: from.transcript,
    coding: from.id,
    from: stateOf(from),
    to: stateOf(to),
  };
}

function flat<Item>(
  byTranscript: ReadonlyMap<string, ReadonlyMap<string, Item>>,
): ReadonlyMap<string, Item> {
  return new Map([...byTranscript.values()].flatMap((each) => [...each]));
}

function same(a: unknown, b: unknown): boolean {
  return JSON.stringify(a) === JSON.stringify(b);
}

function isEmpty({ edits, conflicts }: Merge): boolean {
  return edits.length === 0 && conflicts.length === 0;
}

function count(edits: readonly Edit[], ...kinds: readonly Edit['kind'][]): number {
  return edits.filter(({ kind }) => kinds.includes(kind)).length;
}

export type TakeInDone = DeskResult<readonly number[]> | TakeInRefused | Refusal;
