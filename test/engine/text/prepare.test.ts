import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  defaultTextSettings,
  formOf,
  prepare,
  tallyLeftOut,
  turnsFromText,
  type Prepared,
  type TextSettings,
  type TranscriptText,
  type WordLists,
} from '../../../engine/text/index.ts';

const lists: WordLists = { eng: { stopWords: ['the', 'and', 'it'], fillers: ['um', 'mm-hm'] } };

function transcript(id: string, text: string): TranscriptText {
  return {
    id,
    text,
    turns: turnsFromText(text).turns,
    roles: { INT: 'interviewer' },
    participants: {},
  };
}

/** One passage for each answer. */
function study(...people: string[][]): TranscriptText[] {
  return people.map((answers, index) =>
    transcript(
      `t${index}`,
      answers.map((answer) => `INT: What happened after that?\nP: ${answer}`).join('\n'),
    ),
  );
}

function words(
  transcripts: readonly TranscriptText[],
  settings: Partial<TextSettings> = {},
  exempt: string[] = [],
): Prepared {
  return prepare(transcripts, { ...defaultTextSettings, ...settings }, lists, exempt);
}

const reasons = (prepared: Prepared): Record<string, string> =>
  Object.fromEntries(prepared.leftOut.map(({ form, reason }) => [form, reason]));

const unlimited = { minimumPassages: 1, minimumParticipants: 1, maximumPassageShare: 1 };

describe('counted words', () => {
  test('stand in code-unit order, with their counts by passage', () => {
    const prepared = words(study(['Zoo boat boat.', 'Émile boat.']), unlimited);
    expect(prepared.vocabulary).toEqual(['boat', 'zoo', 'émile']);
    expect([...prepared.counts.offsets]).toEqual([0, 2, 4]);
    expect([...prepared.counts.indices]).toEqual([0, 1, 0, 2]);
    expect([...prepared.counts.counts]).toEqual([2, 1, 1, 1]);
    expect(prepared.counts.passages).toBe(2);
    expect(prepared.counts.words).toBe(3);
    expect(prepared.passages.map((passage) => [passage.words, passage.countedWords])).toEqual([
      [3, 3],
      [2, 2],
    ]);
  });

  test('are those of participants alone', () => {
    expect(words(study(['Boat.']), unlimited).vocabulary).toEqual(['boat']);
  });

  test('leave an empty row for a passage without any', () => {
    const prepared = words(study(['Boat.', 'Um.', 'Boat.']), unlimited);
    expect([...prepared.counts.offsets]).toEqual([0, 1, 1, 2]);
    expect(prepared.passages[1]!.countedWords).toBe(0);
  });

  test('of no transcripts are none', () => {
    const prepared = words([]);
    expect(prepared.passages).toEqual([]);
    expect(prepared.vocabulary).toEqual([]);
    expect([...prepared.counts.offsets]).toEqual([0]);
  });

  test('carry the participant of their transcript', () => {
    const named = { ...study(['Boat.'])[0]!, participants: { P: 'person 1' } };
    expect(words([named], unlimited).passages[0]!.participant).toBe('person 1');
    expect(words(study(['Boat.']), unlimited).passages[0]!.participant).toBe('t0/P');
  });
});

describe('left out', () => {
  test('are stop words and fillers, unless kept, and what a person adds', () => {
    const given = study(['The boat and um mm-hm it.', 'The boat.']);
    expect(reasons(words(given, unlimited))).toEqual({
      the: 'stop word',
      and: 'stop word',
      it: 'stop word',
      um: 'filler',
      'mm-hm': 'filler',
    });
    expect(words(given, { ...unlimited, keptWords: ['The', 'UM'] }).vocabulary).toEqual([
      'boat',
      'the',
      'um',
    ]);
    expect(words(given, { ...unlimited, extraStopWords: ['Boat'] }).vocabulary).toEqual([]);
    expect(
      words(given, { ...unlimited, leaveOutStopWords: false, leaveOutFillers: false }).leftOut,
    ).toEqual([]);
  });

  test('are words in fewer than two passages', () => {
    const prepared = words(study(['Boat boat pier.', 'Pier.']), {
      minimumParticipants: 1,
      maximumPassageShare: 1,
    });
    expect(prepared.vocabulary).toEqual(['pier']);
    expect(prepared.leftOut).toEqual([
      { form: 'boat', occurrences: 2, reason: 'too few passages' },
    ]);
  });

  test('are words that fewer than two participants say, where there are two', () => {
    const one = ['Boat pier.', 'Boat pier.'];
    expect(words(study(one)).vocabulary).toEqual(['boat', 'pier']);
    expect(reasons(words(study(one, ['Pier.'])))).toEqual({ boat: 'too few participants' });
  });

  test('count one person over transcripts as one', () => {
    const [first, second] = study(['Boat.'], ['Boat.']);
    const same = [first!, second!].map((t) => ({ ...t, participants: { P: 'one' } }));
    expect(
      reasons(words([...same, ...study(['Pier.']).map((t) => ({ ...t, id: 'x' }))]))['boat'],
    ).toBe('too few participants');
  });

  test('are words in more than half of the passages, from four passages on', () => {
    const four = study(['Boat pier.', 'Boat pier.'], ['Boat quay.', 'Quay.']);
    expect(reasons(words(four, { minimumParticipants: 1 }))).toEqual({ boat: 'too many passages' });
    expect(words(study(['Boat.', 'Boat.', 'Boat.'])).vocabulary).toEqual(['boat']);
  });

  test('are never seeds, in whatever case they were typed', () => {
    const given = study(['The boat.', 'Pier.', 'Pier.', 'Pier.'], ['Pier.']);
    expect(words(given, {}, ['The', 'BOAT', 'pier', 'unheard']).vocabulary).toEqual([
      'boat',
      'pier',
      'the',
    ]);
  });

  test('are tallied by reason', () => {
    const prepared = words(study(['The the and um boat.', 'Pier.', 'Pier.']));
    expect(tallyLeftOut(prepared.leftOut)).toEqual({
      'stop word': { forms: 2, occurrences: 3 },
      filler: { forms: 1, occurrences: 1 },
      'too few passages': { forms: 1, occurrences: 1 },
    });
  });
});

describe('stems', () => {
  const given = study(['Ferries ferry.', 'Ferry.']);

  test('are counted only where the setting says so', () => {
    expect(words(given, unlimited).vocabulary).toEqual(['ferries', 'ferry']);
    expect(words(given, { ...unlimited, stemming: true }).vocabulary).toEqual(['ferri']);
  });

  test('remember the forms that were said, commonest first', () => {
    expect(words(given, { ...unlimited, stemming: true }).surfaces).toEqual([
      [
        { form: 'ferry', occurrences: 2 },
        { form: 'ferries', occurrences: 1 },
      ],
    ]);
  });

  test('are exempt together with a seed', () => {
    expect(words(study(['Ferries.', 'Boat.']), { stemming: true }, ['ferry']).vocabulary).toEqual([
      'ferri',
    ]);
  });
});

test('rows, places and vocabulary tell one story', () => {
  const word = fc.constantFrom(
    'Boat',
    'boats',
    'the',
    'um',
    'mother’s',
    'can’t',
    'É',
    '3',
    '[laughs]',
    'pier.',
  );
  const answer = fc.array(word, { minLength: 1, maxLength: 12 }).map((all) => all.join(' '));
  const person = fc.array(answer, { maxLength: 6 });
  fc.assert(
    fc.property(fc.array(person, { maxLength: 4 }), fc.boolean(), (people, stemming) => {
      const given = study(...people);
      const texts = new Map(given.map(({ id, text }) => [id, text]));
      const prepared = words(given, { stemming, minimumParticipants: 1 });
      const { offsets, words: places } = prepared.occurrences;
      expect([...prepared.vocabulary].sort()).toEqual(prepared.vocabulary);
      prepared.passages.forEach((passage, d) => {
        const counted = new Map<number, number>();
        for (let i = offsets[d]!; i < offsets[d + 1]!; i++) {
          const [start, end, index] = places.subarray(3 * i, 3 * i + 3);
          expect(passage.segments.some((s) => s.start <= start! && end! <= s.end)).toBe(true);
          const form = formOf(texts.get(passage.transcript)!.slice(start, end));
          expect(prepared.surfaces[index!]!.map((surface) => surface.form)).toContain(form);
          counted.set(index!, (counted.get(index!) ?? 0) + 1);
        }
        const from = prepared.counts.offsets[d]!;
        const to = prepared.counts.offsets[d + 1]!;
        const row = [...prepared.counts.indices.subarray(from, to)].map((index, i) => [
          index,
          prepared.counts.counts[from + i]!,
        ]);
        expect(row).toEqual([...counted].sort((a, b) => a[0] - b[0]));
        expect(passage.countedWords).toBe(offsets[d + 1]! - offsets[d]!);
      });
      expect(words(given, { stemming, minimumParticipants: 1 })).toEqual(prepared);
    }),
    { numRuns: 50 },
  );
});
