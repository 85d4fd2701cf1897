import { describe, expect, test } from 'vitest';
import { guessInterviewers, turnsFromText } from '../../../engine/text/index.ts';

function guess(text: string): string[] {
  const { turns, details } = turnsFromText(text);
  return guessInterviewers(text, turns, details);
}

describe('the interviewer', () => {
  test.each([
    'Interviewer',
    'Interviewer 1',
    'INTERVIEWER',
    'INT',
    'INT2',
    'I',
    'I1',
    'Q',
    'Moderator',
    'Facilitator',
    'Interviewerin',
    'Enquêtrice',
    'Entrevistadora',
    'Moderador',
  ])('is known by the label %s, however little is asked', (label) => {
    expect(
      guess(`${label}: Go on, talk as long as you like about it.\nP07: No.\n${label}: Right.`),
    ).toEqual([label]);
  });

  test('may be several by their labels', () => {
    expect(guess('INT1: So?\nP07: Yes.\nINT2: And?\nP07: No.')).toEqual(['INT1', 'INT2']);
  });

  test.each(['Jane Doe', 'Jane', 'JD'])('is known as %s by a line above the talk', (label) => {
    const text = `Date: 3 May\nInterviewer: Jane Doe\n\n${label}: Right.\nRuth: Why?\n${label}: Well.\nRuth: Oh?`;
    expect(guess(text)).toEqual([label]);
  });

  test('is the one who asks most and speaks least', () => {
    const text =
      'Tom: And how was that?\nRuth: It was long, and I was cold the whole way home, wasn’t I?\n' +
      'Tom: Who met you?\nRuth: My sister did, in the old van, and the dog came as well.';
    expect(guess(text)).toEqual(['Tom']);
  });

  test('is not guessed where nobody asks more, or where who asks also talks most', () => {
    expect(guess('Tom: Well.\nRuth: Well.\nTom: Yes.\nRuth: Yes.')).toEqual([]);
    expect(
      guess(
        'Tom: How? And why? And where, all of it, from the start?\nRuth: No.\nTom: Why?\nRuth: No.',
      ),
    ).toEqual([]);
    expect(guess('Tom: How?\nRuth: How?\nTom: Why?\nRuth: Why?')).toEqual([]);
  });

  test('is nobody where one speaks alone or nobody is named', () => {
    expect(guess('P07: Why would I? I ask you.\nP07: Why?')).toEqual([]);
    expect(guess('Why would I?\n\nI ask you.')).toEqual([]);
  });

  test('words that only begin like one name nobody', () => {
    expect(guess('Interviewee: Yes.\nRuth: It was long.\nInterviewee: No.\nRuth: Cold.')).toEqual(
      [],
    );
  });
});
