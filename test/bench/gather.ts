import { strToU8, zipSync } from 'fflate';
import PorterStemmer from 'natural/lib/natural/stemmers/porter_stemmer.js';
import { createGenerator } from '../../engine/numbers/index.ts';
import {
  defaultTextSettings,
  guessInterviewers,
  prepare,
  type TranscriptText,
} from '../../engine/text/index.ts';
import { readTranscript } from '../../main/formats/index.ts';
import { wordLists } from '../../main/word-lists.ts';
import { keep, machine, median, say, table } from './machine.ts';

/*
 * Reading a million words in 120 transcripts and preparing them, beside what a plain tokenizer and
 * stemmer takes for the same words in the same run.
 */
const quick = process.argv.includes('--quick');
const transcripts = quick ? 12 : 120;
const wordsEach = 8_334;
const rounds = quick ? 1 : 3;

const random = createGenerator(7);
const draw = (below: number): number => Math.floor(random.uniform() * below);
const syllables = 'ka ro min tel sa ver lo pin dar ness ing er al to mu shen wick port'.split(' ');
const vocabulary = Array.from({ length: 9_000 }, () =>
  Array.from({ length: 1 + draw(4) }, () => syllables[draw(syllables.length)]!).join(''),
);
// Few words often, many seldom, as in talk.
const word = (): string => vocabulary[Math.floor(vocabulary.length * random.uniform() ** 3)]!;

function interview(number: number): string[] {
  const lines: string[] = [];
  for (let words = 0; words < wordsEach;) {
    const length = 30 + draw(120);
    const spoken = Array.from({ length }, (_, i) => (i % 14 === 13 ? `${word()}.` : word()));
    lines.push('Interviewer: And what happened then, if I may ask?');
    lines.push(`P${String(number).padStart(3, '0')}: ${spoken.join(' ')}.`);
    words += length + 8;
  }
  return lines;
}

const typesXml =
  '<?xml version="1.0"?><Types xmlns="http://schemas.openxmlformats.org/package/2006/content-types"><Default Extension="xml" ContentType="application/xml"/><Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/><Override PartName="/word/document.xml" ContentType="application/vnd.openxmlformats-officedocument.wordprocessingml.document.main+xml"/></Types>';
const relsXml =
  '<?xml version="1.0"?><Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Id="r1" Type="http://schemas.openxmlformats.org/officeDocument/2006/relationships/officeDocument" Target="word/document.xml"/></Relationships>';

function docx(lines: readonly string[]): Uint8Array {
  const paragraphs = lines
    .map((line) => `<w:p><w:r><w:t xml:space="preserve">${line}</w:t></w:r></w:p>`)
    .join('');
  return zipSync({
    '[Content_Types].xml': strToU8(typesXml),
    '_rels/.rels': strToU8(relsXml),
    'word/document.xml': strToU8(
      `<?xml version="1.0"?><w:document xmlns:w="http://schemas.openxmlformats.org/wordprocessingml/2006/main"><w:body>${paragraphs}</w:body></w:document>`,
    ),
  });
}

const talks = Array.from({ length: transcripts }, (_, index) => interview(index + 1));
const texts = talks.map((lines) => lines.join('\n'));
const words = texts.reduce((sum, text) => sum + text.split(/\s+/u).length, 0);
const files = {
  '.docx': talks.map(docx),
  '.txt': texts.map((text) => strToU8(text)),
} as const;

async function read(ending: keyof typeof files): Promise<TranscriptText[]> {
  const result: TranscriptText[] = [];
  for (const [index, bytes] of files[ending].entries()) {
    const name = `${index}${ending}`;
    const got = await readTranscript(bytes, name);
    if (!got.ok) throw new Error(`gather: ${name}: ${got.code}`);
    const { text, turns } = got.value;
    const roles = Object.fromEntries(
      guessInterviewers(text, turns).map((label) => [label, 'interviewer'] as const),
    );
    result.push({ id: name, text, turns, roles, participants: {} });
  }
  return result;
}

function yardstick(): number {
  let stems = 0;
  for (const text of texts) {
    for (const token of text.toLowerCase().match(/[\p{L}\p{M}\p{N}'’]+/gu) ?? []) {
      if (PorterStemmer.stem(token) !== '') stems++;
    }
  }
  return stems;
}

async function seconds(work: () => unknown): Promise<number> {
  const began = performance.now();
  await work();
  return (performance.now() - began) / 1000;
}

say(machine());
say(`${transcripts} transcripts, ${words} words`);
const rows: string[][] = [];
const figures: Record<string, number[]> = { yardstick: [] };
for (let round = 0; round < rounds; round++) {
  figures['yardstick']!.push(await seconds(yardstick));
  for (const ending of ['.docx', '.txt'] as const) {
    let got: TranscriptText[] = [];
    (figures[`read ${ending}`] ??= []).push(await seconds(async () => (got = await read(ending))));
    (figures[`prepare ${ending}`] ??= []).push(
      await seconds(() => prepare(got, defaultTextSettings, wordLists, [])),
    );
  }
}
const unit = median(figures['yardstick']!);
for (const [name, times] of Object.entries(figures)) {
  rows.push([name, `${median(times).toFixed(2)} s`, (median(times) / unit).toFixed(2)]);
}
say(table(['', 'median', 'of the yardstick'], rows));
const peak = process.resourceUsage().maxRSS / 1024;
say(`Peak memory: ${Math.round(peak)} MB, the files themselves included`);
keep('gather', { machine: machine(), transcripts, words, figures, peak });
