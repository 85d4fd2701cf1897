import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { Role } from '../../../engine/spans/index.ts';
import {
  defaultTextSettings,
  passagesOf,
  turnsFromText,
  wordsOf,
  type Passage,
  type TranscriptText,
} from '../../../engine/text/index.ts';

function transcript(
  text: string,
  roles: Record<string, Role> = { INT: 'interviewer' },
): TranscriptText {
  return { id: 't', text, turns: turnsFromText(text).turns, roles, participants: {} };
}

function passages(text: string, roles?: Record<string, Role>): Passage[] {
  return passagesOf(transcript(text, roles), defaultTextSettings);
}

/** A sentence of so many words. */
function sentence(words: number): string {
  return `${Array.from({ length: words - 1 }, () => 'boat').join(' ')} home.`;
}

const talk = (...lengths: number[]): string => lengths.map(sentence).join(' ');
const lengths = (found: readonly Passage[]): number[] => found.map((passage) => passage.words);

describe('a passage', () => {
  test('is one answer, with its question, its time and its place', () => {
    const text = `[00:01] INT: How was it for you?\n[00:05] P07: ${talk(30)}\n[00:20] INT: And after that, then?\n[00:25] P07: ${talk(20)}`;
    const found = passages(text);
    expect(found.map((p) => [p.number, p.speaker, p.startTime, p.words])).toEqual([
      [1, 'P07', 5000, 30],
      [2, 'P07', 25000, 20],
    ]);
    const question = found[1]!.questionBefore!;
    expect(text.slice(question.start, question.end)).toBe('And after that, then?');
    expect(text.slice(found[0]!.start, found[0]!.end)).toBe(sentence(30));
  });

  test('goes on over turns of three words or fewer by others, which it does not hold', () => {
    const text = `P07: ${talk(20)}\nINT: Mm-hm.\nP07: ${talk(15)}\nINT: And then what?\nP07: ${talk(10)}\nINT: [laughs]\nP07: ${talk(5)}`;
    const [only, ...others] = passages(text);
    expect(others).toEqual([]);
    expect(only!.words).toBe(50);
    expect(only!.segments).toHaveLength(4);
    expect(only!.questionBefore).toBeNull();
    for (const { start, end } of only!.segments) {
      expect(text.slice(start, end)).not.toMatch(/INT|Mm-hm|what|P07/);
    }
  });

  test('ends at a longer turn by anybody else', () => {
    const text = `P07: ${talk(20)}\nINT: And then what happened?\nP07: ${talk(15)}\nP08: ${talk(9)}\nP07: ${talk(10)}`;
    expect(passages(text).map((p) => [p.speaker, p.words])).toEqual([
      ['P07', 20],
      ['P07', 15],
      ['P08', 9],
      ['P07', 10],
    ]);
  });

  test('of a short turn in between lies inside the span of the other and in no segment of it', () => {
    const found = passages(`P07: ${talk(20)}\nP08: Oh yes.\nP07: ${talk(15)}`);
    expect(found.map((p) => [p.speaker, p.words])).toEqual([
      ['P07', 35],
      ['P08', 2],
    ]);
  });

  test('is made of participants alone', () => {
    const text = `INT: ${talk(30)}\nGuide: ${talk(30)}\nP07: ${talk(30)}\nGuide: ${talk(9)}`;
    expect(passages(text, { INT: 'interviewer', Guide: 'other' }).map((p) => p.speaker)).toEqual([
      'P07',
    ]);
    expect(
      passages(text, { INT: 'interviewer', Guide: 'other' })[0]!.questionBefore,
    ).not.toBeNull();
  });

  test('runs over paragraphs where nobody is named', () => {
    expect(lengths(passages(`${talk(20)}\n\n${talk(20)}`))).toEqual([40]);
  });

  test('keeps an answer without words', () => {
    expect(
      lengths(
        passages(
          'INT: What was it like then?\nP07: [crying]\nINT: Shall we stop here now?\nP07: No.',
        ),
      ),
    ).toEqual([0, 1]);
  });

  test('is nothing where nobody but the interviewer speaks', () => {
    expect(passages('INT: How?\nINT: Why?')).toEqual([]);
  });
});

describe('a long answer', () => {
  test('of up to 120 words stays whole', () => {
    expect(lengths(passages(`INT: So?\nP07: ${talk(40, 40, 40)}`))).toEqual([120]);
  });

  test('is divided evenly at sentence ends, with nothing left over', () => {
    expect(lengths(passages(`INT: So?\nP07: ${talk(20, 20, 20, 20, 20, 20, 3)}`))).toEqual([
      60, 63,
    ]);
    expect(lengths(passages(`INT: So?\nP07: ${talk(...Array<number>(16).fill(10))}`))).toEqual([
      80, 80,
    ]);
    expect(lengths(passages(`INT: So?\nP07: ${talk(118, 4)}`))).toEqual([122]);
  });

  test('is divided between turns rather than inside one', () => {
    const text = `P07: ${talk(40, 40)}\nINT: Mm.\nP07: ${talk(25, 50)}`;
    expect(lengths(passages(text))).toEqual([80, 75]);
    // 76 and 84 words are as good as 84 and 76; the first ends with a turn.
    const even = `P07: ${talk(40, 36)}\nINT: Mm.\nP07: ${talk(8, 76)}`;
    expect(lengths(passages(even))).toEqual([76, 84]);
  });

  test('without sentence ends is divided at commas, or else between words', () => {
    const commas = Array.from(
      { length: 20 },
      () => 'one two three four five six seven eight nine ten',
    ).join(', ');
    const text = `INT: So?\nP07: ${commas}`;
    const found = passages(text);
    expect(lengths(found)).toEqual([100, 100]);
    expect(text.slice(found[0]!.start, found[0]!.end)).toMatch(/ten,$/);
    const bare = passages(`INT: So?\nP07: ${'word '.repeat(300)}`);
    expect(bare.reduce((sum, p) => sum + p.words, 0)).toBe(300);
    for (const words of lengths(bare)) expect(words >= 40 && words <= 120).toBe(true);
  });

  test('follows the lengths that are set', () => {
    const settings = { ...defaultTextSettings, passageMinimumWords: 10, passageMaximumWords: 30 };
    const found = passagesOf(
      transcript(`INT: So?\nP07: ${talk(...Array<number>(10).fill(10))}`),
      settings,
    );
    expect(lengths(found)).toEqual([20, 20, 20, 20, 20]);
  });
});

test('everything that participants say is in exactly one passage', () => {
  const speaker = fc.constantFrom('INT', 'P07', 'P08', 'Guide');
  const said = fc.array(
    fc.oneof(
      fc.integer({ min: 1, max: 160 }).map(sentence),
      fc.constantFrom('Mm-hm.', '[laughs]', 'Dr. Falk', '…', 'a\n\nb'),
    ),
    { minLength: 1, maxLength: 8 },
  );
  fc.assert(
    fc.property(fc.array(fc.tuple(speaker, said), { maxLength: 14 }), (talked) => {
      const text = talked.map(([label, parts]) => `${label}: ${parts.join(' ')}`).join('\n\n');
      const given = transcript(text, { INT: 'interviewer', Guide: 'other' });
      const found = passagesOf(given, defaultTextSettings);

      const times = new Uint8Array(text.length);
      for (const { segments, start, end } of found) {
        expect(segments[0]!.start).toBe(start);
        expect(segments[segments.length - 1]!.end).toBe(end);
        for (const segment of segments) {
          for (let i = segment.start; i < segment.end; i++) times[i]!++;
        }
      }
      const expected = new Uint8Array(text.length);
      for (const turn of given.turns) {
        if (turn.speaker === 'INT' || turn.speaker === 'Guide') continue;
        for (let i = turn.start; i < turn.end; i++) expected[i] = 1;
      }
      for (let i = 0; i < text.length; i++) {
        // White space between two passages belongs to neither.
        if (times[i] !== expected[i]) expect(times[i] === 0 && /\s/.test(text[i]!)).toBe(true);
      }
      expect(found.map((p) => p.number)).toEqual(found.map((_, index) => index + 1));
      for (const passage of found) {
        const words = passage.segments.flatMap((segment) => wordsOf(text, segment));
        expect(words.length).toBe(passage.words);
      }
    }),
    { numRuns: 60 },
  );
});
