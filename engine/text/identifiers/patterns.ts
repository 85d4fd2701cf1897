import type { IdentifierKind } from '../../spans/index.ts';

/** A stretch that has the shape of an identifier. */
export interface Shaped {
  readonly kind: IdentifierKind;
  readonly start: number;
  readonly end: number;
}

interface Pattern {
  readonly kind: IdentifierKind;
  readonly shape: RegExp;
  /** Looks at a match and what stands before it; refuses what only looks like one. */
  readonly holds?: (match: RegExpExecArray, text: string) => boolean;
}

const months = [
  'january february march april may june july august september october november december',
  'jan feb mar apr jun jul aug sep sept oct nov dec',
  'januar jänner februar feber märz mai juni juli oktober dezember mär okt dez',
  'janvier février mars avril juin juillet août septembre octobre novembre décembre',
  'enero febrero marzo abril mayo junio julio agosto septiembre setiembre octubre noviembre diciembre',
]
  .join(' ')
  .split(' ')
  .sort((a, b) => b.length - a.length)
  .join('|');
const notInWord = String.raw`(?<![\p{L}\p{N}])`;
const notOnward = String.raw`(?![\p{L}\p{N}])`;
const year = String.raw`(?:1[89]|20)\d{2}`;
const day = String.raw`(?<!:)(?:0?[1-9]|[12]\d|3[01])`;
const ordinalDay = String.raw`${day}(?:st|nd|rd|th|er|\.)?`;
const spokenDays = [
  'first second third fourth fifth sixth seventh eighth ninth tenth eleventh twelfth thirteenth',
  'fourteenth fifteenth sixteenth seventeenth eighteenth nineteenth twentieth twenty-first',
  'twenty-second twenty-third twenty-fourth twenty-fifth twenty-sixth twenty-seventh',
  'twenty-eighth twenty-ninth thirtieth thirty-first',
]
  .join(' ')
  .split(' ')
  .join('|')
  .replaceAll('-', '[- ]');

const digitWords =
  'zero|oh|nought|one|two|three|four|five|six|seven|eight|nine|null|eins|zwei|zwo|drei|vier|fünf|sechs|sieben|acht|neun|zéro|un|deux|trois|quatre|cinq|sept|huit|neuf|cero|uno|dos|tres|cuatro|cinco|seis|siete|ocho|nueve';
const spokenDigit = String.raw`(?:(?:double|treble|triple)[ ,-]+)?(?:${digitWords}|\d)`;

const topLevels =
  'com|org|net|edu|gov|int|info|biz|io|eu|uk|ie|de|at|ch|fr|be|lu|es|it|nl|no|se|dk|fi|is|pt|pl|cz|us|ca|au|nz|za|ng|in|scot|cat|wales|cymru|museum|coop|name|online|shop|blog|app|dev|me|tv|co|ac|example|test';

const telephoneCue =
  /(?<![\p{L}])(?:tel|telephone|telefon|téléphone|teléfono|phone|phoned?|mobile|mobil|handy|portable|móvil|call(?:ed)?|ring|rang|text(?:ed)?|fax|whatsapp|extension|ext|dial(?:led)?|landline|anrufen|erreichen|appele[rz]?|llam\w+)\b[^\n.!?]{0,40}$/iu;
const numberCue =
  /(?<![\p{L}])(?:number|nummer|numéro|número|num|no|nr|nº|n°|#|id|ref|reference|referenz|référence|referencia|licen[cs]e|policy|account|acct|konto|kontonummer|compte|cuenta|iban|card|karte|carte|tarjeta|passport|reisepass|passeport|pasaporte|registration|registered|reg|kennzeichen|immatriculation|matrícula|case|claim|member(?:ship)?|student|employee|staff|payroll|invoice|patient|hospital|chart|record|file|hull|plate|badge|pin|sort code|serial|versicherungsnummer|sécurité sociale|afiliación|expediente|aktenzeichen|vrn|permit|tag)\b[^\n.!?]{0,24}$/iu;
const postcodeCue =
  /(?:post ?code|zip(?: code)?|postleitzahl|plz|code postal|código postal)\b[^\n.!?]{0,16}$/iu;
const ageCue =
  /(?:\bage|\baged|\blived to(?: be)?|\bmade it to|\blive to(?: be)?|\bturn(?:s|ed|ing)?|\b(?:he|she|they|i|mum|mam|dad|granny|gran|nan|grandad|mother|father)(?:['’]s|['’]m|['’]re| was| is| were| are| am| be)(?: now| nearly| almost| about| only| already| just| over)*|\bis now|\bnearly|\bwird|\bwurde|\bist|\bwar|\ba|\bavait|\baura|\btiene|\btenía|\bcumpl\w+)\s+$/iu;

const spokenAges =
  'ninety(?:[- ](?:one|two|three|four|five|six|seven|eight|nine))?|(?:a|one) hundred(?: and (?:one|two|three|four|five|six|seven|eight|nine|ten))?|(?:ein|zwei|drei|vier|fünf|sechs|sieben|acht|neun)?(?:und)?neunzig|hundert(?:eins|zwei|drei|vier)?|quatre-vingt-(?:dix|onze|douze|treize|quatorze|quinze|seize|dix-sept|dix-huit|dix-neuf)|cent(?: (?:un|deux|trois|quatre))?|noventa(?: y (?:uno|dos|tres|cuatro|cinco|seis|siete|ocho|nueve))?|cien(?:to (?:uno|dos|tres))?';

function pattern(
  kind: IdentifierKind,
  shape: string,
  holds?: Pattern['holds'],
  flags = 'giu',
): Pattern {
  return { kind, shape: new RegExp(shape, flags), ...(holds === undefined ? {} : { holds }) };
}

/** In order: what an earlier one takes, a later one leaves alone. */
const patterns: readonly Pattern[] = [
  pattern(
    'e-mail',
    String.raw`[\p{L}\p{N}][\p{L}\p{N}._%+'-]*@[\p{L}\p{N}-]+(?:\.[\p{L}\p{N}-]+)+`,
  ),
  pattern('e-mail', String.raw`[\p{L}\p{N}][\p{L}\p{N}._%+'-]*@(?:[\p{L}\p{N}-]{2,})(?=$|[\s,;)])`),
  pattern(
    'e-mail',
    String.raw`${notInWord}[\p{L}\p{N}_-]+(?:\s+(?:dot|punkt|point|punto)\s+[\p{L}\p{N}_-]+)*\s+(?:at|ät|arobase|arroba)\s+[\p{L}\p{N}-]+(?:\s+[\p{L}\p{N}-]+)?(?:\.[\p{L}\p{N}-]{2,}|\s+(?:dot|punkt|point|punto)\s+[\p{L}\p{N}-]{2,})+${notOnward}`,
    ([match]) => new RegExp(`\\s(?:dot|punkt|point|punto)\\s+(?:${topLevels})$`, 'iu').test(match),
  ),
  pattern(
    'e-mail',
    String.raw`[\p{L}\p{N}][\p{L}\p{N}._%+-]*\s*[\[(](?:at|ät)[\])]\s*[\p{L}\p{N}-]+(?:\s*(?:\.|[\[(](?:dot|punkt)[\])])\s*[\p{L}\p{N}-]+)+`,
  ),
  pattern('web', String.raw`(?:https?|ftp):\/\/[^\s<>"“”«»]*[\p{L}\p{N}\/=#]`),
  pattern('web', String.raw`${notInWord}www\.[^\s<>"“”«»]*[\p{L}\p{N}\/=#]`),
  pattern(
    'web',
    String.raw`${notInWord}(?:[\p{L}\p{N}-]+\.)+(?:${topLevels})(?:\/[^\s<>"“”«»]*[\p{L}\p{N}\/=#])?${notOnward}(?!\.\p{L})`,
    ([match]) => !/^(?:\p{L}\.)+\p{L}+$/u.test(match) && !/^\d/.test(match),
  ),
  pattern(
    'web',
    String.raw`${notInWord}(?:www|double you[- ]double you[- ]double you)\s+dot\s+[\p{L}\p{N}-]+(?:\s+dot\s+[\p{L}\p{N}-]+)+${notOnward}`,
  ),
  pattern(
    'web',
    String.raw`${notInWord}[\p{L}\p{N}-]+(?:\s+(?:dot|punkt|point|punto)\s+(?:com|org|net|co|uk|ie|de|fr|es|eu|info|scot))+(?:\s+(?:slash|forward slash)\s+[\p{L}\p{N}-]+)*${notOnward}`,
  ),
  pattern('web', String.raw`(?<![\p{L}\p{N}@.])@[\p{L}\p{N}_][\p{L}\p{N}_.]{1,28}[\p{L}\p{N}_]`),
  pattern('web', String.raw`${notInWord}(?:\d{1,3}\.){3}\d{1,3}${notOnward}`, ([match]) =>
    match.split('.').every((part) => Number(part) < 256),
  ),
  pattern('web', String.raw`${notInWord}(?:[0-9a-f]{2}[:-]){5}[0-9a-f]{2}${notOnward}`),

  // Account numbers before telephones: both are rows of figures.
  pattern(
    'number',
    String.raw`${notInWord}\p{L}{2}\d{2}(?:[ -]?[\p{L}\p{N}]{4}){2,7}(?:[ -]?[\p{L}\p{N}]{1,4})?${notOnward}`,
    ([match]) => (match.match(/\d/g)?.length ?? 0) >= 10 && /^[A-Z]{2}/.test(match),
    'gu',
  ),
  pattern('number', String.raw`${notInWord}(?:\d{4}[ -]){3}\d{1,7}${notOnward}`),
  pattern('number', String.raw`${notInWord}\d{3}-\d{2}-\d{4}${notOnward}`),
  pattern(
    'number',
    String.raw`${notInWord}[A-CEGHJ-PR-TW-Z][A-CEGHJ-NPR-TW-Z] ?\d{2} ?\d{2} ?\d{2} ?[A-D]${notOnward}`,
    undefined,
    'gu',
  ),
  pattern(
    'number',
    String.raw`${notInWord}[12] ?\d{2} ?(?:0[1-9]|1[0-2]|[2-9]\d) ?(?:\d{2}|2[AB]) ?\d{3} ?\d{3}(?: ?\d{2})?${notOnward}`,
  ),
  pattern('number', String.raw`${notInWord}\d{8}-?[A-HJ-NP-TV-Z]${notOnward}`, undefined, 'gu'),
  pattern('number', String.raw`${notInWord}\d{2}-\d{2}-\d{2}${notOnward}`, (match, text) =>
    /(?:sort|bank|account|code)\b[^\n]{0,30}$/iu.test(before(text, match.index, 48)),
  ),
  pattern('number', String.raw`${notInWord}\d{3} \d{3} \d{4}${notOnward}`, (match, text) =>
    /\b(?:NHS|CHI|hospital|patient)\b[^\n]{0,30}$/iu.test(before(text, match.index, 48)),
  ),

  // Dates.
  pattern('date', String.raw`${notInWord}${year}[-\/.](?:0?[1-9]|1[0-2])[-\/.]${day}${notOnward}`),
  pattern(
    'date',
    String.raw`${notInWord}${day}[\/.-](?:0?[1-9]|1[0-2])[\/.-](?:${year}|\d{2})${notOnward}`,
  ),
  pattern(
    'date',
    String.raw`${notInWord}(?:0?[1-9]|1[0-2])\/${day}\/(?:${year}|\d{2})${notOnward}`,
  ),
  pattern(
    'date',
    String.raw`${notInWord}(?:the\s+|el\s+|le\s+|am\s+)?${ordinalDay}(?:\s+(?:of|de|du))?\s+(?:${months})\.?(?:,?\s+(?:de\s+|del\s+)?${year}|\s+['’]\d{2})?${notOnward}`,
  ),
  pattern(
    'date',
    String.raw`${notInWord}(?:${months})\.?\s+(?:the\s+)?${ordinalDay}(?:,?\s+${year})?${notOnward}(?![:.]\d)(?!\s*(?:%|per|people|years?|months?|weeks?|days?|hours?|minutes?))`,
    ([match]) => !/^(?:may|march)\s/u.test(match),
  ),
  pattern(
    'date',
    String.raw`${notInWord}(?:the\s+)?(?:${spokenDays})\s+(?:of\s+)?(?:${months})(?:,?\s+${year})?${notOnward}`,
    ([match]) => !/(?:second|first)\s(?:may|march)$/u.test(match),
  ),
  pattern('date', String.raw`${notInWord}(?:${months})\s+the\s+(?:${spokenDays})${notOnward}`),
  pattern(
    'date',
    String.raw`${notInWord}(?:${months})\.?,?\s+(?:of\s+|de\s+|del\s+)?${year}${notOnward}`,
  ),

  // Postcodes.
  pattern(
    'postcode',
    String.raw`${notInWord}(?:GIR ?0AA|[A-Z]{1,2}\d[A-Z\d]? ?\d[ABD-HJLNP-UW-Z]{2})${notOnward}`,
    undefined,
    'gu',
  ),
  pattern(
    'postcode',
    String.raw`${notInWord}[a-z]{1,2}\d[a-z\d]? \d[abd-hjlnp-uw-z]{2}${notOnward}`,
    undefined,
    'gu',
  ),
  pattern(
    'postcode',
    String.raw`${notInWord}[ABCEGHJ-NPRSTVXY]\d[A-Z] ?\d[A-Z]\d${notOnward}`,
    undefined,
    'gu',
  ),
  pattern(
    'postcode',
    String.raw`${notInWord}[AC-FHKNPRTV-Y]\d[0-9W] ?[0-9AC-FHKNPRTV-Y]{4}${notOnward}`,
    ([match]) => /\d.*\d/u.test(match) && /\d/.test(match.slice(-4)),
    'gu',
  ),
  pattern(
    'postcode',
    String.raw`${notInWord}[1-9]\d{3} ?[A-Z]{2}${notOnward}(?!\s*\d)`,
    ([match]) => !/(?:AM|PM|BC|AD|CE|KM|KG|CM|ML|HZ)$/u.test(match),
    'gu',
  ),
  pattern('postcode', String.raw`${notInWord}\d{5}-\d{4}${notOnward}`),
  pattern(
    'postcode',
    String.raw`(?<=${notInWord}(?:AL|AK|AZ|AR|CA|CO|CT|DE|FL|GA|HI|IA|ID|IL|IN|KS|KY|LA|MA|MD|ME|MI|MN|MO|MS|MT|NC|ND|NE|NH|NJ|NM|NV|NY|OH|OK|OR|PA|RI|SC|SD|TN|TX|UT|VA|VT|WA|WI|WV|WY) )\d{5}${notOnward}`,
    undefined,
    'gu',
  ),
  pattern(
    'postcode',
    String.raw`${notInWord}(?:(?:D|A|CH|F|E|L|B|DE|AT|FR|ES)-)\d{4,5}${notOnward}`,
    undefined,
    'gu',
  ),
  pattern(
    'postcode',
    String.raw`(?<![\p{L}\p{N}.,€$£])\d{5}(?=,? \p{Lu}\p{Ll}{2,})`,
    undefined,
    'gu',
  ),
  pattern(
    'postcode',
    String.raw`${notInWord}[\p{N}\p{L}]{2,4}[ -]?[\p{N}\p{L}]{1,4}${notOnward}`,
    (match, text) => /\d/.test(match[0]) && postcodeCue.test(before(text, match.index, 40)),
  ),

  // Registrations of vehicles and boats.
  pattern('number', String.raw`${notInWord}[A-Z]{2}\d{2} ?[A-Z]{3}${notOnward}`, undefined, 'gu'),
  pattern(
    'number',
    String.raw`${notInWord}[A-ZÄÖÜ]{1,3}-[A-Z]{1,2} ?\d{1,4}[EH]?${notOnward}`,
    undefined,
    'gu',
  ),
  pattern('number', String.raw`${notInWord}[A-Z]{2}-\d{3}-[A-Z]{2}${notOnward}`, undefined, 'gu'),
  pattern(
    'number',
    String.raw`${notInWord}\d{4} ?[BCDFGHJKLMNPRSTVWXYZ]{3}${notOnward}`,
    undefined,
    'gu',
  ),

  // Telephones.
  pattern(
    'telephone',
    String.raw`(?<![\p{L}\p{N}.,/-])\+\d[\d\s()./-]{6,20}\d${notOnward}`,
    ([match]) => digits(match) >= 8 && digits(match) <= 15,
  ),
  pattern(
    'telephone',
    String.raw`(?<![\p{L}\p{N}.,/:-])\(?0\d{1,5}\)?(?:[ ./-]?\d){4,10}${notOnward}(?![:/]\d)`,
    ([match]) => digits(match) >= 8 && digits(match) <= 14,
  ),
  pattern(
    'telephone',
    String.raw`(?<![\p{L}\p{N}.,/-])\(?\d{3}\)?[ .-]?\d{3}[ .-]\d{4}${notOnward}`,
  ),
  pattern(
    'telephone',
    String.raw`(?<![\p{L}\p{N}.,/-])(?:[6789]\d{2}[ .-]?\d{3}[ .-]?\d{3}|[6789]\d{2}(?:[ .-]\d{2}){3})${notOnward}`,
  ),
  pattern(
    'telephone',
    String.raw`(?<![\p{L}\p{N}.,/€$£-])\d{3}[- ]\d{4}${notOnward}`,
    (match, text) => match[0].includes('-') || telephoneCue.test(before(text, match.index, 64)),
  ),
  pattern(
    'telephone',
    String.raw`(?<![\p{L}\p{N}.,/€$£-])\d(?:[ ./-]?\d){4,13}${notOnward}(?!\s*(?:pounds|euros?|dollars|quid|people|miles|kilomet))`,
    (match, text) =>
      isTelephone(match[0], before(text, match.index, 64)) &&
      !numberOnly(before(text, match.index, 64)) &&
      !/^(?:1[89]|20)\d{2}(?:\D(?:1[89]|20)\d{2})?$/u.test(match[0]),
  ),
  pattern(
    'telephone',
    String.raw`${notInWord}${spokenDigit}(?:[ ,-]+${spokenDigit}){5,14}${notOnward}`,
  ),

  // Other numbers, by what is said before them.
  pattern(
    'number',
    String.raw`${notInWord}(?=[\p{L}\p{N}\/-]*\d)[\p{Lu}\p{N}][\p{Lu}\p{N}\/-]{3,18}(?:[ -]\d{2,8})*${notOnward}`,
    (match, text) =>
      digits(match[0]) >= 3 &&
      !/^(?:1[89]|20)\d{2}(?:s|er)?$/u.test(match[0]) &&
      numberCue.test(before(text, match.index, 44)),
    'gu',
  ),
  pattern(
    'number',
    String.raw`${notInWord}[A-Z]{1,3} ?\d{2,5}${notOnward}`,
    (match, text) =>
      /(?:registration|registered|hull|boat|vessel|licence|license|passport|kennzeichen|matrícula|immatriculation|plate|permit)\b[^\n.!?]{0,30}$/iu.test(
        before(text, match.index, 48),
      ),
    'gu',
  ),
  pattern('number', String.raw`${notInWord}\d{8,}${notOnward}`),

  // Ages over 89.
  pattern(
    'age',
    String.raw`${notInWord}(?:9\d|1[01]\d)(?:[- ]?years?[- ]olds?|[- ]?year[- ]old| yrs? old| ?yo\b| Jahre(?: alt)?|-jährige?[rns]?|jährige?[rns]?| ans| años)${notOnward}`,
  ),
  pattern(
    'age',
    String.raw`${notInWord}(?:${spokenAges})(?:[- ]years?[- ]olds?|[- ]year[- ]old| Jahre alt| ans| años)${notOnward}`,
  ),
  pattern(
    'age',
    String.raw`${notInWord}(?:9\d|1[01]\d)${notOnward}(?!\s*(?:%|per|pounds?|quid|euros?|dollars?|miles?|metres?|meters?|kilo\w*|minutes?|hours?|people|percent|days?|weeks?|months?|boats?|houses?|of\b|[.,:]?\d))`,
    (match, text) => ageCue.test(before(text, match.index, 48)),
  ),
  pattern(
    'age',
    String.raw`${notInWord}(?:ninety(?:[- ](?:one|two|three|four|five|six|seven|eight|nine))?)${notOnward}(?!\s*(?:%|per|pounds?|quid|euros?|dollars?|miles?|metres?|minutes?|hours?|people|percent|days?|weeks?|months?|boats?|of\b))`,
    (match, text) => ageCue.test(before(text, match.index, 48)),
  ),
];

function before(text: string, at: number, length: number): string {
  return text.slice(Math.max(0, at - length), at);
}

function digits(match: string): number {
  return match.match(/\d/g)?.length ?? 0;
}

/** Grouped figures behind "number", or any behind a word for the telephone. */
function isTelephone(match: string, before: string): boolean {
  if (telephoneCue.test(before)) return true;
  return (
    digits(match) >= 6 &&
    (/^0/u.test(match) || / /u.test(match)) &&
    /(?:number|nummer|numéro|número)\b[^\n.!?]{0,40}$/iu.test(before)
  );
}

function numberOnly(before: string): boolean {
  return /(?:account|konto|policy|licen[cs]e|passport|case|claim|reference|ref|registration|member\w*|permit|cuenta|compte|file|invoice|student|employee|payroll|staff)\b[^\n.!?]{0,44}$/iu.test(
    before,
  );
}

/** Times of a recording are no identifiers, and there are many of them. */
const recordingTime = /[[(]?\b\d{1,3}:\d{2}(?::\d{2})?(?:[.,]\d{1,3})?\b[\])]?/gu;

/** Without one of these nearby no pattern holds. */
const trigger = new RegExp(
  [
    String.raw`[\d@]`,
    String.raw`www|:\/\/`,
    String.raw`[a-z]\.[a-z]{2}`,
    String.raw`\s(?:dot|punkt|point|punto|arroba|arobase)\s`,
    'ninety|neunzig|noventa|quatre-vingt-|hundred|hundert|cien',
    String.raw`\s(?:oh|zero|double|treble|null|zwo|zéro|cero)\s`,
    String.raw`(?:${spokenDays})\s+(?:of\s+)?(?:${months})`,
    String.raw`(?:${months})\s+the\s`,
    String.raw`\s(?:${digitWords})[ ,-]+(?:${digitWords})[ ,-]+(?:${digitWords})[ ,-]`,
  ].join('|'),
  'giu',
);
const around = 96;

/**
 * Everything in a text that has the shape of a contact, a date, an age over 89, a postcode or a
 * number, in order and apart. The shapes are those in general use in the United Kingdom, Ireland,
 * North America, Germany, Austria, Switzerland, France and Spain; they come from practice, not from
 * one published list.
 */
export function shapedIdentifiers(text: string): Shaped[] {
  const plain = text.replace(recordingTime, (time) => ' '.repeat(time.length));
  const found: Shaped[] = [];
  for (const window of windowsOf(plain)) {
    const part = plain.slice(window.start, window.end);
    for (const { kind, start, end } of shapedIn(part)) {
      found.push({ kind, start: start + window.start, end: end + window.start });
    }
  }
  return found;
}

/** The stretches in which something may be found, apart, cut at white space. */
function windowsOf(text: string): { start: number; end: number }[] {
  const windows: { start: number; end: number }[] = [];
  trigger.lastIndex = 0;
  for (let match = trigger.exec(text); match !== null; match = trigger.exec(text)) {
    let start = Math.max(0, match.index - around);
    let end = Math.min(text.length, match.index + match[0].length + around);
    while (start > 0 && !/\s/u.test(text.charAt(start - 1))) start--;
    while (end < text.length && !/\s/u.test(text.charAt(end))) end++;
    const last = windows[windows.length - 1];
    if (last !== undefined && start <= last.end) last.end = Math.max(last.end, end);
    else windows.push({ start, end });
    // What lies inside the window is looked at anyway.
    trigger.lastIndex = Math.max(trigger.lastIndex, end - around);
  }
  return windows;
}

function shapedIn(text: string): Shaped[] {
  const found: Shaped[] = [];
  for (const { kind, shape, holds } of patterns) {
    shape.lastIndex = 0;
    for (let match = shape.exec(text); match !== null; match = shape.exec(text)) {
      if (match[0] === '') {
        shape.lastIndex++;
        continue;
      }
      const start = match.index;
      const end = start + match[0].length;
      if (found.some((other) => start < other.end && other.start < end)) continue;
      if (holds !== undefined && !holds(match, text)) {
        // A shorter match may begin inside what was refused.
        shape.lastIndex = start + 1;
        continue;
      }
      const lead = kind === 'date' ? (/^(?:the|el|le|am)\s+/iu.exec(match[0])?.[0].length ?? 0) : 0;
      found.push({ kind, start: start + lead, end });
    }
  }
  return found.sort((a, b) => a.start - b.start);
}
