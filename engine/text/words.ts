import type { Span } from '../spans/index.ts';
import type { Language } from './language.ts';
import { isNote } from './notes.ts';

/** A word where it stands, and the form that it is counted under. */
export interface Word extends Span {
  readonly form: string;
}

/*
 * The rules, frozen (preparationMethod counts their versions):
 * - a word is letters with their marks, and figures after the first letter;
 * - apostrophes and hyphens inside it belong to it (can't, o'clock, part-time); dashes do not;
 * - a stammer before a hyphen is left off (th-the -> the, I-I -> I);
 * - the English ending 's is left off (mother's, it's), and so are French and Italian elisions
 *   (l'école -> école);
 * - what begins with a figure is a number and no word, web and mail addresses are neither;
 * - brackets that hold a transcriber's note hold no words ([laughs], (inaudible 14:02)).
 * The form is lower case by Unicode's default mapping, composed (NFC), with straight apostrophes
 * and plain hyphens.
 */
const inWord = String.raw`[\p{L}\p{M}\p{N}\u00ad\u200c\u200d]`;
const wordPattern = String.raw`\p{L}${inWord}*(?:['’ʼ‘\u2010\u2011-][\p{L}\p{N}]${inWord}*)*`;
const numberPattern = String.raw`\p{N}${inWord}*(?:[.,:/'’-]\p{N}${inWord}*)*`;
const bracketPattern = [
  String.raw`\[(?:[^\[\]\n]|\n(?!\s*\n)){0,200}\]`,
  String.raw`\{[^{}\n]{0,120}\}`,
  String.raw`<[^<>\n]{1,80}>`,
  String.raw`\(\([^()\n]{0,200}\)\)`,
  String.raw`\([^()\n]{0,80}\)`,
].join('|');
const addressPattern = String.raw`(?:https?:\/\/|www\.)[^\s<>]+|[\w.+-]{1,64}@[\w-]+(?:\.[\w-]+)+`;

const plainToken = new RegExp(`(${wordPattern})|(${numberPattern})|${bracketPattern}`, 'gu');
const tokenWithAddresses = new RegExp(
  `(?:${addressPattern})|(${wordPattern})|(${numberPattern})|${bracketPattern}`,
  'gu',
);
const address = /@|:\/\/|www\./;

/** Told where each word stands and its form, or null for a number. */
export type WordVisitor = (start: number, end: number, form: string | null) => void;

export type WordScanner = (text: string, span: Span, visit: WordVisitor) => void;

interface Reading {
  readonly form: string;
  /** Code units left off at the beginning and at the end. */
  readonly before: number;
  readonly after: number;
}

/** A scanner remembers the words that it has seen; make one for each language and run. */
export function createWordScanner(language: Language): WordScanner {
  const readings = new Map<string, Reading>();
  return (text, span, visit) => {
    const part = text.slice(span.start, span.end);
    const token = address.test(part) ? tokenWithAddresses : plainToken;
    token.lastIndex = 0;
    for (let match = token.exec(part); match !== null; match = token.exec(part)) {
      const raw = match[1];
      const start = span.start + match.index;
      if (raw !== undefined) {
        let reading = readings.get(raw);
        if (reading === undefined) {
          reading = read(raw, language);
          readings.set(raw, reading);
        }
        visit(start + reading.before, start + raw.length - reading.after, reading.form);
      } else if (match[2] !== undefined) {
        visit(start, start + match[0].length, null);
      } else if (isSpeech(match[0])) {
        // The bracket holds speech: go on behind its opening.
        token.lastIndex = match.index + 1;
      }
    }
  };
}

function isSpeech(bracket: string): boolean {
  return bracket.startsWith('(') && !bracket.startsWith('((') && !isNote(bracket.slice(1, -1));
}

const frenchElision = /^(?:[cdjlmnst]|qu|jusqu|lorsqu|puisqu|quoiqu)['’ʼ‘](?=\p{L})/iu;
const italianElision =
  /^(?:[cdlmnstv]|gl|un|all|dall|dell|nell|sull|coll|quell|quest|bell|anch|dov|com|cos|tutt|senz|nessun)['’ʼ‘](?=\p{L})/iu;

function read(raw: string, language: Language): Reading {
  let before = 0;
  let after = 0;
  if (language === 'eng' && /.['’ʼ‘][sS]$/u.test(raw)) after = 2;
  if (language === 'fra') before = frenchElision.exec(raw)?.[0].length ?? 0;
  if (language === 'ita') before = italianElision.exec(raw)?.[0].length ?? 0;
  before += stammer(raw.slice(before, raw.length - after));
  return { form: formOfSlice(raw.slice(before, raw.length - after)), before, after };
}

/** How much of a word is its own beginning over again: "w-w-we" -> 4. */
function stammer(word: string): number {
  const parts = word.split(/[\u2010\u2011-]/);
  let length = 0;
  for (let i = 0; i + 1 < parts.length; i++) {
    if (!parts[i + 1]!.toLowerCase().startsWith(parts[i]!.toLowerCase())) break;
    length += parts[i]!.length + 1;
  }
  return length;
}

function formOfSlice(slice: string): string {
  return slice
    .toLowerCase()
    .normalize('NFC')
    .replace(/[’ʼ‘]/g, "'")
    .replace(/[\u2010\u2011]/g, '-')
    .replace(/\u00ad/g, '');
}

/** The words of a stretch, in order, without numbers and transcribers' notes. */
export function wordsOf(text: string, span: Span, language: Language = 'eng'): Word[] {
  const words: Word[] = [];
  createWordScanner(language)(text, span, (start, end, form) => {
    if (form !== null) words.push({ start, end, form });
  });
  return words;
}

/** The form that one typed word is counted under, or null where it is no word or several. */
export function formOf(typed: string, language: Language = 'eng'): string | null {
  const words = wordsOf(typed, { start: 0, end: typed.length }, language);
  return words.length === 1 ? words[0]!.form : null;
}
