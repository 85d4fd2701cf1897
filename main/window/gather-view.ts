import { compareCodeUnits } from '../../engine/numbers/index.ts';
import type { Transcript } from '../../engine/study/index.ts';
import { languages, speakerKey, type Language } from '../../engine/text/index.ts';
import type { Counted, GatherView, ParticipantRow, SpeakerView, TranscriptRow } from '../api.ts';
import { attributeNames } from '../reports/coded-excerpts.ts';
import { fieldNoteRows } from './field-notes.ts';
import { memosOnStudy } from './memos.ts';
import { needsLook } from './needs-look.ts';
import type { OpenStudy } from './open-study.ts';
import { wordsIn } from './overview.ts';
import { talkOf, type Talk } from './talk.ts';

const languageNames: Readonly<Record<Language, string>> = {
  eng: 'English',
  deu: 'German',
  spa: 'Spanish',
  fra: 'French',
  ita: 'Italian',
  nld: 'Dutch',
  nor: 'Norwegian',
  por: 'Portuguese',
  rus: 'Russian',
  swe: 'Swedish',
};

export async function gatherView(open: OpenStudy): Promise<GatherView> {
  const { now } = open;
  const talk = await talkOf(now);
  // Decisions may have been made meanwhile: passages that they changed have to be at hand.
  await now.settled();
  const { settings, study } = now;
  return {
    transcripts: now.transcripts.map((transcript) =>
      transcriptRow(open, transcript, talk.get(transcript.id) ?? new Map()),
    ),
    participants: participantRows(open),
    fieldNotes: fieldNoteRows(open),
    attributes: attributeNames(study),
    settings: {
      themes: settings.themes,
      language: settings.text.language,
      languages: languages.map((code) => ({ code, name: languageNames[code] })),
      stemming: settings.text.stemming,
      passageMinimumWords: settings.text.passageMinimumWords,
      passageMaximumWords: settings.text.passageMaximumWords,
      extraStopWords: settings.text.extraStopWords,
    },
    memos: memosOnStudy(study),
  };
}

export async function countedWords({ now }: OpenStudy): Promise<Counted | null> {
  if (now.study.transcripts.size === 0) return null;
  const { passages, vocabulary } = await now.prepared();
  const enough = now.settings.suggestions.countedWords;
  return {
    passages: passages.length,
    words: passages.reduce((sum, { countedWords: own }) => sum + own, 0),
    forms: vocabulary.length,
    tooShort: passages.filter(({ countedWords: own }) => own < enough).length,
  };
}

function transcriptRow(
  { study, now }: OpenStudy,
  transcript: Transcript,
  talk: ReadonlyMap<string, Talk>,
): TranscriptRow {
  const { id, name, source, speakers } = transcript;
  const placed = now.passagesIn(id);
  const codings = [...(study.codings.get(id)?.values() ?? [])];
  return {
    id,
    name,
    fileName: source.fileName,
    format: source.format,
    words: wordsIn(placed),
    passages: placed.length,
    speakers: speakers.map(({ label, role, participant }): SpeakerView => {
      const person = participant === null ? undefined : study.participants.get(participant);
      return {
        label,
        role,
        participant: person === undefined ? null : { id: person.id, name: person.name },
        ...(talk.get(speakerKey(label)) ?? { turns: 0, words: 0 }),
      };
    }),
    needsLook: needsLook(study, transcript, talk),
    codings: codings.filter(({ standing }) => standing !== 'rejected').length,
  };
}

function participantRows({ study, now }: OpenStudy): ParticipantRow[] {
  const transcripts = new Map<string, string[]>();
  const words = new Map<string, number>();
  for (const { id, speakers } of now.transcripts) {
    for (const person of new Set(speakers.flatMap(({ participant }) => participant ?? []))) {
      transcripts.set(person, [...(transcripts.get(person) ?? []), id]);
    }
    for (const passage of now.passagesIn(id)) {
      words.set(passage.participant, (words.get(passage.participant) ?? 0) + passage.words);
    }
  }
  return [...study.participants.values()]
    .map(({ id, name, attributes }) => ({
      id,
      name,
      attributes,
      transcripts: transcripts.get(id) ?? [],
      words: words.get(id) ?? 0,
    }))
    .sort((a, b) => compareCodeUnits(a.name, b.name));
}
