import { describe, expect, test } from 'vitest';
import { transcriptNames } from '../../../main/gather/names.ts';
import { participantName } from '../../../main/gather/participants.ts';
import { interviewersAmong } from '../../../main/gather/gather.ts';

const named = (names: readonly string[], taken: readonly string[] = []): string[] =>
  transcriptNames(
    names.map((name, i) => ({ name, hash: String.fromCharCode(122 - i) })),
    new Set(taken),
  );

describe('what a transcript is called', () => {
  test('its file without the ending, with the folders that it lies in', () => {
    expect(named(['P01.txt', 'north/P02.docx', 'no ending', 'a.b.vtt'])).toEqual([
      'P01',
      'north/P02',
      'no ending',
      'a.b',
    ]);
  });

  test('with the ending where two would be the same', () => {
    expect(named(['P01.txt', 'P01.docx', 'P02.txt'])).toEqual(['P01.txt', 'P01.docx', 'P02']);
    expect(named(['P01.txt'], ['P01'])).toEqual(['P01.txt']);
  });

  test('capitals alone make no other name: many drives take them for the same', () => {
    expect(named(['p01.txt', 'P01.docx'])).toEqual(['p01.txt', 'P01.docx']);
    expect(named(['p01.txt', 'P01.txt'])).toEqual(['p01.txt (2)', 'P01.txt']);
  });

  test('with a number where they still are, by the hash of what is in them', () => {
    const files = [
      { name: 'P01.txt', hash: 'bb' },
      { name: 'P01.txt', hash: 'aa' },
    ];
    expect(transcriptNames(files, new Set())).toEqual(['P01.txt (2)', 'P01.txt']);
    expect(transcriptNames([...files].reverse(), new Set())).toEqual(['P01.txt', 'P01.txt (2)']);
  });

  test('never by nothing', () => {
    expect(named(['.txt', 'a/.txt'])).toEqual(['.txt', 'a/.txt']);
  });

  test('each once, whatever they are', () => {
    const names = named(['a.txt', 'a.txt.txt', 'A.TXT', 'a', 'a (2).txt', 'a.txt']);
    expect(new Set(names.map((name) => name.toLowerCase())).size).toBe(names.length);
  });
});

describe('who a label stands for', () => {
  test('a name or a code is the same person everywhere', () => {
    for (const label of ['P07', 'Maria Lopez', 'MW']) {
      expect(participantName(label, 'one', 1)).toBe(label);
    }
  });

  test('a role is a person of this transcript', () => {
    for (const label of ['Participant', 'SPEAKER 2', 'Befragte', 'B', 'respondent #1']) {
      expect(participantName(label, 'one', 1)).toBe('one');
      expect(participantName(label, 'one', 2)).toBe(`one, ${label}`);
    }
    expect(participantName(null, 'one', 1)).toBe('one');
  });
});

describe('interviewers that were named', () => {
  test('are found whatever their capitals, a colon or the way letters are composed', () => {
    const labels = ['INT', 'Zoe\u0308', 'P01', null];
    expect(interviewersAmong(labels, ['int:', 'Zo\u00eb'])).toEqual(new Set(['INT', 'Zoe\u0308']));
  });

  test('null where this transcript has none of them', () => {
    expect(interviewersAmong(['P01', null], ['INT'])).toBeNull();
    expect(interviewersAmong(['P01'], [])).toBeNull();
  });
});
