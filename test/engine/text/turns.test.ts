import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { labelledLines, turnsFromText } from '../../../engine/text/index.ts';

type Said = readonly [speaker: string | null, words: string, seconds?: number];

function read(text: string): { details: string[]; turns: Said[] } {
  const { details, turns } = turnsFromText(text);
  return {
    details: details.map(({ name, value }) => (name === '' ? value : `${name}=${value}`)),
    turns: turns.map((turn) => {
      const words = text.slice(turn.start, turn.end);
      return turn.startTime === null
        ? [turn.speaker, words]
        : [turn.speaker, words, turn.startTime / 1000];
    }),
  };
}

function turns(text: string): Said[] {
  return read(text).turns;
}

describe('a turn begins at', () => {
  test('a name and a colon', () => {
    expect(turns('Maria: Hello.\nTom: Hi.\nMaria: So?\nTom: Well.')).toEqual([
      ['Maria', 'Hello.'],
      ['Tom', 'Hi.'],
      ['Maria', 'So?'],
      ['Tom', 'Well.'],
    ]);
  });

  test.each([
    '[00:12:31] Maria: text\n[00:12:35] Tom: other',
    'Maria [00:12:31]: text\nTom [00:12:35]: other',
    '(12:31) Maria: text\n(12:35) Tom: other',
    '00:12:31 Maria: text\n00:12:35 Tom: other',
    '12:31 - Maria: text\n12:35 - Tom: other',
    'Maria (12:31): text\nTom (12:35): other',
    'Maria: [12:31] text\nTom: [12:35] other',
    'Maria  12:31\ntext\n\nTom  12:35\nother',
    'Maria\t12:31\ntext\nTom\t12:35\nother',
    'Maria [00:12:31]\ntext\n\nTom [00:12:35]\nother',
    '12:31 Maria\ntext\n\n12:35 Tom\nother',
    '[00:12:31]\nMaria: text\n[00:12:35]\nTom: other',
    '**Maria** [12:31]: text\n\n**Tom** [12:35]: other',
  ])('a name with a time: %j', (text) => {
    expect(turns(text)).toEqual([
      ['Maria', 'text', 751],
      ['Tom', 'other', 755],
    ]);
  });

  test('a time range gives the end as well', () => {
    const text = '[00:01 - 00:04] Maria: text\n[00:05 - 00:07] Tom: other';
    expect(turnsFromText(text).turns.map((turn) => [turn.startTime, turn.endTime])).toEqual([
      [1000, 4000],
      [5000, 7000],
    ]);
  });

  test.each([
    'Maria:\nfirst line\nsecond line\n\nTom:\nother',
    '**Maria:** first line\nsecond line\n\n**Tom:** other',
    '**Maria**: first line\nsecond line\n\n**Tom**: other',
    'Maria:\u00a0first line\nsecond line\n\nTom:\tother',
    'Maria : first line\nsecond line\n\nTom : other',
    '- Maria: first line\nsecond line\n\n- Tom: other',
    '1. Maria: first line\nsecond line\n\n2. Tom: other',
    '[Maria]: first line\nsecond line\n\n[Tom]: other',
    '  Maria:   first line\nsecond line  \n\n   Tom: other  ',
  ])('a label in the shape of %j', (text) => {
    expect(turns(text)).toEqual([
      ['Maria', 'first line\nsecond line'],
      ['Tom', 'other'],
    ]);
  });

  test.each([
    'P07',
    'INT',
    'I',
    'R',
    'Speaker 2',
    'Maria Lopez',
    'Interviewer 1',
    'Dr. Falk',
    'José Núñez-O’Brien',
    'Anne-Marie',
    'Jean de la Croix',
    'M.L.',
    'Ruth & Tom',
    'Ruth (wife)',
    'PARTICIPANT_3',
    'Юлия',
    'int',
    'p7',
  ])('the label %s', (label) => {
    const text = `${label}: Hello there.\nZoë: Hi.\n${label}: So?\nZoë: Well.\n${label}: Right.\nZoë: Mm.`;
    expect(turns(text).map(([speaker]) => speaker)).toEqual([
      label,
      'Zoë',
      label,
      'Zoë',
      label,
      'Zoë',
    ]);
  });

  test('names written small, where all are', () => {
    expect(turns('maria: hello\ntom: hi\nmaria: so\ntom: well\nmaria: mm')).toHaveLength(5);
  });

  test('a label with a tab, as a table gives it', () => {
    const text = 'INT\tHow?\nP07\tWell.\nINT\tAnd?\nP07\tSo.';
    expect(turns(text)).toEqual([
      ['INT', 'How?'],
      ['P07', 'Well.'],
      ['INT', 'And?'],
      ['P07', 'So.'],
    ]);
  });

  test('the labels of a file with one turn each', () => {
    expect(turns('Interviewer: hello?\nAnna: hi there')).toEqual([
      ['Interviewer', 'hello?'],
      ['Anna', 'hi there'],
    ]);
    expect(turns('Interviewer: Hello\nAnna: Hi')).toHaveLength(2);
    expect(turns('Maria: hello\nJohn: hi there')).toHaveLength(2);
    expect(turns('Interviewer  0:01\nhello?\n\nAnna  0:03\nhi there')).toEqual([
      ['Interviewer', 'hello?', 1],
      ['Anna', 'hi there', 3],
    ]);
    expect(turns('Maria Lopez  0:05\nHello.\n\nJane Doe  0:25\nWhat?')).toHaveLength(2);
  });

  test('a speaker who comes in once', () => {
    expect(
      turns('INT: So?\nAnna: Yes.\nINT: And?\nAnna: No.\nBen: I agree with Anna.\nINT: Good.'),
    ).toContainEqual(['Ben', 'I agree with Anna.']);
    expect(turns('INT: So?\nP07: Yes.\nand on\nINT: And?\nP07: No.\nP08: I agree.')).toContainEqual(
      ['P08', 'I agree.'],
    );
  });
});

describe('no turn begins at', () => {
  test.each([
    'She said: no',
    'At 10:30 we left',
    '10:30 was when we left',
    'Note: this happened before.',
    'the thing is: I could not',
    'Remember: no boat on Thursday.',
    'And he said to me: Maria, go home.',
    'My mother: she was the one.',
    'https://example.org: that was it',
    'Monday: nothing. Tuesday: nothing.',
    'Boat: that is what I said, the boat.',
    'Norrey: the village, I mean.',
  ])('%j inside speech', (line) => {
    const text = `INT: How was it?\nP07: It was a long day on the boat,\n${line}\nand then it was over.\nINT: And then?\nP07: Home.`;
    expect(turns(text).map(([speaker]) => speaker)).toEqual(['INT', 'P07', 'INT', 'P07']);
    expect(turns(text)[1]![1]).toBe(
      `It was a long day on the boat,\n${line}\nand then it was over.`,
    );
  });

  test.each(['Norrey: the village, I mean.', 'Reason: there was none.'])(
    '%j in a transcript whose turns follow empty lines',
    (line) => {
      const text = `INT: How?\n\nP07: Long,\n${line}\n\nINT: And?\n\nP07: Home.`;
      expect(turns(text)).toHaveLength(4);
    },
  );

  test('a word that the text also writes small', () => {
    const text = 'INT: So?\nAnna: No boat came.\nBoat: none.\nINT: And?\nAnna: No.';
    expect(turns(text)).toHaveLength(4);
  });

  test('a paragraph of a turn that has several', () => {
    const text =
      'INT: How?\n\nP07: Long.\n\nNorrey: the village, I mean.\n\nAnd home.\n\nINT: So?\n\nP07: Mm.';
    expect(turns(text)).toHaveLength(4);
  });

  test('a colon where every turn has its time', () => {
    const text =
      '[00:01] INT: How?\n[00:05] P07: Long.\nNorrey: the village, I mean.\n[00:09] INT: And?\n[00:12] P07: Home.';
    expect(turns(text)).toHaveLength(4);
  });

  test('a colon where names stand above the words', () => {
    const text =
      'Maria Lopez  0:05\nWe left.\nTom: he was there too.\nAt 10:30\n\nTom Vass  0:25\nAnd?\n\nMaria Lopez  0:31\nYes.';
    expect(turns(text).map(([speaker]) => speaker)).toEqual([
      'Maria Lopez',
      'Tom Vass',
      'Maria Lopez',
    ]);
  });

  test('a label in the middle of a line', () => {
    expect(turns('INT: And he?\nP07: He said Tom: no. INT: yes.\nINT: So?\nP07: Mm.')).toHaveLength(
      4,
    );
  });
});

describe('lines before the first turn', () => {
  test('are details, not speech', () => {
    const text =
      'Interview with a crofter\nDate: 3 May\nParticipant: P07\nInterviewer: Jane Doe\n\nInterviewer: How?\nP07: Well.\nInterviewer: So?\nP07: Mm.';
    expect(read(text)).toEqual({
      details: [
        'Interview with a crofter',
        'Date=3 May',
        'Participant=P07',
        'Interviewer=Jane Doe',
      ],
      turns: [
        ['Interviewer', 'How?'],
        ['P07', 'Well.'],
        ['Interviewer', 'So?'],
        ['P07', 'Mm.'],
      ],
    });
  });

  test.each([
    'Date: 3 May\nInterviewer: Jane Doe\nInterviewer: How?\nP07: Well.',
    'Place: the pier\nInterviewer: Jane Doe\nInterviewer: How?\nP07: Well.',
    'Transcript: P07\nInterviewer: Jane Doe\n\nInterviewer: How?\n\nP07: Well.',
    'Interviewer: Jane Doe\nDate: 3 May 2026, 10:30\n\nInterviewer: How?\nP07: Well.',
    'Participant: P07 (female, 47)\nInterviewer: Jane Doe\nDate: 3 May\n\nInterviewer: How?\nP07: Well.',
    '# Interview\n\n**Date:** 3 May\n**Interviewer:** Jane Doe\n\n**Interviewer:** How?\n\n**P07:** Well.',
  ])('%j', (text) => {
    expect(turns(text)).toEqual([
      ['Interviewer', 'How?'],
      ['P07', 'Well.'],
    ]);
    expect(read(text).details).toContain('Interviewer=Jane Doe');
  });

  test('may name the labels that follow', () => {
    const text =
      'Interviewer: Jane\nParticipant: Ruth\n\nJane: How?\nRuth: Well.\nJane: So?\nRuth: Mm.';
    expect(read(text).details).toEqual(['Interviewer=Jane', 'Participant=Ruth']);
    expect(turns(text)).toHaveLength(4);
  });

  test('may give a single name', () => {
    const text = 'Date: 3 May\nInterviewer: Jane\nInterviewer: How?\nP07: Well.';
    expect(read(text).details).toEqual(['Date=3 May', 'Interviewer=Jane']);
  });

  test('a first turn that is one word is speech', () => {
    expect(turns('Date: 3 May\n\nInterviewer: Hello\nP07: Hello')).toHaveLength(2);
  });

  test('may be all there is', () => {
    expect(read('Date: 3 May\nPlace: the pier\nTranscript: P07')).toEqual({
      details: ['Date=3 May', 'Place=the pier', 'Transcript=P07'],
      turns: [],
    });
  });
});

describe('without labels', () => {
  test('each paragraph is a turn', () => {
    expect(turns('I went out.\nIt rained.\n\nThen I came home: wet.')).toEqual([
      [null, 'I went out.\nIt rained.'],
      [null, 'Then I came home: wet.'],
    ]);
    expect(turns('I went out.\nIt rained.')).toEqual([
      [null, 'I went out.'],
      [null, 'It rained.'],
    ]);
    expect(turns('I went out and\nit rained until\nI was home.')).toEqual([
      [null, 'I went out and\nit rained until\nI was home.'],
    ]);
  });

  test('a time in front of a paragraph is its time', () => {
    expect(turns('[00:01] I went.\n\n[01:05] It rained.')).toEqual([
      [null, 'I went.', 1],
      [null, 'It rained.', 65],
    ]);
  });

  test('headings are details', () => {
    expect(read('Date: 3 May\n\nI went out.').details).toEqual(['Date=3 May']);
  });

  test('one colon in prose makes no speaker', () => {
    const prose = 'We had a hard winter, all of us, with the boat away. '.repeat(20);
    expect(
      turns(`${prose}\n\nMaria Lopez: a name I will not forget.`).map(([speaker]) => speaker),
    ).toEqual([null, null]);
  });
});

test('spans hold no label, no time and no white space at their edges', () => {
  const label = fc.constantFrom('INT', 'P07', 'Maria Lopez', 'Dr. Falk', 'Zoë');
  const time = fc.constantFrom('', '[00:01] ', '1:02:03 ');
  const words = fc.constantFrom(
    'She said: no.',
    'At 10:30.',
    '“Yes”\nand no',
    'a\n\nb',
    '\u00a0é ',
    '',
  );
  fc.assert(
    fc.property(fc.array(fc.tuple(time, label, words), { maxLength: 12 }), (said) => {
      const text = said.map(([t, l, w]) => `${t}${l}: ${w}\n`).join('\n');
      let last = 0;
      for (const turn of turnsFromText(text).turns) {
        const words = text.slice(turn.start, turn.end);
        expect(turn.start).toBeGreaterThanOrEqual(last);
        expect(words).toBe(words.trim());
        expect(words).not.toBe('');
        last = turn.end;
      }
    }),
  );
});

test('any text gives turns in order, whatever is in it', () => {
  const piece = fc.oneof(
    fc.constantFrom('\n', ':', ' ', '[00:01]', 'INT', '**', '\t', '(', ')', '10:30', '\n\n', '#'),
    fc.string({ unit: 'grapheme', maxLength: 5 }),
  );
  fc.assert(
    fc.property(fc.array(piece, { maxLength: 60 }), (pieces) => {
      const text = pieces.join('');
      let last = 0;
      for (const { start, end } of turnsFromText(text).turns) {
        expect(last <= start && start < end && end <= text.length).toBe(true);
        last = end;
      }
    }),
  );
});

test('lines of captions are labelled by the same rules', () => {
  const lines = ['INT: How?', '', 'P07: Well,', 'she said: no.', '', 'INT: So?', '', 'P07:'];
  expect(labelledLines(lines)).toEqual([
    { label: 'INT', speech: 5 },
    null,
    { label: 'P07', speech: 5 },
    null,
    null,
    { label: 'INT', speech: 5 },
    null,
    { label: 'P07', speech: 4 },
  ]);
});
