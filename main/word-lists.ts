// Programs that take this file in need these types, not only this folder.
// eslint-disable-next-line @typescript-eslint/triple-slash-reference
/// <reference path="./untyped.d.ts" />
import { deu, eng, fra, ita, nld, nob, por, rus, spa, swe } from 'stopword';
import type { Language, LanguageLists, WordLists } from '../engine/text/index.ts';
import engFillers from '../resources/words/fillers-eng.txt?raw';
import engNegations from '../resources/words/negations-eng.txt?raw';
import engStopWords from '../resources/words/stop-words-eng.txt?raw';
import deuFillers from '../resources/words/fillers-deu.txt?raw';
import deuNegations from '../resources/words/negations-deu.txt?raw';
import deuStopWords from '../resources/words/stop-words-deu.txt?raw';
import spaFillers from '../resources/words/fillers-spa.txt?raw';
import spaNegations from '../resources/words/negations-spa.txt?raw';
import spaStopWords from '../resources/words/stop-words-spa.txt?raw';
import fraFillers from '../resources/words/fillers-fra.txt?raw';
import fraNegations from '../resources/words/negations-fra.txt?raw';
import fraStopWords from '../resources/words/stop-words-fra.txt?raw';
import itaFillers from '../resources/words/fillers-ita.txt?raw';
import itaNegations from '../resources/words/negations-ita.txt?raw';
import itaStopWords from '../resources/words/stop-words-ita.txt?raw';
import nldFillers from '../resources/words/fillers-nld.txt?raw';
import nldNegations from '../resources/words/negations-nld.txt?raw';
import nldStopWords from '../resources/words/stop-words-nld.txt?raw';
import norFillers from '../resources/words/fillers-nor.txt?raw';
import norNegations from '../resources/words/negations-nor.txt?raw';
import norStopWords from '../resources/words/stop-words-nor.txt?raw';
import porFillers from '../resources/words/fillers-por.txt?raw';
import porNegations from '../resources/words/negations-por.txt?raw';
import porStopWords from '../resources/words/stop-words-por.txt?raw';
import rusFillers from '../resources/words/fillers-rus.txt?raw';
import rusNegations from '../resources/words/negations-rus.txt?raw';
import rusStopWords from '../resources/words/stop-words-rus.txt?raw';
import sweFillers from '../resources/words/fillers-swe.txt?raw';
import sweNegations from '../resources/words/negations-swe.txt?raw';
import sweStopWords from '../resources/words/stop-words-swe.txt?raw';
import deuContent from '../resources/words/content-deu.txt?raw';
import sweContent from '../resources/words/content-swe.txt?raw';

/** The words of a list file: one a line, without comments. */
function wordsIn(text: string): string[] {
  return text
    .split('\n')
    .map((line) => line.trim())
    .filter((line) => line !== '' && !line.startsWith('#'));
}

/** The published list and our own, less what no list may leave out; each word once. */
function listsOf(
  published: readonly string[],
  own: string,
  fillers: string,
  keep: string,
): LanguageLists {
  const kept = new Set(wordsIn(keep));
  const all = new Set([...published.map((word) => word.trim()), ...wordsIn(own)]);
  return {
    stopWords: [...all].filter((word) => word !== '' && !kept.has(word)),
    fillers: wordsIn(fillers).filter((word) => !kept.has(word)),
  };
}

/** The word lists that come with the program; resources/words/README.md names their sources. */
export const wordLists: WordLists & Readonly<Record<Language, LanguageLists>> = {
  eng: listsOf(eng, engStopWords, engFillers, engNegations),
  deu: listsOf(deu, deuStopWords, deuFillers, `${deuNegations}\n${deuContent}`),
  spa: listsOf(spa, spaStopWords, spaFillers, spaNegations),
  fra: listsOf(fra, fraStopWords, fraFillers, fraNegations),
  ita: listsOf(ita, itaStopWords, itaFillers, itaNegations),
  nld: listsOf(nld, nldStopWords, nldFillers, nldNegations),
  nor: listsOf(nob, norStopWords, norFillers, norNegations),
  por: listsOf(por, porStopWords, porFillers, porNegations),
  rus: listsOf(rus, rusStopWords, rusFillers, rusNegations),
  swe: listsOf(swe, sweStopWords, sweFillers, `${sweNegations}\n${sweContent}`),
};
