import { mkdirSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { Document, Packer, Paragraph, TextRun } from 'docx';

/** Four things that people talk about, each with words of its own. */
export const topics = {
  garden: 'garden soil compost seedlings tomatoes bees allotment harvest weeding spade greenhouse',
  clinic: 'clinic nurse appointment waiting doctor prescription pain surgery referral ward insulin',
  bus: 'bus timetable driver stop late connection ticket fare route depot shelter',
  children: 'grandchildren school pickup homework toddler lunchbox playground teacher swimming',
} as const;

export type Topic = keyof typeof topics;
export const topicNames = Object.keys(topics) as Topic[];

const openings = [
  'and then I thought about the',
  'you know, it was the',
  'we had “that” thing with the',
  'she said it’s about the',
  'honestly the',
  'so there was a',
];

/** A talk that can be told again: the same seed gives the same words. */
export class Talk {
  #state: number;

  constructor(seed: number) {
    this.#state = seed;
  }

  pick<Item>(items: readonly Item[]): Item {
    this.#state = (Math.imul(this.#state, 1_103_515_245) + 12_345) & 0x7fffffff;
    return items[(this.#state >> 8) % items.length];
  }

  sentence(topic: Topic): string {
    const words = topics[topic].split(' ');
    const parts = Array.from({ length: 3 + this.pick([0, 1, 2]) }, () => {
      return `${this.pick(openings)} ${this.pick(words)}`;
    });
    const text = parts.join(' ');
    return `${text[0].toUpperCase()}${text.slice(1)}.`;
  }

  answer(topic: Topic): string {
    return Array.from({ length: this.pick([4, 5, 6, 7]) }, () => this.sentence(topic)).join(' ');
  }

  /** Questions by the first, answers by the others in turn. */
  turns(names: readonly string[], count: number): [string, string][] {
    const [asking, ...answering] = names;
    return Array.from({ length: count }, (_, i): [string, string] => {
      const topic = this.pick(topicNames);
      return i % 2 === 0
        ? [asking, `Could you tell me about the ${this.pick(topics[topic].split(' '))}?`]
        : [answering[((i - 1) / 2) % answering.length], this.answer(topic)];
    });
  }
}

const labelled = (turns: readonly [string, string][], lineEnd = '\n'): string =>
  turns.map(([name, text]) => `${name}: ${text}${lineEnd}${lineEnd}`).join('');

const at = (seconds: number, decimal: string): string =>
  `00:${String(Math.floor(seconds / 60)).padStart(2, '0')}:${String(seconds % 60).padStart(2, '0')}${decimal}000`;

function windows1252(text: string): Buffer {
  const own: Record<string, number> = { '“': 0x93, '”': 0x94, '’': 0x92 };
  return Buffer.from([...text].map((letter) => own[letter] ?? letter.charCodeAt(0)));
}

/** A document whose speakers stand in bold before their talk. */
export async function docx(turns: readonly [string, string][]): Promise<Uint8Array> {
  const children = turns.map(
    ([name, text]) =>
      new Paragraph({
        children: [new TextRun({ text: `${name}: `, bold: true }), new TextRun(text)],
      }),
  );
  return new Uint8Array(await Packer.toBuffer(new Document({ sections: [{ children }] })));
}

/** Writes files, by their places in a folder. */
export function write(folder: string, files: Record<string, string | Uint8Array>): void {
  for (const [place, content] of Object.entries(files)) {
    mkdirSync(dirname(join(folder, place)), { recursive: true });
    writeFileSync(join(folder, place), content);
  }
}

/** Transcripts in every format that is read, in the layouts and encodings that come in. */
export async function interviews(): Promise<Record<string, string | Uint8Array>> {
  const talk = new Talk(7);
  const captions = talk.turns(['INT', 'P06'], 20);
  const subtitles = talk.turns(['INT', 'P07', 'P08'], 20);
  return {
    'one.txt': `Title: A study\nDate: 2024-03-01\n\n${labelled(talk.turns(['INT', 'P01'], 24))}`,
    'two crlf.txt': labelled(talk.turns(['Interviewer', 'Maria López', 'José'], 24), '\r\n'),
    'three 16.txt': Buffer.from(`\ufeff${labelled(talk.turns(['INT', 'P03'], 24))}`, 'utf16le'),
    'four 1252.txt': windows1252(labelled(talk.turns(['INT', 'Zoë'], 24))),
    'five 🌳.md': `# Interview\n\n${talk
      .turns(['INT', 'P05'], 24)
      .map(([name, text]) => `**${name}:** ${text} 😀\n\n`)
      .join('')}`,
    'more/a/talk.vtt': `WEBVTT\n\n${captions
      .map(
        ([name, text], i) =>
          `${at(8 * i, '.')} --> ${at(8 * i + 8, '.')}\n<v ${name}>${text}</v>\n\n`,
      )
      .join('')}`,
    'more/b/talk.srt': subtitles
      .map(
        ([name, text], i) =>
          `${i + 1}\n${at(8 * i, ',')} --> ${at(8 * i + 8, ',')}\n${name}: ${text}\n\n`,
      )
      .join(''),
    'more/talk.txt': talk
      .turns(['INT', 'P09'], 20)
      .map(([name, text], i) => `[${at(10 * i, '.').slice(0, 8)}] ${name}: ${text}\n\n`)
      .join(''),
    'more/a/stem.txt': talk
      .turns(['Interviewer', 'Participant'], 20)
      .map(([name, text], i) => `${name}  0:${String(i).padStart(2, '0')}\n${text}\n\n`)
      .join(''),
    'more/a/stem.docx': await docx(talk.turns(['INT', 'P10'], 20)),
    'formula.txt': labelled([
      ['INT', 'What did you plant?'],
      ['P11', `=SUM(A1) is what I wrote. ${talk.answer('garden')}`],
      ['INT', 'And what else was there?'],
      ['P11', `-5 degrees it was in the greenhouse. ${talk.answer('garden')}`],
      ['INT', 'And what more was there?'],
      ['P11', `@home we had soil, "quoted", and commas. ${talk.answer('garden')}`],
    ]),
    'uncounted.txt': labelled([
      ['INT', 'How would you put it yourself, all in all?'],
      ['P12', 'I am what I am and that is that and it was what it was for all of us.'],
    ]),
  };
}

/** Files that no transcript can be made of, with the code of the reason. */
export async function unreadable(): Promise<Record<string, [string | Uint8Array, string]>> {
  const talk = new Talk(11);
  const random = Uint8Array.from({ length: 4000 }, () =>
    talk.pick(Array.from({ length: 256 }, (_, byte) => byte)),
  );
  return {
    'broken.docx': [(await docx(talk.turns(['INT', 'P20'], 6))).subarray(0, 3000), 'broken file'],
    'empty.txt': ['', 'empty file'],
    'picture.png': [Buffer.from('\x89PNG\r\n\x1a\n0000', 'latin1'), 'unknown format'],
    'random.txt': [random, 'not text'],
    'white.txt': [' \n\n ', 'empty file'],
  };
}
