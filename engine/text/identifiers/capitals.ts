import type { Span, Turn } from '../../spans/index.ts';
import { guessLanguage } from '../guess-language.ts';
import { cuesOf, isParticle, type Cues } from './cues.ts';
import { nameKeyOf } from './lists.ts';

/** A capitalised word that may be part of a name; the span leaves an ending 's out. */
export interface Capital extends Span {
  /** As `nameKeyOf` gives it. */
  readonly key: string;
  readonly possessive: boolean;
  readonly allCapitals: boolean;
}

/** Capitalised words that follow one another. */
export interface Run {
  readonly words: readonly Capital[];
  /** Whether the first of them would be written with a capital anyway. */
  readonly opens: boolean;
  /** Words in front of it in its sentence, the nearest first, as keys; at most four. */
  readonly before: readonly string[];
  /** Whether a comma stands between it and the nearest word before. */
  readonly comma: boolean;
  /** The nearest word behind it. */
  readonly after: string;
  /** Whether it stands outside what anybody says: a label, a heading. */
  readonly outside: boolean;
  /** ISO 639-3: of the turn, where somebody changes languages. */
  readonly language: string;
}

interface Token extends Span {
  readonly key: string;
  readonly capital: boolean;
  /** What stands between it and the token before. */
  readonly gap: string;
  readonly raw: string;
}

const word = /\p{L}[\p{L}\p{M}\p{N}]*(?:['’‘ʼ-][\p{L}\p{M}\p{N}]+)*/gu;
const contraction = /['’‘ʼ](?:s|ll|d|ve|re)$/u;

/** Capitalised runs of a text, and how often each word is written small. */
export function capitalRuns(
  text: string,
  turns: readonly Turn[],
  language: string,
): { readonly runs: Run[]; readonly small: ReadonlyMap<string, number> } {
  const small = new Map<string, number>();
  const runs: Run[] = [];
  let from = 0;
  for (const turn of turns) {
    if (turn.start > from) collect(text, from, turn.start, true, language, small, runs);
    const spoken = guessLanguage(text.slice(turn.start, turn.end), 20) ?? language;
    collect(text, turn.start, turn.end, false, spoken, small, runs);
    from = turn.end;
  }
  if (from < text.length) collect(text, from, text.length, true, language, small, runs);
  return { runs, small };
}

function collect(
  text: string,
  start: number,
  end: number,
  outside: boolean,
  language: string,
  small: Map<string, number>,
  runs: Run[],
): void {
  const cues = cuesOf(language);
  const tokens = tokensOf(text, start, end);
  let boundary = 0;
  for (let at = 0; at < tokens.length; at++) {
    const token = tokens[at]!;
    if (at === 0 || isBoundary(tokens[at - 1]!, token, cues, outside)) boundary = at;
    if (!token.capital) {
      // What stands small in an address says nothing about the word.
      if (!isInAddress(text, token)) small.set(token.key, (small.get(token.key) ?? 0) + 1);
      continue;
    }
    const words: Capital[] = [capitalOf(token)];
    let last = at;
    for (;;) {
      const next = nextInRun(tokens, last, cues, outside);
      if (next === null || words.at(-1)!.possessive) {
        const further = next === null ? undefined : tokens[next]!;
        // "Mackay's Stores" is one name, "Ruth's Land Rover" is none.
        if (further === undefined || !cues.organisationWords.has(further.key)) break;
      }
      if (next === null) break;
      words.push(capitalOf(tokens[next]!));
      last = next;
    }
    const before: string[] = [];
    for (let back = at - 1; back >= boundary && before.length < 4; back--) {
      before.push(tokens[back]!.key);
    }
    const following = tokens[last + 1];
    runs.push({
      words,
      opens: boundary === at,
      before,
      comma: token.gap.includes(','),
      after: following === undefined || /[.!?…:;]/u.test(following.gap) ? '' : following.key,
      outside,
      language,
    });
    at = last;
  }
}

function isInAddress(text: string, { start, end }: Span): boolean {
  return (
    /[@./_]/u.test(text.charAt(start - 1)) || /^(?:[@/_]|\.\p{L})/u.test(text.slice(end, end + 2))
  );
}

function tokensOf(text: string, start: number, end: number): Token[] {
  const part = text.slice(start, end);
  const tokens: Token[] = [];
  let reached = 0;
  word.lastIndex = 0;
  for (let match = word.exec(part); match !== null; match = word.exec(part)) {
    const raw = match[0];
    tokens.push({
      start: start + match.index,
      end: start + match.index + raw.length,
      key: nameKeyOf(raw),
      capital: /^\p{Lu}/u.test(raw) || /^(?:[dl]|qu|al|el)['’-]\p{Lu}/u.test(raw),
      gap: part.slice(reached, match.index),
      raw,
    });
    reached = match.index + raw.length;
  }
  return tokens;
}

function capitalOf({ start, end, raw }: Token): Capital {
  const elided = /^(?:[dlDL]|[qQ]u)['’](?=\p{Lu})/u.exec(raw)?.[0].length ?? 0;
  const kept = elided > 0 && !/^[DO]['’]\p{Lu}/u.test(raw) ? elided : 0;
  const ending = contraction.exec(raw)?.[0].length ?? 0;
  const name = raw.slice(kept, raw.length - ending);
  return {
    start: start + kept,
    end: end - ending,
    key: nameKeyOf(name),
    possessive: ending > 0,
    allCapitals: name.length > 1 && name === name.toUpperCase() && name !== name.toLowerCase(),
  };
}

/** "Mrs.", "Capt.": written with a point that ends no sentence. */
function isShortTitle({ key }: Token, cues: Cues): boolean {
  return key.length <= 4 && cues.titles.has(key);
}

function isBoundary(before: Token, token: Token, cues: Cues, outside: boolean): boolean {
  const { gap } = token;
  if (/^\.\s?$/u.test(gap) && token.capital) {
    // "Mrs. Sinclair", "J. Sinclair".
    if (before.capital && (isShortTitle(before, cues) || before.raw.length === 1)) return false;
  }
  if (outside && /^\s?[:：]\s?$/u.test(gap)) return false;
  return (
    /[.!?…:;“”"«»„()[\]{}<>–—]|\n\s*\n|\s-\s|(?:^|\s)['‘](?=$)|\t/u.test(gap) ||
    (outside && gap.includes('\n'))
  );
}

/** The index of the token that goes on with the name, or null. */
function nextInRun(
  tokens: readonly Token[],
  last: number,
  cues: Cues,
  outside: boolean,
): number | null {
  const current = tokens[last]!;
  const next = tokens[last + 1];
  if (next === undefined) return null;
  const initial = current.raw.length === 1 && /^\.\s?$/u.test(next.gap);
  const title = isShortTitle(current, cues) && /^\.\s?$/u.test(next.gap);
  const joins = next.gap === ' ' || (next.gap === '\n' && !outside) || initial || title;
  if (!joins) {
    // "Marks & Spencer", "the Fishers' Cooperative".
    const binds =
      / & /u.test(next.gap) || (/^['’] $/u.test(next.gap) && cues.organisationWords.has(next.key));
    return binds && next.capital ? last + 1 : null;
  }
  if (next.capital) return last + 1;
  // "Ludwig van der Berg", "Isle of Sula", "University of the Isles".
  const institution = cues.placeWords.has(current.key) || cues.organisationWords.has(current.key);
  const binds = (key: string): boolean =>
    isParticle(key) || (institution && (key === 'of' || key === 'the'));
  let at = last + 1;
  while (at < tokens.length && at < last + 4 && !tokens[at]!.capital) {
    if (!binds(tokens[at]!.key) || tokens[at]!.gap !== ' ') return null;
    at++;
  }
  // "y" and "o" stand between names as often as in them.
  if (tokens.slice(last + 1, at).some(({ key }) => key === 'y' || key === 'o')) return null;
  return at < tokens.length && tokens[at]!.capital && tokens[at]!.gap === ' ' ? at : null;
}
