// Every program that takes this file in needs these types, not only the engine's own.
// eslint-disable-next-line @typescript-eslint/triple-slash-reference
/// <reference path="./natural.d.ts" />
import english from 'natural/lib/natural/stemmers/porter_stemmer.js';
import german from 'natural/lib/natural/stemmers/porter_stemmer_de.js';
import spanish from 'natural/lib/natural/stemmers/porter_stemmer_es.js';
import french from 'natural/lib/natural/stemmers/porter_stemmer_fr.js';
import italian from 'natural/lib/natural/stemmers/porter_stemmer_it.js';
import dutch from 'natural/lib/natural/stemmers/porter_stemmer_nl.js';
import norwegian from 'natural/lib/natural/stemmers/porter_stemmer_no.js';
import portuguese from 'natural/lib/natural/stemmers/porter_stemmer_pt.js';
import russian from 'natural/lib/natural/stemmers/porter_stemmer_ru.js';
import swedish from 'natural/lib/natural/stemmers/porter_stemmer_sv.js';
import type { Language } from './language.ts';
import { formOf } from './words.ts';

const stemmers: Readonly<Record<Language, { stem(word: string): string }>> = {
  eng: english,
  deu: german,
  spa: spanish,
  fra: french,
  ita: italian,
  nld: dutch,
  nor: norwegian,
  por: portuguese,
  rus: russian,
  swe: swedish,
};

/**
 * What turns a word form into its stem: Porter (1980) for English, the Snowball family for the
 * others, as the `natural` package has them. A stem that came out empty stays the word.
 */
export function stemmerFor(language: Language): (form: string) => string {
  const stemmer = stemmers[language];
  return (form) => stemmer.stem(form) || form;
}

/** The stem that a typed word is searched by, whatever the study counts; null for no single word. */
export function searchForm(word: string, language: Language): string | null {
  const form = formOf(word, language);
  return form === null ? null : stemmerFor(language)(form);
}
