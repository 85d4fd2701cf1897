import { describe, expect, test } from 'vitest';
import type { Sheet } from '../../../main/formats/index.ts';
import { answersOf, guessColumns, guessPlan } from '../../../main/gather/answers.ts';

const why = 'What has changed since the ferry stopped?';
const help = 'What would help most?';

const sheet: Sheet = {
  name: 'Answers',
  rows: [
    ['Respondent', 'Village', why, help, 'Submitted'],
    [
      'R01',
      'Skell',
      'The shop is empty by Thursday and nobody comes.',
      'A boat on Fridays, I suppose, if small.',
      '2026-05-03',
    ],
    ['R02', 'Brae', 'My children live over there in the week now.', '', '2026-05-04'],
    ['R03', 'Skell', '', '', '2026-05-05'],
    [
      'R04',
      'Skell',
      'Nothing much, since we have a boat.',
      'Somewhere to stay when it is late there.',
      '2026-05-06',
    ],
  ],
};

describe('the guess', () => {
  test('takes long cells for answers, people by their heading, what comes back for attributes', () => {
    expect(guessColumns(sheet).map(({ guess }) => guess)).toEqual([
      'participant',
      'attribute',
      'text',
      'text',
      'left out',
    ]);
  });

  test('takes the first column whose short cells all differ where no heading speaks of people', () => {
    const rows = sheet.rows.map((row, index) => (index === 0 ? ['Nr', ...row.slice(1)] : row));
    expect(guessPlan({ name: '', rows })?.participant).toBe('Nr');
  });

  test('is none where no column holds answers', () => {
    const rows = [
      ['participant', 'village'],
      ['P1', 'Skell'],
    ];
    expect(guessPlan({ name: '', rows })).toBeNull();
  });
});

describe('a table as a talk', () => {
  const plan = guessPlan(sheet)!;

  test('asks the heading and answers with the cell, row after row, empty cells left out', () => {
    const { text, turns, asking } = answersOf(sheet, plan, 'answers')!;
    expect(turns.map(({ speaker, start, end }) => [speaker, text.slice(start, end)])).toEqual([
      [asking, why],
      ['R01', 'The shop is empty by Thursday and nobody comes.'],
      [asking, help],
      ['R01', 'A boat on Fridays, I suppose, if small.'],
      [asking, why],
      ['R02', 'My children live over there in the week now.'],
      [asking, why],
      ['R04', 'Nothing much, since we have a boat.'],
      [asking, help],
      ['R04', 'Somewhere to stay when it is late there.'],
    ]);
  });

  test('has the people who answered, with their attributes', () => {
    expect(answersOf(sheet, plan, 'answers')!.people).toEqual([
      { label: 'R01', name: 'R01', attributes: { Village: 'Skell' } },
      { label: 'R02', name: 'R02', attributes: { Village: 'Brae' } },
      { label: 'R04', name: 'R04', attributes: { Village: 'Skell' } },
    ]);
  });

  test('takes each row for a person where no column names one', () => {
    const { people } = answersOf(sheet, { ...plan, participant: null }, 'answers')!;
    expect(people.map(({ name }) => name)).toEqual([
      'answers, row 2',
      'answers, row 3',
      'answers, row 5',
    ]);
  });

  test('is none where the columns of text hold nothing', () => {
    expect(answersOf(sheet, { ...plan, text: ['no such'] }, 'answers')).toBeNull();
  });
});
