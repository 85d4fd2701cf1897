import {
  nameKey,
  type Edit,
  type Participant,
  type SettingValue,
  type Speaker,
  type Study,
} from '../../engine/study/index.ts';
import { settingFault, settingsOf } from '../../engine/themes/index.ts';
import type { Api, Refused } from '../api.ts';
import { participantName } from '../gather/participants.ts';
import { sentenceForSetting } from '../sentences/sentences.ts';
import { refuse } from './answers.ts';
import type { OpenStudy } from './open-study.ts';
import type { Room } from './room.ts';
import type { Handlers } from './session-types.ts';

/** Decisions on transcripts, who speaks in them, and the settings. */
export function people(
  room: Room,
): Pick<
  Handlers,
  | 'renameTranscript'
  | 'removeTranscript'
  | 'assignSpeaker'
  | 'describeParticipant'
  | 'changeSettings'
> {
  return {
    renameTranscript: room.decide(
      (open, { transcript, name }: Api['renameTranscript']['takes']) => {
        const from = open.study.transcripts.get(transcript)?.name ?? '';
        const to = name.trim();
        return from === to
          ? null
          : open.decide([{ kind: 'transcriptRenamed', transcript, from, to }]);
      },
    ),

    removeTranscript: room.decide((open, { transcript: id }: Api['removeTranscript']['takes']) => {
      const transcript = open.study.transcripts.get(id);
      if (transcript === undefined) {
        return open.refusal({ ok: false, code: 'unknown transcript', subject: id });
      }
      const without = new Map(open.study.transcripts);
      without.delete(id);
      // What stood beside its text in the file goes with it; notes that somebody added stay.
      const notes = [...open.study.fieldNotes.values()]
        .filter((note) => note.transcript === id)
        .map((note): Edit =>
          note.source.hash === transcript.source.hash
            ? { kind: 'fieldNoteLetGo', note }
            : {
                kind: 'fieldNoteDescribed',
                note: note.id,
                from: { name: note.name, transcript: id },
                to: { name: note.name, transcript: null },
              },
        );
      return open.decide([
        ...notes,
        { kind: 'transcriptRemoved', transcript },
        ...leaving(open.study, { ...open.study, transcripts: without }),
      ]);
    }),

    assignSpeaker: room.decide(assignSpeaker),

    describeParticipant: room.decide(
      (open, { participant, name, attributes }: Api['describeParticipant']['takes']) => {
        const known = open.study.participants.get(participant);
        if (known === undefined) {
          return open.refusal({ ok: false, code: 'unknown participant', subject: participant });
        }
        const from = { name: known.name, attributes: known.attributes };
        const given = Object.entries(attributes).map(([key, value]) => [key.trim(), value.trim()]);
        const to = {
          name: name.trim(),
          attributes: Object.fromEntries(
            given.filter(([key, value]) => key !== '' && key !== '__proto__' && value !== ''),
          ) as Record<string, string>,
        };
        return JSON.stringify(from) === JSON.stringify(to)
          ? null
          : open.decide([{ kind: 'participantDescribed', participant, from, to }]);
      },
    ),

    changeSettings: room.decide(changeSettings),
  };
}

function assignSpeaker(
  open: OpenStudy,
  { transcript, label, role, participant, everywhere }: Api['assignSpeaker']['takes'],
): Refused | null {
  const { study, desk } = open;
  const here = study.transcripts.get(transcript);
  if (here === undefined) {
    return open.refusal({ ok: false, code: 'unknown transcript', subject: transcript });
  }
  if (!here.speakers.some((speaker) => speaker.label === label)) {
    return open.refusal({ ok: false, code: 'no speaker', subject: label ?? '' });
  }
  const all = everywhere ? [...study.transcripts.values()] : [here];
  const added: Participant[] = [];
  const personNamed = (name: string): string => {
    const known = [...study.participants.values(), ...added].find(
      (one) => nameKey(one.name) === nameKey(name),
    );
    if (known !== undefined) return known.id;
    const one = { id: desk.context.mintId('participant'), name: name.trim(), attributes: {} };
    added.push(one);
    return one.id;
  };
  const transcripts = new Map(study.transcripts);
  const assigned: Edit[] = [];
  for (const each of all) {
    const speakers = each.speakers.map((speaker): Speaker => {
      if (speaker.label !== label) return speaker;
      if (role !== 'participant') return { label, role, participant: null };
      const others = each.speakers.filter(
        (one) => one.label === label || one.role === 'participant',
      );
      const name = participant ?? participantName(label, each.name, others.length);
      // Without a name given, whoever it is already stays.
      const person = participant === null ? speaker.participant : null;
      return { label, role, participant: person ?? personNamed(name) };
    });
    if (JSON.stringify(speakers) === JSON.stringify(each.speakers)) continue;
    transcripts.set(each.id, { ...each, speakers });
    assigned.push({
      kind: 'speakersAssigned',
      transcript: each.id,
      from: each.speakers,
      to: speakers,
    });
  }
  return open.decide([
    ...added.map((one): Edit => ({ kind: 'participantAdded', participant: one })),
    ...assigned,
    ...leaving(study, { ...study, transcripts }),
  ]);
}

/**
 * Participants who spoke and now speak nowhere. Whoever was described stays: somebody typed that in.
 */
function leaving(before: Study, after: Study): Edit[] {
  const spoke = speaking(before);
  const speak = speaking(after);
  return [...before.participants.values()]
    .filter(
      ({ id, attributes }) =>
        spoke.has(id) && !speak.has(id) && Object.keys(attributes).length === 0,
    )
    .map((participant): Edit => ({ kind: 'participantRemoved', participant }));
}

function speaking({ transcripts }: Study): ReadonlySet<string> {
  return new Set(
    [...transcripts.values()].flatMap(({ speakers }) =>
      speakers.flatMap(({ participant }) => participant ?? []),
    ),
  );
}

function changeSettings(
  open: OpenStudy,
  { settings }: Api['changeSettings']['takes'],
): Refused | null {
  const before = open.study.settings;
  const given = Object.entries(settings) as [string, SettingValue][];
  for (const [key, value] of given) {
    const fault = settingFault(key, value);
    if (fault !== null) return { code: 'setting', refused: sentenceForSetting(fault) };
  }
  const after = settingsOf({ ...before, ...Object.fromEntries(given) });
  if (after.text.passageMinimumWords >= after.text.passageMaximumWords) {
    return refuse('passage limits');
  }
  if (JSON.stringify(after) === JSON.stringify(settingsOf(before))) return null;
  const changes = given
    .filter(([key, to]) => JSON.stringify(before[key]) !== JSON.stringify(to))
    .map(([key, to]) => ({ key, from: before[key] ?? null, to }));
  return open.decide([{ kind: 'settingsChanged', changes }]);
}
