import { strToU8 } from 'fflate';
import { describe, expect, test } from 'vitest';
import { readTranscript } from '../../../main/formats/index.ts';
import { isSrt } from '../../../main/formats/srt.ts';
import { isVtt, parseVtt } from '../../../main/formats/vtt.ts';

async function read(text: string, fileName = 'a.vtt') {
  const result = await readTranscript(new TextEncoder().encode(text), fileName);
  if (!result.ok) throw new Error(result.code);
  const { value } = result;
  return {
    ...value,
    said: value.turns.map((turn) => [
      turn.speaker,
      value.text.slice(turn.start, turn.end),
      turn.startTime,
      turn.endTime,
    ]),
  };
}

const cue = (start: number, text: string): string =>
  `00:00:0${start}.000 --> 00:00:0${start + 1}.000\n${text}\n`;
const vtt = (...cues: string[]): string => `WEBVTT\n\n${cues.join('\n')}`;
const srt = (...lines: string[]): string =>
  lines.map((line, i) => `${i + 1}\n00:00:0${i},000 --> 00:00:0${i},900\n${line}\n`).join('\n');

describe('captions with voice tags', () => {
  test('become a paragraph a turn, spans without the names', async () => {
    const file = await read(
      vtt(
        cue(1, '<v Interviewer>How was it?</v>'),
        cue(2, '<v P09>Long.'),
        cue(3, '<v P09>And\ncold.</v>'),
      ),
    );
    expect(file.format).toBe('vtt');
    expect(file.text).toBe('Interviewer: How was it?\n\nP09: Long. And cold.');
    expect(file.said).toEqual([
      ['Interviewer', 'How was it?', 1000, 2000],
      ['P09', 'Long. And cold.', 2000, 4000],
    ]);
  });

  test('may change speaker inside one cue', async () => {
    const file = await read(vtt(cue(1, '<v Ruth>Yes.</v> <v Tom>No.</v>')));
    expect(file.said.map(([speaker, words]) => [speaker, words])).toEqual([
      ['Ruth', 'Yes.'],
      ['Tom', 'No.'],
    ]);
  });

  test('are not searched for names before colons', async () => {
    const file = await read(
      vtt(cue(1, '<v Ruth>Tom: that was his name.'), cue(2, '<v Ruth>Tom: yes.')),
    );
    expect(file.said).toHaveLength(1);
  });
});

describe('captions without voice tags', () => {
  test('take their speakers from names before colons, until the next', async () => {
    const file = await read(
      srt('INT: How was it?', 'Ruth: Long.', 'She said: no.', 'And cold.', 'INT: So?'),
      'a.srt',
    );
    expect(file.format).toBe('srt');
    expect(file.text).toBe('INT: How was it?\n\nRuth: Long. She said: no. And cold.\n\nINT: So?');
    expect(file.said.map(([speaker, , start, end]) => [speaker, start, end])).toEqual([
      ['INT', 0, 900],
      ['Ruth', 1000, 3900],
      ['INT', 4000, 4900],
    ]);
  });

  test('may name two speakers in one cue', async () => {
    const file = await read(srt('INT: So?\nRuth: Yes.', 'INT: And?\nRuth: No.'), 'a.srt');
    expect(file.said.map(([speaker, words]) => [speaker, words])).toEqual([
      ['INT', 'So?'],
      ['Ruth', 'Yes.'],
      ['INT', 'And?'],
      ['Ruth', 'No.'],
    ]);
  });

  test('have nameless turns at dashes, pauses and nowhere else', async () => {
    const file = await read(srt('- And how is that?\n- Fine.', 'I was out', 'all day.'), 'a.srt');
    expect(file.text).toBe('And how is that?\n\nFine. I was out all day.');
    expect(file.said.map(([speaker]) => speaker)).toEqual([null, null]);
    const paused = await read(vtt(cue(1, 'One.'), cue(2, 'Two.'), cue(8, 'Three.')));
    expect(paused.text).toBe('One. Two.\n\nThree.');
  });

  test('lose the tags that players understand and keep what only looks like one', async () => {
    const file = await read(
      srt('{\\an8}<i>both</i> <font color="red">full</font> time <3'),
      'a.srt',
    );
    expect(file.text).toBe('both full time <3');
  });
});

describe('WebVTT', () => {
  test('is known by its first line alone', () => {
    expect(isVtt('WEBVTT')).toBe(true);
    expect(isVtt('WEBVTT title\n')).toBe(true);
    expect(isVtt('WEBVTTitle\n')).toBe(false);
    expect(isVtt('webvtt\n')).toBe(false);
  });

  test('drops comments, styles, regions and cues whose times break the rules', () => {
    const { cues } = parseVtt(
      [
        'WEBVTT\n',
        'NOTE\nnot said\n',
        'STYLE\n::cue { }\n',
        'REGION\nid:a\n',
        '0:01.000 --> 00:02.000\none digit of minutes\n',
        '00:60.000 --> 01:02.000\nsixty seconds\n',
        '00:01.00 --> 00:02.000\ntwo digits\n',
        '00:01,000 --> 00:02,000\ncomma\n',
        'a\nb\n00:01.000 --> 00:02.000\ntwo lines above\n',
        '00:01.000-->00:02.000\nkept',
      ].join('\n'),
    );
    expect(cues.map((one) => one.lines.map((line) => line.text))).toEqual([['kept']]);
  });

  test('begins a cue at times even where the empty line is missing', () => {
    const { cues } = parseVtt(vtt('00:01.000 --> 00:02.000\none\n00:02.000 --> 00:03.000\ntwo\n'));
    expect(cues.map((one) => one.lines[0]!.text)).toEqual(['one', 'two']);
  });

  test('resolves character references once and leaves what is none', () => {
    const { cues } = parseVtt(vtt(cue(1, '&amp;lt; &#233; &#xE9; &nbsp;&unknown; &#0; R&D')));
    expect(cues[0]!.lines[0]!.text).toBe('&lt; é é \u00a0&unknown; &#0; R&D');
  });

  test('keeps what its header says as details', () => {
    const { details } = parseVtt('WEBVTT - interview 1\nLanguage: en\n\n');
    expect(details).toEqual([
      { name: '', value: 'interview 1' },
      { name: 'Language', value: 'en' },
    ]);
  });

  test('without a word in it is no transcript', async () => {
    const bytes = new TextEncoder().encode(vtt(cue(1, '<v Ruth></v>'), cue(2, ' ')));
    expect(await readTranscript(bytes, 'a.vtt')).toEqual({
      ok: false,
      code: 'no speech',
      format: 'vtt',
    });
  });
});

describe('SubRip', () => {
  test('is known by a number and times', () => {
    expect(isSrt('1\n00:00:01,000 --> 00:00:02,000\nYes.')).toBe(true);
    expect(isSrt('\n1\n00:00:01.000 --> 00:00:02.000\nYes.')).toBe(true);
    expect(isSrt('1\nYes.')).toBe(false);
  });

  test('keeps words behind an empty line inside a caption', async () => {
    const text =
      '1\n00:00:01,000 --> 00:00:02,000\nRuth: one\n\ntwo\n\n2\n00:00:03,000 --> 00:00:04,000\nTom: three';
    expect((await read(text, 'a.srt')).text).toBe('Ruth: one two\n\nTom: three');
  });
});

describe('rolling captions', () => {
  test('say once what the next cue shows again', async () => {
    const lines = ['it was a long winter', 'and nobody came', 'for eleven days', 'then the boat'];
    const cues = lines.map(
      (line, index) =>
        `00:0${index}.000 --> 00:0${index + 1}.000\n${index === 0 ? '' : `${lines[index - 1]}\n`}${line}\n`,
    );
    const result = await readTranscript(strToU8(`WEBVTT\n\n${cues.join('\n')}`), 'a.vtt');
    expect(result.ok && result.value.text).toBe(lines.join(' '));
  });

  test('elsewhere what is said twice stands twice', async () => {
    const cues = ['Yes.', 'Yes.', 'No.', 'So it was.', 'Then we left.'].map(
      (line, index) => `00:0${index}.000 --> 00:0${index + 1}.000\n${line}\n`,
    );
    const result = await readTranscript(strToU8(`WEBVTT\n\n${cues.join('\n')}`), 'a.vtt');
    expect(result.ok && result.value.text).toBe('Yes. Yes. No. So it was. Then we left.');
  });
});
