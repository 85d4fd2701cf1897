const names: readonly (readonly string[])[] = [
  ['january', 'jan', 'januar', 'jänner', 'janvier', 'enero'],
  ['february', 'feb', 'februar', 'feber', 'février', 'febrero'],
  ['march', 'mar', 'märz', 'mär', 'mars', 'marzo'],
  ['april', 'apr', 'avril', 'abril'],
  ['may', 'mai', 'mayo'],
  ['june', 'jun', 'juni', 'juin', 'junio'],
  ['july', 'jul', 'juli', 'juillet', 'julio'],
  ['august', 'aug', 'août', 'agosto'],
  ['september', 'sep', 'sept', 'septembre', 'septiembre', 'setiembre'],
  ['october', 'oct', 'oktober', 'okt', 'octobre', 'octubre'],
  ['november', 'nov', 'novembre', 'noviembre'],
  ['december', 'dec', 'dezember', 'dez', 'décembre', 'diciembre'],
];

/** In one language: the names that a month's other spellings go with. */
const columns: readonly (readonly string[])[] = [
  'january february march april may june july august september october november december',
  'jan feb mar apr may jun jul aug sep oct nov dec',
  'januar februar märz april mai juni juli august september oktober november dezember',
  'janvier février mars avril mai juin juillet août septembre octobre novembre décembre',
  'enero febrero marzo abril mayo junio julio agosto septiembre octubre noviembre diciembre',
].map((line) => line.split(' '));

/** Days from 1 March of the year 0 in the Gregorian calendar, and back; months from 1. */
function dayNumber(year: number, month: number, day: number): number {
  const y = month <= 2 ? year - 1 : year;
  const m = (month + 9) % 12;
  return (
    365 * y +
    Math.floor(y / 4) -
    Math.floor(y / 100) +
    Math.floor(y / 400) +
    Math.floor((153 * m + 2) / 5) +
    day -
    1
  );
}

function dateOf(number: number): { year: number; month: number; day: number } {
  let year = Math.floor((10_000 * number + 14_780) / 3_652_425);
  let rest = number - dayNumber(year, 3, 1);
  if (rest < 0) {
    year--;
    rest = number - dayNumber(year, 3, 1);
  }
  const m = Math.floor((100 * rest + 52) / 3060);
  return {
    year: year + Math.floor((m + 2) / 12),
    month: ((m + 2) % 12) + 1,
    day: rest - Math.floor((m * 306 + 5) / 10) + 1,
  };
}

/**
 * A date moved by whole days, written as it was: "3 May 1987", "May 3rd", "1987-05-03", "3/5/1987"
 * (the day first, unless only the other way makes a date), "3. Mai". A date without a year moves as
 * in a year without a leap day. Null for what is no full date, such as "the second of March" or
 * "May 1987".
 */
export function shiftDate(text: string, days: number): string | null {
  return shiftNumbers(text, days) ?? shiftNamed(text, days);
}

const yearless = 2001;

function shiftNumbers(text: string, days: number): string | null {
  const match = /^(\d{1,4})([-/.])(\d{1,2})\2(\d{1,4})$/u.exec(text);
  if (match === null) return null;
  const [, first = '', mark = '', second = '', third = ''] = match;
  const yearFirst = first.length === 4;
  const dayFirst = Number(second) <= 12;
  const [year, month, day] = yearFirst
    ? [first, second, third]
    : dayFirst
      ? [third, second, first]
      : [third, first, second];
  const short = year.length <= 2;
  const full = short ? Number(year) + (Number(year) < 40 ? 2000 : 1900) : Number(year);
  if (!isDate(full, Number(month), Number(day))) return null;
  const moved = dateOf(dayNumber(full, Number(month), Number(day)) + days);
  const wide = (value: number, like: string): string =>
    like.startsWith('0') || like.length === 2 ? String(value).padStart(2, '0') : String(value);
  const y = short ? String(moved.year % 100).padStart(2, '0') : String(moved.year);
  const m = wide(moved.month, month);
  const d = wide(moved.day, day);
  const parts = yearFirst ? [y, m, d] : dayFirst ? [d, m, y] : [m, d, y];
  return parts.join(mark);
}

function shiftNamed(text: string, days: number): string | null {
  const month = /[\p{L}]{3,}/gu;
  const word = (text.match(month) ?? []).find((each) => monthOf(each) > 0);
  if (word === undefined) return null;
  const numbers = [...text.matchAll(/\d+/gu)];
  const dayMatch = numbers.find(([digits]) => digits.length <= 2 && Number(digits) <= 31);
  const yearMatch = numbers.find(([digits]) => digits.length === 4);
  if (dayMatch === undefined) return null;
  const year = yearMatch === undefined ? yearless : Number(yearMatch[0]);
  const day = Number(dayMatch[0]);
  if (!isDate(year, monthOf(word), day)) return null;
  const moved = dateOf(dayNumber(year, monthOf(word), day) + days);
  const pieces: { at: number; old: string; put: string }[] = [
    { at: text.indexOf(word), old: word, put: likeCase(word, nameLike(word, moved.month)) },
    dayPiece(text, dayMatch.index, dayMatch[0], moved.day),
  ];
  if (yearMatch !== undefined) {
    pieces.push({ at: yearMatch.index, old: yearMatch[0], put: String(moved.year) });
  }
  pieces.sort((a, b) => b.at - a.at);
  return pieces.reduce(
    (result, { at, old, put }) => result.slice(0, at) + put + result.slice(at + old.length),
    text,
  );
}

/** The day with its ending in English: 2nd -> 3rd. */
function dayPiece(text: string, at: number, old: string, day: number) {
  const ending = /^(?:st|nd|rd|th|er(?=\s))/iu.exec(text.slice(at + old.length))?.[0] ?? '';
  const teen = day % 100 >= 11 && day % 100 <= 13;
  const last = teen ? 0 : day % 10;
  const english = last === 1 ? 'st' : last === 2 ? 'nd' : last === 3 ? 'rd' : 'th';
  return {
    at,
    old: old + ending,
    put: String(day) + (ending === '' ? '' : ending === 'er' ? (day === 1 ? 'er' : '') : english),
  };
}

function monthOf(word: string): number {
  const key = word.toLowerCase();
  return names.findIndex((each) => each.includes(key)) + 1;
}

/** The name of a month in the language, and as short, as another. */
function nameLike(word: string, month: number): string {
  const key = word.toLowerCase();
  const same = columns.filter((each) => each[monthOf(word) - 1] === key);
  // "mai" is French and "Mai" German: the one writes months small.
  const column = (/^\p{Ll}/u.test(word) ? same.at(-1) : same[0]) ?? columns[0]!;
  return column[month - 1]!;
}

function likeCase(like: string, word: string): string {
  return /^\p{Lu}/u.test(like) ? word.charAt(0).toUpperCase() + word.slice(1) : word;
}

function isDate(year: number, month: number, day: number): boolean {
  if (!(month >= 1 && month <= 12 && day >= 1 && day <= 31)) return false;
  const back = dateOf(dayNumber(year, month, day));
  return back.year === year && back.month === month && back.day === day;
}
