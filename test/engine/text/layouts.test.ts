import { describe, expect, test } from 'vitest';
import { turnsFromText } from '../../../engine/text/index.ts';

function said(text: string): [string | null, string][] {
  return turnsFromText(text).turns.map(({ speaker, start, end }) => [
    speaker,
    text.slice(start, end),
  ]);
}

describe('turns are told apart where', () => {
  test('a full stop stands behind Q and A', () => {
    expect(said('Q. How was it?\nA. Long.\nQ. And cold?\nA. Yes. A. Smith said so.')).toEqual([
      ['Q', 'How was it?'],
      ['A', 'Long.'],
      ['Q', 'And cold?'],
      ['A', 'Yes. A. Smith said so.'],
    ]);
  });

  test('a dash stands behind the name', () => {
    const text =
      'Ruth – It was long – and cold.\n\nKim – Go on.\n\nRuth – No ferry.\n\nKim – None at all?';
    expect(said(text)).toEqual([
      ['Ruth', 'It was long – and cold.'],
      ['Kim', 'Go on.'],
      ['Ruth', 'No ferry.'],
      ['Kim', 'None at all?'],
    ]);
  });

  test('the name stands alone in a heading', () => {
    const text =
      '## Kim\n\nGo on.\n\n## Ruth\n\nLong.\n\nCold.\n\n## Kim\n\nAnd?\n\n## Ruth\n\nSo.';
    expect(said(text)).toEqual([
      ['Kim', 'Go on.'],
      ['Ruth', 'Long.\n\nCold.'],
      ['Kim', 'And?'],
      ['Ruth', 'So.'],
    ]);
  });

  test('a label takes more than a hundred characters', () => {
    const label =
      'Former Harbour Office Clerk Maria Magdalena Johansdottir and Her Brother Sigurd Magnus of Lower Skellwick Brae Road';
    expect(label.length).toBeGreaterThan(110);
    const text = `INT: How?\n${label}: Well.\nINT: And?\n${label}: So.`;
    expect(said(text).map(([speaker]) => speaker)).toEqual(['INT', label, 'INT', label]);
  });
});

describe('prose is left as it is where', () => {
  test('a dash follows a word at the beginning of a few lines', () => {
    const text = 'Winter – I mean the first one – was long.\n\nWe waited.\n\nBoats – none came.';
    expect(said(text).map(([speaker]) => speaker)).toEqual([null, null, null]);
  });

  test('paragraphs are counted A., B., C.', () => {
    const text = 'A. The first thing.\n\nB. The second thing.\n\nC. The third.\n\nA. Once more.';
    expect(said(text).every(([speaker]) => speaker === null)).toBe(true);
  });
});
