import type { NameLists } from '../engine/text/index.ts';
import familyNames from '../resources/names/family-names.txt?raw';
import givenNames from '../resources/names/given-names.txt?raw';
import ownGivenNames from '../resources/names/given-names-own.txt?raw';
import places from '../resources/names/places.txt?raw';
import englishWords from '../resources/names/words-eng.txt?raw';
import { wordLists } from './word-lists.ts';

let lists: NameLists | null = null;

/** The names that come with the program; resources/names/README.md says where they are from. */
export function nameLists(): NameLists {
  // A hundred thousand names: put together when somebody first looks for any.
  lists ??= {
    given: without(setOf(`${givenNames}\n${ownGivenNames}`), smallWords()),
    family: without(setOf(familyNames), smallWords()),
    places: without(setOf(places), smallWords()),
    ordinary: new Set([
      ...setOf(englishWords),
      ...wordLists.eng.stopWords,
      ...wordLists.eng.fillers,
    ]),
  };
  return lists;
}

/** Small words that somebody is called by as well. */
const calledSo = new Set([
  'will',
  'may',
  'don',
  'guy',
  'dan',
  'hal',
  'jo',
  'sol',
  'sam',
  'art',
  'val',
]);

/** Words of the lists that every sentence has: no name, whoever may be called so. */
function smallWords(): ReadonlySet<string> {
  const all = new Set(
    Object.values(wordLists).flatMap(({ stopWords, fillers }) => [...stopWords, ...fillers]),
  );
  return without(all, calledSo);
}

function without(from: ReadonlySet<string>, what: ReadonlySet<string>): ReadonlySet<string> {
  return new Set([...from].filter((each) => !what.has(each)));
}

/** The lines of a list, and each without its marks: many write names without. */
function setOf(text: string): ReadonlySet<string> {
  const lines = text.split('\n').filter((line) => line !== '');
  return new Set([...lines, ...lines.map((line) => line.normalize('NFD').replace(/\p{M}/gu, ''))]);
}
