import type { Transcript } from '../../engine/study/index.ts';
import { visibleThemes } from '../../engine/study/index.ts';
import { formOf, stemmerFor, type Language, type Prepared } from '../../engine/text/index.ts';
import type { Found } from '../api.ts';
import type { OpenStudy } from './open-study.ts';
import { pause, type Placed } from './passages-now.ts';
import { inContext } from './word-view.ts';

const mostPassages = 50;
const mostNamed = 12;
const mostWords = 8;
/** Forms of one word that are looked for; the rarest of very many add nothing. */
const mostForms = 12;
const shortestBeginning = 3;
const millisecondsAtOnce = 25;

/** Themes, words, transcripts and passages that a typed text may mean. */
export async function find(open: OpenStudy, typed: string): Promise<Found> {
  const text = typed.trim();
  if (text === '') return { themes: [], words: [], transcripts: [], passages: [] };
  const { now, study } = open;
  const words = now.fitted?.words ?? (await now.prepared());
  await now.settled();
  const { language } = now.settings.text;
  const key = plain(text);
  return {
    themes: visibleThemes(study)
      .map(({ id }) => ({ id, label: now.label(id) }))
      .filter(({ label }) => plain(label).includes(key))
      .slice(0, mostNamed),
    transcripts: now.transcripts
      .filter(({ name }) => plain(name).includes(key))
      .slice(0, mostNamed)
      .map(({ id, name }) => ({ id, name })),
    words: wordsLike(words, text, language),
    passages: await passagesWith(open, text, needlesFor(text, formsOf(words, language), language)),
  };
}

function plain(text: string): string {
  return text.normalize('NFC').toLowerCase().replace(/\s+/gu, ' ').trim();
}

interface Form {
  readonly form: string;
  readonly occurrences: number;
}

interface Forms {
  /** Every form that is said, by its stem. */
  readonly byStem: ReadonlyMap<string, readonly Form[]>;
  readonly stem: (form: string) => string;
}

const kept = new WeakMap<Prepared, { readonly language: Language; readonly forms: Forms }>();

function formsOf(words: Prepared, language: Language): Forms {
  const known = kept.get(words);
  if (known?.language === language) return known.forms;
  const stem = stemmerFor(language);
  const byStem = new Map<string, Form[]>();
  const add = (one: Form): void => {
    const stemmed = stem(one.form);
    const own = byStem.get(stemmed);
    if (own === undefined) byStem.set(stemmed, [one]);
    else own.push(one);
  };
  for (const surfaces of words.surfaces) for (const surface of surfaces) add(surface);
  for (const { form, occurrences } of words.leftOut) add({ form, occurrences });
  for (const own of byStem.values()) own.sort((a, b) => b.occurrences - a.occurrences);
  const forms = { byStem, stem };
  kept.set(words, { language, forms });
  return forms;
}

/** Counted words that begin as typed or have its stem, commonest first. */
function wordsLike(words: Prepared, text: string, language: Language): Found['words'] {
  const form = formOf(text, language);
  if (form === null) return [];
  const { stem } = formsOf(words, language);
  const stemmed = stem(form);
  const found: { form: string; occurrences: number }[] = [];
  words.vocabulary.forEach((each, place) => {
    const surfaces = words.surfaces[place];
    const said = surfaces.some(
      (surface) => surface.form.startsWith(form) || stem(surface.form) === stemmed,
    );
    if (!said && each !== form) return;
    found.push({
      form: each,
      occurrences: surfaces.reduce((sum, { occurrences }) => sum + occurrences, 0),
    });
  });
  return found.sort((a, b) => b.occurrences - a.occurrences).slice(0, mostWords);
}

/** One of the words looked for: any of these, as whole words or as the beginnings of words. */
interface Needle {
  readonly wholes: readonly string[];
  readonly beginning: string | null;
  /** How often it is said, about; what is rare is looked for first. */
  readonly occurrences: number;
}

/** The typed words by their stems, the rarest first; the last may still be being typed. */
function needlesFor(text: string, { byStem, stem }: Forms, language: Language): Needle[] {
  const typed = text.split(/\s+/u);
  return typed
    .map((word, index): Needle => {
      const form = formOf(word, language);
      if (form === null) return { wholes: [], beginning: lowered(word), occurrences: 0 };
      const forms = byStem.get(stem(form)) ?? [];
      const occurrences = forms.reduce((sum, one) => sum + one.occurrences, 0);
      const wholes = new Set([form, ...forms.slice(0, mostForms).map((one) => one.form)]);
      if (index < typed.length - 1 || word.length < shortestBeginning) {
        return { wholes: [...wholes], beginning: null, occurrences };
      }
      const others = [...wholes].filter((one) => !one.startsWith(form));
      return { wholes: others, beginning: form, occurrences };
    })
    .sort((a, b) => a.occurrences - b.occurrences);
}

/** Passages that hold the text as it was typed, then those in which all of its words are said. */
async function passagesWith(
  open: OpenStudy,
  text: string,
  needles: readonly Needle[],
): Promise<Found['passages']> {
  const phrase = { wholes: [], beginning: lowered(text).replace(/\s+/gu, ' '), occurrences: 0 };
  const found = new Map<string, Found['passages'][number]>();
  const searches = needles.length > 1 ? [[phrase], needles] : [needles];
  for (const search of searches) await lookThrough(open, search, found);
  return [...found.values()];
}

async function lookThrough(
  { now, desk }: OpenStudy,
  needles: readonly Needle[],
  found: Map<string, Found['passages'][number]>,
): Promise<void> {
  let since = performance.now();
  for (const { id, name, turns } of now.transcripts) {
    if (performance.now() - since > millisecondsAtOnce) {
      await pause();
      since = performance.now();
    }
    // Other calls are answered in the pauses, and one of them may have taken it away.
    if (!now.study.transcripts.has(id)) continue;
    const text = desk.text(id);
    const searched = searchable(turns, text);
    for (const { passage, place } of matches(now.passagesIn(id), searched, needles)) {
      if (found.size === mostPassages) return;
      const { start, end } = passage;
      const key = `${id} ${start}`;
      if (found.has(key)) continue;
      const { before, word, after } = inContext(text, place, passage);
      found.set(key, {
        transcript: id,
        start,
        end,
        transcriptName: name,
        before,
        match: word,
        after,
      });
    }
  }
}

const loweredTexts = new WeakMap<Transcript['turns'], string>();

/** A text in the plain form in which it is searched; every offset stays where it is. */
function searchable(turns: Transcript['turns'], text: string): string {
  const known = loweredTexts.get(turns);
  if (known?.length === text.length) return known;
  const made = lowered(text);
  loweredTexts.set(turns, made);
  return made;
}

function lowered(text: string): string {
  const lower = text.toLowerCase();
  // Few letters are longer in lower case (the dotted capital I): those keep their capital.
  const same =
    lower.length === text.length
      ? lower
      : [...text].map((letter) => sameLength(letter.toLowerCase(), letter)).join('');
  return same
    .replace(/[’ʼ‘]/gu, "'")
    .replace(/[\u2010\u2011]/gu, '-')
    .replace(/\s/gu, ' ');
}

function sameLength(lower: string, letter: string): string {
  return lower.length === letter.length ? lower : letter;
}

interface Place {
  readonly start: number;
  readonly end: number;
}

/** Passages in which each of the words is said, with the place of the rarest. */
function matches(
  placed: readonly Placed[],
  text: string,
  needles: readonly Needle[],
): { readonly passage: Placed; readonly place: Place }[] {
  let within: Map<Placed, Place> | null = null;
  for (const needle of needles) {
    const found = new Map<Placed, Place>();
    for (const place of placesOf(needle, text)) {
      const passage = passageAt(placed, place);
      if (passage === null || found.has(passage)) continue;
      if (within !== null && !within.has(passage)) continue;
      found.set(passage, within?.get(passage) ?? place);
    }
    within = found;
    if (within.size === 0) break;
  }
  return [...(within ?? [])]
    .map(([passage, place]) => ({ passage, place }))
    .sort((a, b) => a.passage.start - b.passage.start);
}

const wordCharacter = /[\p{L}\p{N}\p{M}]/u;

function* placesOf({ wholes, beginning }: Needle, text: string): Generator<Place> {
  for (const whole of wholes) yield* occurrences(text, whole, true);
  if (beginning !== null) yield* occurrences(text, beginning, false);
}

function* occurrences(text: string, word: string, whole: boolean): Generator<Place> {
  if (word === '') return;
  for (let at = text.indexOf(word); at >= 0; at = text.indexOf(word, at + 1)) {
    let end = at + word.length;
    if (at > 0 && wordCharacter.test(text[at - 1]) && wordCharacter.test(word[0])) continue;
    if (whole && end < text.length && wordCharacter.test(text[end])) continue;
    if (!whole) while (end < text.length && wordCharacter.test(text[end])) end++;
    yield { start: at, end };
  }
}

/** The passage in whose words a place stands. */
function passageAt(placed: readonly Placed[], { start, end }: Place): Placed | null {
  let low = 0;
  let high = placed.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (placed[middle].start <= start) low = middle + 1;
    else high = middle;
  }
  // A short turn of somebody else may stand inside a longer passage that began before it.
  for (let index = low - 1; index >= 0 && index >= low - 4; index--) {
    const { segments } = placed[index];
    if (segments.some((part) => part.start <= start && end <= part.end)) return placed[index];
  }
  return null;
}
