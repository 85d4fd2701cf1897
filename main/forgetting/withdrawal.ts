import { overlap, type Span } from '../../engine/spans/index.ts';
import {
  refused,
  turnsOf,
  type Exported,
  type ParticipantId,
  type Refusal,
  type Speaker,
  type Transcript,
  type TranscriptId,
} from '../../engine/study/index.ts';
import type { Desk, DeskContext } from '../desk.ts';
import type { StudyFile } from '../project/index.ts';
import { erase, fitsOfOtherWords, type Erased, type EraseOptions, type Erasure } from './erase.ts';
import { movedDates } from '../identifying/standing.ts';
import { mentionsOf, type Mention } from './mentions.ts';
import { nothingRedacted } from './redact.ts';
import {
  joined,
  marking,
  nameFinder,
  nameKeyOf,
  namesIn,
  searchable,
  withdrawnMark,
  type Marking,
} from './words.ts';

export interface WithdrawalRequest {
  readonly participant: ParticipantId;
  /** Names by which others speak of the person, to be erased wherever they stand. */
  readonly names: readonly string[];
}

/** What a withdrawal takes away. */
export interface WithdrawalPlan {
  readonly participant: { readonly id: ParticipantId; readonly name: string };
  /** Transcripts that go altogether: nobody else but interviewers speaks there. */
  readonly transcripts: readonly TranscriptId[];
  /** Transcripts with others, in which the person's turns lose their words. */
  readonly shared: readonly TranscriptId[];
  readonly codings: number;
  readonly memos: number;
  readonly fits: number;
  /** Reports that left the study with the person's words. */
  readonly exported: readonly Exported[];
  /** The names that were looked for, and where they stand besides. */
  readonly names: readonly string[];
  readonly mentions: readonly Mention[];
  readonly erasure: Erasure;
}

type Planned = { readonly ok: true; readonly value: WithdrawalPlan } | Refusal;

/** What would go, before anything does. */
export function planWithdrawal(
  desk: Desk,
  { participant: id, names: given }: WithdrawalRequest,
): Planned {
  const { study } = desk;
  const participant = study.participants.get(id);
  if (participant === undefined) return refused('unknown participant', id);
  const spokeIn = (speakers: readonly Speaker[]): boolean =>
    speakers.some((speaker) => speaker.participant === id);
  const here = [...study.transcripts.values()].filter(({ speakers }) => spokeIn(speakers));
  const whole = here.filter(({ speakers }) => !hasOthers(speakers, id));
  const shared = here.filter(({ speakers }) => hasOthers(speakers, id));
  const ids = (list: typeof here): TranscriptId[] => list.map((transcript) => transcript.id);

  const turns = new Map(shared.map((one) => [one.id, turnsOf(one, id)]));
  const goes = (transcript: TranscriptId, span: Span): boolean =>
    whole.some((one) => one.id === transcript) ||
    (turns.get(transcript) ?? []).some((turn) => overlap(turn, span) > 0);
  let codings = 0;
  for (const each of [...study.codings.values(), ...study.nones.values()]) {
    for (const { transcript, span } of each.values()) if (goes(transcript, span)) codings++;
  }
  const memos = [...study.memos.values()].filter(
    ({ subject }) =>
      (subject.kind === 'transcript' && whole.some((one) => one.id === subject.transcript)) ||
      (subject.kind === 'passage' && goes(subject.transcript, subject.span)),
  ).length;

  const wholeIds = new Set([...ids(whole), ...removedEarlier(desk, id)]);
  const names = searchable(given);
  const finder = nameFinder(names.map((name) => ({ name, mark: withdrawnMark })));
  const markings = new Map<TranscriptId, readonly Marking[]>();
  for (const transcript of study.transcripts.values()) {
    if (wholeIds.has(transcript.id)) continue;
    const text = desk.text(transcript.id);
    const own = (turns.get(transcript.id) ?? []).map((turn) => marking(turn));
    const labels = labelsIn(text, transcript, turns.get(transcript.id) ?? []);
    const said = finder === null ? [] : namesIn(text, finder);
    const all = joined([own, labels, said]);
    if (all.length > 0) markings.set(transcript.id, all);
  }
  const changed = new Set([...wholeIds, ...markings.keys()]);
  const left = new Map([...study.transcripts].filter(([one]) => !changed.has(one)));
  return {
    ok: true,
    value: {
      participant: { id, name: participant.name },
      transcripts: ids(whole),
      shared: ids(shared),
      codings,
      memos,
      fits: fitsOfOtherWords([...desk.entries], { ...study, transcripts: left }).size,
      exported: study.exported.filter(
        (report) =>
          report.participants.includes(id) ||
          report.transcripts.some((one) => here.some((transcript) => transcript.id === one)),
      ),
      names,
      mentions: mentionsOf(desk, names, wholeIds).filter(
        ({ where, on }) => where !== 'name of a participant' || on !== participant.name,
      ),
      erasure: {
        because: 'withdrawal',
        decision: {
          kind: 'participantWithdrawn',
          participant: id,
          transcripts: ids(whole),
          shared: ids(shared),
        },
        markings,
        redaction: {
          ...nothingRedacted,
          person: id,
          transcripts: wholeIds,
          shared: new Map(
            shared.map(({ id: one, speakers }) => [
              one,
              new Set(speakers.flatMap((each) => (each.participant === id ? [each.label] : []))),
            ]),
          ),
          names: names.map((name) => ({ name, mark: withdrawnMark })),
          forms: formsOfTheirs(desk, id, wholeIds),
        },
      },
    },
  };
}

/** Withdraws a person: see `erase`. */
export async function withdraw(
  file: StudyFile,
  desk: Desk,
  context: DeskContext,
  request: WithdrawalRequest,
  options: EraseOptions,
): Promise<Erased> {
  const plan = planWithdrawal(desk, request);
  return plan.ok ? erase(file, context, plan.value.erasure, options) : plan;
}

/** The labels in front of turns, and wherever else they stand in the same transcript as whole words. */
function labelsIn(text: string, { turns }: Transcript, own: Transcript['turns']): Marking[] {
  const labels = new Set(own.flatMap(({ speaker }) => (speaker === null ? [] : [speaker])));
  const before = own.flatMap(({ speaker, start }): Marking[] => {
    const reached = turns.findLast(({ end }) => end <= start)?.end ?? 0;
    const at = speaker === null ? -1 : text.slice(reached, start).lastIndexOf(speaker);
    return at < 0 || speaker === null
      ? []
      : [marking({ start: reached + at, end: reached + at + speaker.length })];
  });
  const finder = nameFinder(searchable([...labels]).map((name) => ({ name, mark: withdrawnMark })));
  return joined([before, finder === null ? [] : namesIn(text, finder)]);
}

function hasOthers(speakers: readonly Speaker[], id: ParticipantId): boolean {
  return speakers.some(({ role, participant }) => role === 'participant' && participant !== id);
}

/**
 * Originals behind stand-ins, and names that were left, which the person said and nobody else did in
 * any wording that is still in the file. Where no wording tells, those that were settled for the
 * person's transcripts alone.
 */
function formsOfTheirs(
  { study, entries, store }: Desk,
  id: ParticipantId,
  whole: ReadonlySet<TranscriptId>,
): ReadonlySet<string> {
  const settled = [...entries].flatMap(({ edit }) =>
    edit.kind === 'identifierSettled'
      ? [edit.from, edit.to].filter((one) => one !== null && one.replacement !== movedDates)
      : [],
  );
  const finder = nameFinder(
    searchable(settled.flatMap((one) => one?.forms ?? [])).map((name) => ({ name, mark: '' })),
  );
  if (finder === null) return new Set();
  const theirs = new Set<string>();
  const others = new Set<string>();
  const look = (transcript: TranscriptId, text: string, turns: readonly Span[]): void => {
    for (const found of namesIn(text, finder)) {
      const own = whole.has(transcript) || turns.some((turn) => overlap(turn, found) > 0);
      (own ? theirs : others).add(nameKeyOf(text.slice(found.start, found.end)));
    }
  };
  const speakers = new Map<TranscriptId, readonly Speaker[]>();
  for (const { id: one, speakers: own } of study.transcripts.values()) speakers.set(one, own);
  const wordings = [...entries].flatMap(({ edit }) =>
    edit.kind === 'transcriptGathered'
      ? [{ ...edit.transcript, transcript: edit.transcript.id }]
      : edit.kind === 'textRevised'
        ? [{ ...edit.to, transcript: edit.transcript }]
        : [],
  );
  for (const { transcript, text, turns } of wordings) {
    const read = readable(store, text.sequence);
    if (read === null) continue;
    const own = turnsOf({ turns, speakers: speakers.get(transcript) ?? [] }, id);
    look(transcript, read, own);
  }
  for (const one of settled) {
    const at = [...(one?.putIn ?? []), ...(one?.places ?? []).map((place) => place.transcript)];
    const onlyHere = at.every(
      (transcript) =>
        whole.has(transcript) ||
        speakers.get(transcript)?.some(({ participant }) => participant === id) === true,
    );
    if (at.length === 0 || !onlyHere) continue;
    for (const form of one?.forms ?? []) theirs.add(nameKeyOf(form));
  }
  return new Set([...theirs].filter((form) => !others.has(form)));
}

/** The text of a blob; null where an earlier seal or withdrawal took it. */
function readable(store: Desk['store'], sequence: number): string | null {
  try {
    return Buffer.from(store.readBlob(sequence)).toString('utf8');
  } catch {
    return null;
  }
}

/** Transcripts that were removed from the study and in which the person spoke: still in the file. */
function removedEarlier({ study, entries }: Desk, id: ParticipantId): TranscriptId[] {
  const speakers = new Map<TranscriptId, readonly Speaker[]>();
  for (const { edit } of entries) {
    if (edit.kind === 'transcriptGathered') {
      speakers.set(edit.transcript.id, edit.transcript.speakers);
    } else if (edit.kind === 'speakersAssigned') speakers.set(edit.transcript, edit.to);
  }
  return [...speakers]
    .filter(
      ([transcript, own]) =>
        !study.transcripts.has(transcript) && own.some((each) => each.participant === id),
    )
    .map(([transcript]) => transcript);
}
