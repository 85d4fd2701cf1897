import { createWordScanner, type Language } from '../../engine/text/index.ts';
import type {
  Api,
  ReadingList,
  ReadingListRequest,
  Refused,
  SearchRequest,
  SearchResult,
} from '../api.ts';
import { give, refuse } from './answers.ts';
import { isDecided } from './decided-now.ts';
import type { OpenStudy } from './open-study.ts';
import type { Said } from './search-index.ts';
import { inContext } from './word-view.ts';

/** Lines found: the first and the last word of each, as places in `Said`, in the order asked for. */
interface Hits {
  readonly first: Int32Array;
  readonly last: Int32Array;
  readonly unheard: readonly string[];
}

const kept = new WeakMap<Said, { readonly key: string; readonly hits: Hits }>();

/** Keyword in context: lines of what participants say. */
export async function search(
  open: OpenStudy,
  { from, count, ...request }: Api['search']['takes'],
): Promise<{ readonly value: SearchResult } | Refused> {
  const said = await open.search.said();
  const hits = hitsOf(said, request);
  if (hits === null) return refuse('nothing to search');
  const { now, desk } = open;
  const passages = new Set<number>();
  const people = new Set<string>();
  for (const word of hits.first) {
    const transcript = transcriptAt(said, word);
    // Transcripts and passages as one number: neither reaches a million.
    const key = transcript * 1_000_000 + said.passages[word];
    if (passages.has(key)) continue;
    passages.add(key);
    people.add(passageOf(open, said, transcript, word).participant);
  }
  const shown: SearchResult['shown'][number][] = [];
  for (let line = from; line < Math.min(hits.first.length, from + count); line++) {
    const word = hits.first[line];
    const transcript = transcriptAt(said, word);
    const { id, name } = said.transcripts[transcript];
    const passage = passageOf(open, said, transcript, word);
    const place = { start: said.starts[word], end: said.ends[hits.last[line]] };
    const { before, word: match, after } = inContext(desk.text(id), place, passage);
    shown.push({
      transcript: id,
      start: passage.start,
      end: passage.end,
      transcriptName: name,
      participant: now.participantName(passage.participant),
      before,
      match,
      after,
      read: isDecided(now.decidedIn(id).passages[said.passages[word]]),
    });
  }
  return give({
    lines: hits.first.length,
    passages: passages.size,
    people: people.size,
    unheard: hits.unheard,
    shown,
  });
}

/** The passages of the lines, each once, in the order of the lines. */
export async function keywordList(
  open: OpenStudy,
  { search: request, unreadOnly }: ReadingListRequest,
): Promise<{ readonly value: ReadingList } | Refused> {
  if (request === undefined) return refuse('nothing to search');
  const said = await open.search.said();
  const hits = hitsOf(said, request);
  if (hits === null) return refuse('nothing to search');
  const name = keywordListName(request, unreadOnly);
  const seen = new Set<string>();
  const places: ReadingList['places'][number][] = [];
  let decided = 0;
  for (const word of hits.first) {
    const transcript = transcriptAt(said, word);
    const { id } = said.transcripts[transcript];
    const { start, end } = passageOf(open, said, transcript, word);
    const key = `${id} ${start}`;
    if (seen.has(key)) continue;
    seen.add(key);
    const here = open.now.decidedIn(id).passages[said.passages[word]];
    const read = isDecided(here);
    const fromHere = [...here.codings, ...here.nones].some(({ under }) => under.drawnBy === name);
    if (unreadOnly && read && !fromHere) continue;
    places.push({ transcript: id, start, end });
    if (read) decided++;
  }
  return give({ name, places, decided });
}

const longestQuoted = 120;

function keywordListName({ text, mode, within }: SearchRequest, unreadOnly: boolean): string {
  const typed = text.trim().replace(/\s+/gu, ' ');
  const quoted =
    typed.length > longestQuoted ? `${[...typed].slice(0, longestQuoted).join('')} …` : typed;
  const ways = {
    words: 'as typed',
    stems: 'in all forms',
    phrase: 'as a phrase',
    near: `within ${within} words`,
  };
  return `keyword in context: “${quoted}” ${ways[mode]}${unreadOnly ? ', unread' : ''}`;
}

function hitsOf(said: Said, request: SearchRequest): Hits | null {
  const { text, mode, within, order } = request;
  const key = JSON.stringify([text, mode, mode === 'near' ? within : 0, order]);
  const known = kept.get(said);
  if (known?.key === key) return known.hits;
  const hits = find(said, request);
  if (hits === null) return null;
  const sorted = inOrder(said, hits, order);
  kept.set(said, { key, hits: sorted });
  return sorted;
}

/** A word that is looked for: where any of its forms is said, ascending. */
interface Term {
  readonly typed: string;
  readonly places: Int32Array;
}

function find(said: Said, { text, mode, within }: SearchRequest): Hits | null {
  const terms = termsOf(said, text, mode === 'stems' || mode === 'near');
  if (terms.length === 0) return null;
  const unheard = terms.filter(({ places }) => places.length === 0).map(({ typed }) => typed);
  const [node, ...others] = terms;
  const first: number[] = [];
  const last: number[] = [];
  if (unheard.length === 0) {
    const reach =
      mode === 'phrase'
        ? phraseEnd(terms)
        : mode === 'near'
          ? nearEnd(within, others)
          : allSaid(others);
    for (const word of node.places) {
      const found = reach(said, word);
      if (found === null) continue;
      first.push(found[0]);
      last.push(found[1]);
    }
  }
  return { first: Int32Array.from(first), last: Int32Array.from(last), unheard };
}

function termsOf(said: Said, text: string, stems: boolean): Term[] {
  const { dictionary } = said;
  return text
    .trim()
    .split(/\s+/u)
    .flatMap((typed): Term[] => {
      const open = /^(.*[\p{L}\p{N}])\*$/u.exec(typed);
      if (open !== null) {
        const [beginning] = formsIn(open[1], dictionary.language);
        return beginning === undefined
          ? []
          : [{ typed, places: merged(said, dictionary.beginningWith(beginning)) }];
      }
      return formsIn(typed, dictionary.language).map((form) => ({
        typed: form,
        places: merged(said, stems ? dictionary.relatives(form) : dictionary.known(form)),
      }));
    });
}

/** The forms of typed words, as the text's own words are read; numbers as they stand. */
function formsIn(typed: string, language: Language): string[] {
  const forms: string[] = [];
  createWordScanner(language)(typed, { start: 0, end: typed.length }, (start, end, form) => {
    forms.push(form ?? typed.slice(start, end));
  });
  return forms;
}

function merged({ offsets, places }: Said, forms: readonly number[]): Int32Array {
  const said = forms.filter((form) => form + 1 < offsets.length);
  if (said.length === 1) return places.subarray(offsets[said[0]], offsets[said[0] + 1]);
  const all = new Int32Array(
    said.reduce((sum, form) => sum + offsets[form + 1] - offsets[form], 0),
  );
  let at = 0;
  for (const form of said) {
    all.set(places.subarray(offsets[form], offsets[form + 1]), at);
    at += offsets[form + 1] - offsets[form];
  }
  return all.sort();
}

/** Where a line around a word begins and ends; null where the word makes none. */
type Reach = (said: Said, word: number) => readonly [first: number, last: number] | null;

function phraseEnd(terms: readonly Term[]): Reach {
  return (said, word) => {
    const last = word + terms.length - 1;
    if (last >= said.forms.length || !samePassage(said, word, last)) return null;
    for (let i = 1; i < terms.length; i++) {
      if (!has(terms[i].places, word + i)) return null;
    }
    return [word, last];
  };
}

function nearEnd(within: number, others: readonly Term[]): Reach {
  return (said, word) => {
    if (said.passages[word] < 0) return null;
    let first = word;
    let last = word;
    for (const { places } of others) {
      const near = nearest(said, places, word);
      if (near < 0 || Math.abs(near - word) > within) return null;
      first = Math.min(first, near);
      last = Math.max(last, near);
    }
    return [first, last];
  };
}

function allSaid(others: readonly Term[]): Reach {
  return (said, word) =>
    said.passages[word] >= 0 && others.every(({ places }) => nearest(said, places, word) >= 0)
      ? [word, word]
      : null;
}

/** The place nearest to a word, other than itself, in the same passage; -1 where there is none. */
function nearest(said: Said, places: Int32Array, word: number): number {
  const at = lowerBound(places, word);
  const before = at - 1;
  const after = places[at] === word ? at + 1 : at;
  let best = -1;
  for (const candidate of [before, after]) {
    const place = places[candidate];
    if (place === undefined || !samePassage(said, place, word)) continue;
    if (best < 0 || Math.abs(place - word) < Math.abs(best - word)) best = place;
  }
  return best;
}

function has(places: Int32Array, word: number): boolean {
  return places[lowerBound(places, word)] === word;
}

function lowerBound(places: Int32Array, word: number): number {
  let low = 0;
  let high = places.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (places[middle] < word) low = middle + 1;
    else high = middle;
  }
  return low;
}

function samePassage(said: Said, a: number, b: number): boolean {
  return (
    said.passages[a] >= 0 &&
    said.passages[a] === said.passages[b] &&
    transcriptAt(said, a) === transcriptAt(said, b)
  );
}

function transcriptAt({ from }: Said, word: number): number {
  let low = 0;
  let high = from.length - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (from[middle] <= word) low = middle;
    else high = middle;
  }
  return low;
}

function passageOf({ now }: OpenStudy, said: Said, transcript: number, word: number) {
  return now.passagesIn(said.transcripts[transcript].id)[said.passages[word]];
}

const wordsCompared = 3;

/** Sorted by the words before or after, the nearest first; stable, by counting. */
function inOrder(said: Said, hits: Hits, order: SearchRequest['order']): Hits {
  if (order === 'place' || hits.first.length < 2) return hits;
  const ranks = said.dictionary.ranks();
  let lines = Int32Array.from(hits.first.keys());
  for (let distance = wordsCompared; distance >= 1; distance--) {
    const keys = Int32Array.from(lines, (line) => {
      const from = order === 'left' ? hits.first[line] : hits.last[line];
      const word = order === 'left' ? from - distance : from + distance;
      const there = word >= 0 && word < said.forms.length && samePassage(said, word, from);
      return there ? ranks[said.forms[word]] : 0;
    });
    lines = counted(lines, keys, ranks.length + 1);
  }
  return {
    ...hits,
    first: lines.map((line) => hits.first[line]),
    last: lines.map((line) => hits.last[line]),
  };
}

function counted(lines: Int32Array, keys: Int32Array, size: number): Int32Array<ArrayBuffer> {
  const next = new Int32Array(size + 1);
  for (const key of keys) next[key + 1]++;
  for (let key = 0; key < size; key++) next[key + 1] += next[key];
  const sorted = new Int32Array(lines.length);
  lines.forEach((line, index) => (sorted[next[keys[index]]++] = line));
  return sorted;
}
