/* Vite puts the text of a file in place of such an import; nothing is read at run time. */
declare module '*.txt?raw' {
  const text: string;
  export default text;
}

/* Lower-case words, by ISO 639-3 code; Norwegian is there as Bokmål. */
declare module 'stopword' {
  type Words = readonly string[];
  export const deu: Words, eng: Words, fra: Words, ita: Words, nld: Words;
  export const nob: Words, por: Words, rus: Words, spa: Words, swe: Words;
}
