import type { Span } from '../../spans/index.ts';
import type { Capital, Run } from './capitals.ts';
import { cuesOf, isGermanNoun, isRomanceWord, monthNames, type Cues } from './cues.ts';
import type { NameLists } from './lists.ts';

/** How often a word stands where only one kind of name stands. */
export interface Evidence {
  person: number;
  place: number;
  other: number;
  /** Weaker signs of a person: what follows it is what people do. */
  acts: number;
  /** Written with a capital where no sentence begins. */
  inside: number;
}

export function evidenceFor(evidence: Map<string, Evidence>, key: string): Evidence {
  const known = evidence.get(key);
  if (known !== undefined) return known;
  const fresh = { person: 0, place: 0, other: 0, acts: 0, inside: 0 };
  evidence.set(key, fresh);
  return fresh;
}

export type NameKind = 'person' | 'place' | 'organisation' | 'other name';

type Found = Span & { readonly kind: NameKind };

/** A run without what only opens its sentence. */
interface Name {
  readonly words: readonly Capital[];
  /** What stands in front of it, words of the run that do not belong to it included. */
  readonly before: readonly string[];
  readonly after: string;
  readonly comma: boolean;
  /** Whether a postcode stands right in front of it. */
  readonly afterPostcode: boolean;
  /** Whether it would be written with a capital anyway. */
  readonly opens: boolean;
  readonly outside: boolean;
}

/** Streets and the like, which follow a given name without being a surname. */
const addressWords = new Set(
  `street road avenue close crescent terrace square drive court way row place gardens bay island isle
   harbour harbor beach bridge quay pier village town county`.split(/\s+/u),
);

const epithets = new Set(
  'old wee big young poor little auld dear late lieber liebe alte alter pauvre petit petite vieux vieille pobre viejo vieja'.split(
    ' ',
  ),
);

const germanPlaceEnding =
  /.{3}(?:dorf|burg|berg|hausen|heim|stadt|ingen|hafen|feld|bach|kirchen|münde|stedt|rode|walde|brück|brücken|büttel|oog|siel|holm|fehn)$/u;
const germanStreet = /.{3}(?:straße|strasse|gasse|allee)$/u;

const motions = new Set(
  'move moved moving go goes went going gone come comes came coming back over across drove drive sailed sail travelled travel flew fly walked walk ferry boat bus road'.split(
    ' ',
  ),
);

const streetJoints = new Set("de des du d' la le les l' del los las el".split(' '));

/** A given name that is written small so often is a word of the language. */
const fewestUsesOfWord = 4;

/** Reads the capitalised runs of one language. */
export class RunReader {
  readonly #cues: Cues;
  readonly #language: string;
  readonly #lists: NameLists;
  readonly #small: ReadonlyMap<string, number>;
  /** Where words stand that a postcode is in front of, in the text that is being read. */
  #postcodes: ReadonlySet<number> = new Set();

  constructor(language: string, lists: NameLists, small: ReadonlyMap<string, number>) {
    this.#cues = cuesOf(language);
    this.#language = language;
    this.#lists = lists;
    this.#small = small;
  }

  /** Says where postcodes end in the text whose runs come next. */
  behindPostcodes(places: ReadonlySet<number>): void {
    this.#postcodes = places;
  }

  /** Adds what the surroundings of a run say about its words, whatever the lists say. */
  weigh(run: Run, evidence: Map<string, Evidence>): void {
    const name = this.#nameIn(run);
    if (name === null) return;
    const around = this.#around(name);
    for (const [index, word] of name.words.entries()) {
      const own = evidenceFor(evidence, word.key);
      if (!(name.opens && index === 0) && !name.outside) own.inside++;
      if (around === 'person') own.person++;
      if (around === 'other name') own.other++;
      if (around === 'place') own.place++;
      if (around !== null) continue;
      if (index === name.words.length - 1 && this.#acts(name)) own.acts++;
      if (index > 0 && this.#isSurname(name, word)) own.person++;
    }
  }

  read(run: Run, evidence: ReadonlyMap<string, Evidence>): Found[] {
    const name = this.#nameIn(run);
    if (name === null) return [];
    const { words } = name;
    const whole = (kind: NameKind): Found[] => [
      { kind, start: words[0]!.start, end: words.at(-1)!.end },
    ];
    const around = this.#around(name);
    const institution = institutionIn(words, this.#cues);
    if (institution !== null && !this.#isSurnamed(name)) {
      return words.length > 1 ? whole(institution) : [];
    }
    if (around === 'organisation') return whole('organisation');
    if (words.length > 1 && around !== 'person' && this.#lists.places.has(phraseOf(words))) {
      return whole('place');
    }
    if (around === 'other name') {
      // "the Portlennan light" is named after the place, "the Margit" after nobody who is meant.
      const kind = words.length === 1 ? majorityOf(evidence.get(words[0]!.key)) : null;
      if (kind === 'place') return whole('place');
      return words.length > 1 || !this.#isPlain(words[0]!.key) || this.#isGiven(words[0]!.key)
        ? whole('other name')
        : [];
    }
    if (around === 'place') {
      const one = words.length === 1 && this.#isPlain(words[0]!.key);
      return !one || this.#lists.places.has(words[0]!.key) ? whole('place') : [];
    }
    if (around === 'person') return this.#people(words);
    if (this.#language === 'deu') return this.#readGerman(name, evidence);
    if (words.length > 1) return this.#readSeveral(name, evidence);
    const kind = this.#kindOfOne(name, evidence);
    return kind === null ? [] : whole(kind);
  }

  /** Each word by itself, so that a name is the same with a surname and without. */
  #people(words: readonly Capital[]): Found[] {
    const named = words.filter(({ key }) => !this.#cues.titles.has(key) && key.length > 1);
    // "Old Jory", "Wee Ruth": what people are called besides is no part of the name.
    const kept = named.length > 1 && epithets.has(named[0]!.key) ? named.slice(1) : named;
    return (kept.length === 0 ? words : kept).map(({ start, end }) => ({
      kind: 'person',
      start,
      end,
    }));
  }

  #readSeveral(name: Name, evidence: ReadonlyMap<string, Evidence>): Found[] {
    const { words, outside } = name;
    if (words.every(({ allCapitals }) => allCapitals) && !this.#isGiven(words[0]!.key)) return [];
    const kinds = words.map(({ key }) => knownKind(evidence.get(key)));
    const isPerson =
      kinds.includes('person') ||
      this.#isGiven(words[0]!.key) ||
      (!this.#isPlain(words[0]!.key) &&
        words.slice(1).some(({ key }) => this.#lists.family.has(key)));
    if (isPerson) return this.#people(words);
    if (kinds.includes('place')) {
      return [{ kind: 'place', start: words[0]!.start, end: words.at(-1)!.end }];
    }
    // Two plain words with capitals ("Fair Trade") are more often the title of something.
    if (words.every((word) => this.#isPlain(word.key) || word.allCapitals)) return [];
    return outside ? [] : this.#people(words);
  }

  #kindOfOne(
    { words, opens, outside, ...name }: Name,
    evidence: ReadonlyMap<string, Evidence>,
  ): NameKind | null {
    const { given, family, places } = this.#lists;
    const word = words[0]!;
    const own = evidence.get(word.key);
    const majority = knownKind(own);
    const plain = this.#isPlain(word.key);
    const listed = this.#isGiven(word.key);
    if (word.allCapitals && majority !== 'person' && (!listed || plain)) return null;
    if (outside) {
      if (majority === 'person' || (listed && !plain)) return 'person';
      return places.has(word.key) && !plain && !given.has(word.key) ? 'place' : null;
    }
    if (opens && plain) {
      const known = listed && (own?.person ?? 0) + (own?.inside ?? 0) > 0;
      return known && this.#acts({ words, opens, ...name }) ? 'person' : null;
    }
    if (listed && !(plain && !given.has(word.key))) {
      const person = (own?.person ?? 0) + (own?.acts ?? 0);
      return majority === 'place' && own!.place > 2 * person ? 'place' : 'person';
    }
    if (majority === 'person') return 'person';
    if (majority === 'place') return 'place';
    if (places.has(word.key) && !plain && !opens) return 'place';
    if (opens) {
      if (places.has(word.key) && !plain && (own?.inside ?? 0) > 0) return 'place';
      const seen = (own?.inside ?? 0) > 0 && !this.#small.has(word.key);
      return seen && (family.has(word.key) || own!.acts > 0) ? 'person' : null;
    }
    if (plain || majority === 'other name') return plain ? null : 'other name';
    // Nothing is known but its capital: better one too many to look at than one too few.
    return 'person';
  }

  /** Every noun has a capital: only what lists or surroundings know is a name. */
  #readGerman({ words, opens, before }: Name, evidence: ReadonlyMap<string, Evidence>): Found[] {
    const { given, family, places } = this.#lists;
    const found: Found[] = [];
    let afterGiven = false;
    for (const [index, { start, end, key: raw }] of words.entries()) {
      const key = this.#isPlain(raw) ? raw : germanKey(raw, given);
      const own = evidence.get(raw);
      const noun =
        this.#isPlain(key) || (index === 0 && this.#cues.determiners.has(before[0] ?? ''));
      const known = (own?.person ?? 0) > 0 && !noun;
      const isGiven = given.has(key) && !noun;
      if (isGiven || known || (family.has(key) && (afterGiven || (!noun && known)))) {
        found.push({ kind: 'person', start, end });
        // "Ruths Haus" is no Mr Haus.
        afterGiven = key === raw && !/s$/u.test(raw);
        continue;
      }
      afterGiven = false;
      const place = germanStreet.test(key) || (!noun && (places.has(key) || (own?.place ?? 0) > 0));
      if (place && (!(opens && index === 0) || germanStreet.test(key)))
        found.push({ kind: 'place', start, end });
    }
    return found;
  }

  #nameIn(run: Run): Name | null {
    let { words } = run;
    const dropped: string[] = [];
    while (words.length > 0 && this.#opensOnly(run, words, dropped)) {
      dropped.unshift(words[0]!.key);
      words = words.slice(1);
    }
    const whole = institutionIn(words, this.#cues) !== null;
    const cut = words.findIndex(
      ({ key }, index) =>
        index > 0 &&
        !whole &&
        ((this.#cues.capitalised.has(key) && !this.#lists.family.has(key)) || /\d/u.test(key)),
    );
    if (cut > 0) words = words.slice(0, cut);
    if (words.length === 0) return null;
    return {
      words,
      before: [...dropped, ...run.before],
      after: cut > 0 ? '' : run.after,
      comma: run.comma && dropped.length === 0,
      afterPostcode: this.#postcodes.has(words[0]!.start),
      opens: run.opens && dropped.length === 0,
      outside: run.outside,
    };
  }

  /** Whether the first word of a run has its capital for another reason than being a name. */
  #opensOnly(run: Run, words: readonly Capital[], dropped: readonly string[]): boolean {
    const { key } = words[0]!;
    const cues = this.#cues;
    const alone = words.length === 1;
    if (/\d/u.test(key) || (alone && key.length < 2)) return true;
    if (cues.titles.has(key)) return alone;
    // "May Ollard", "Will Sinclair" open with a name, "Will you" and "May we" do not.
    if (!alone && this.#lists.given.has(key) && !this.#isPlain(words[1]!.key)) return false;
    if (cues.capitalised.has(key)) return alone || institutionIn(words, cues) === null;
    if (key === 'new' && words[1]?.key === 'year') return true;
    if (key === 'year' && dropped[0] === 'new') return true;
    if (alone && monthNames.has(key)) {
      const near = dropped[0] ?? run.before[0] ?? '';
      return (run.opens && dropped.length === 0) || cues.monthBefore.has(near);
    }
    const opening = run.opens && dropped.length === 0;
    if (!opening || alone) return false;
    if (cues.articles.has(key) || this.#isPlain(key)) return true;
    return this.#small.has(key) && !this.#isGiven(key);
  }

  /** What the words right around a name say about it; null where they say nothing. */
  #around(name: Name): NameKind | null {
    const { words } = name;
    const cues = this.#cues;
    const [near = '', second = '', third = '', fourth = ''] = name.before;
    const first = words[0]!;
    if (cues.titles.has(first.key) && words.length > 1) return 'person';
    if (name.afterPostcode) return 'place';
    const given = this.#isGiven(first.key);
    const known = this.#lists.places.has(phraseOf(words));
    if (near !== '' && (cues.relations.has(near) || cues.titles.has(near))) return 'person';
    const naming = [near, second].findIndex((word) => cues.naming.has(word));
    if (naming === 0 || (naming === 1 && !cues.articles.has(near) && !name.opens)) {
      const behind = [near, second, third, fourth].slice(naming + 1);
      if (behind.some((word) => cues.named.has(word))) return 'other name';
      if (behind.some((word) => cues.placeWords.has(word))) return 'place';
      if (behind.some((word) => cues.organisationWords.has(word))) return 'organisation';
      return naming === 0 ? 'person' : null;
    }
    if (cues.named.has(near) && !name.comma) return 'other name';
    if (cues.articles.has(near) && this.#language !== 'deu') {
      if (words.length === 1 && this.#isFamilyPlural(first.key)) return 'person';
      if (known && !given) return 'place';
      // People are spoken of with an article in some places, and boats without one.
      if (this.#language !== 'eng' && given) return null;
      return institutionIn(words, cues) === null ? 'other name' : null;
    }
    if (this.#isOnStreet(name.before)) return 'place';
    if (cues.placeBefore.has(near)) {
      if (given && !first.possessive && known && words.length === 1 && near === 'in')
        return 'place';
      if (given || first.possessive) return null;
      return this.#language === 'deu' ? this.#germanPlace(words) : 'place';
    }
    if (given || this.#language === 'deu') return null;
    if (near === 'to' && motions.has(second) && !this.#isPlain(first.key)) return 'place';
    if (near === 'on' && !this.#isPlain(first.key) && this.#language === 'eng') return 'place';
    return known && (near === 'to' || near === 'from' || near === 'of') ? 'place' : null;
  }

  /** "rue des Capucins", "calle del Faro": the street is written small. */
  #isOnStreet(before: readonly string[]): boolean {
    const { placeWords } = this.#cues;
    const at = before.findIndex((word) => placeWords.has(word));
    if (this.#language !== 'fra' && this.#language !== 'spa') return false;
    return at > 0 && before.slice(0, at).every((word) => streetJoints.has(word));
  }

  #germanPlace(words: readonly Capital[]): NameKind | null {
    const { key } = words.at(-1)!;
    if (this.#isPlain(key)) return null;
    return this.#lists.places.has(phraseOf(words)) || germanPlaceEnding.test(key) ? 'place' : null;
  }

  /** What follows a given name is a surname; in German only where a list says so. */
  #isSurname({ words }: Name, word: Capital): boolean {
    return (
      this.#isGiven(words[0]!.key) &&
      institutionIn(words, this.#cues) === null &&
      (this.#language !== 'deu' || (this.#lists.family.has(word.key) && !isGermanNoun(word.key)))
    );
  }

  /** "Ruth Hill" is somebody; "Ruth Street" is not, nor is "the Hill". */
  #isSurnamed({ words, before }: Name): boolean {
    const first = words[0]!;
    const last = words.at(-1)!;
    if (this.#cues.titles.has(first.key) && words.length > 1) {
      return words.slice(1).every(({ key }) => !addressWords.has(key));
    }
    const near = before[0] ?? '';
    return (
      (words.length === 2 || words.length === 3) &&
      this.#isGiven(first.key) &&
      !this.#cues.placeWords.has(first.key) &&
      this.#lists.family.has(last.key) &&
      !addressWords.has(last.key) &&
      !this.#cues.placeBefore.has(near) &&
      !this.#cues.articles.has(near)
    );
  }

  #isFamilyPlural(key: string): boolean {
    const { family } = this.#lists;
    return /s$/u.test(key) && (family.has(key.slice(0, -1)) || family.has(key.slice(0, -2)));
  }

  #acts({ words, before, after, opens }: Pick<Name, 'words' | 'before' | 'after' | 'opens'>) {
    return (
      words.at(-1)!.possessive ||
      this.#cues.doing.has(after) ||
      (!opens && this.#cues.personBefore.has(before[0] ?? ''))
    );
  }

  #isGiven(key: string): boolean {
    const { given } = this.#lists;
    if (given.has(key) || given.has(withoutMarks(key))) return true;
    return (
      key.includes('-') &&
      key.split('-').every((part) => given.has(part) && !this.#lists.ordinary.has(part))
    );
  }

  /** A word of the language, as far as can be told. */
  #isPlain(key: string): boolean {
    const capitalised = this.#cues.capitalised.has(key);
    if (this.#language === 'deu') return isGermanNoun(key) || this.#small.has(key) || capitalised;
    if (this.#language === 'fra' || this.#language === 'spa') {
      return isRomanceWord(key) || this.#small.has(key) || capitalised;
    }
    return (
      this.#lists.ordinary.has(key) ||
      capitalised ||
      (this.#small.get(key) ?? 0) >= (this.#lists.given.has(key) ? fewestUsesOfWord : 1)
    );
  }
}

/** The kind that most of the evidence speaks for; a person where it speaks for two alike. */
function majorityOf(own: Evidence | undefined): NameKind | null {
  if (own === undefined) return null;
  const person = 2 * own.person + own.acts;
  const most = Math.max(person, 2 * own.place, 2 * own.other);
  if (most === 0) return null;
  if (person === most) return 'person';
  return 2 * own.place === most ? 'place' : 'other name';
}

/** The same, where more than one act at the beginning of a sentence speaks for a person. */
function knownKind(own: Evidence | undefined): NameKind | null {
  const kind = majorityOf(own);
  return kind === 'person' && own!.person === 0 && own!.inside === 0 ? null : kind;
}

/** Whether a name holds a word that only institutions or places have in theirs. */
function institutionIn(words: readonly Capital[], cues: Cues): 'place' | 'organisation' | null {
  if (words.some(({ key }) => cues.organisationWords.has(key))) return 'organisation';
  return words.some(({ key }) => cues.placeWords.has(key)) ? 'place' : null;
}

/** "Ruths" is Ruth's, where Ruth is a name. */
function germanKey(key: string, given: ReadonlySet<string>): string {
  const base = key.endsWith('s') ? key.slice(0, -1) : key;
  return base.length > 2 && !given.has(key) && given.has(base) ? base : key;
}

function withoutMarks(key: string): string {
  return /[^a-z'-]/u.test(key) ? key.normalize('NFD').replace(/\p{M}/gu, '') : key;
}

function phraseOf(words: readonly Capital[]): string {
  return words.map(({ key }) => key).join(' ');
}
