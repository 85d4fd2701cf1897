/** ISO 639-3 codes of the languages that we have word lists and stemmers for. */
export const languages = [
  'eng',
  'deu',
  'spa',
  'fra',
  'ita',
  'nld',
  'nor',
  'por',
  'rus',
  'swe',
] as const;

export type Language = (typeof languages)[number];

export function isLanguage(code: string): code is Language {
  return (languages as readonly string[]).includes(code);
}
