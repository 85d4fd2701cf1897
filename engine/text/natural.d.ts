/* The stemmers of the natural package carry no types of their own. */

declare module 'natural/lib/natural/stemmers/porter_stemmer.js' {
  const stemmer: { stem(word: string): string };
  export default stemmer;
}

declare module 'natural/lib/natural/stemmers/porter_stemmer_de.js' {
  const stemmer: { stem(word: string): string };
  export default stemmer;
}

declare module 'natural/lib/natural/stemmers/porter_stemmer_es.js' {
  const stemmer: { stem(word: string): string };
  export default stemmer;
}

declare module 'natural/lib/natural/stemmers/porter_stemmer_fr.js' {
  const stemmer: { stem(word: string): string };
  export default stemmer;
}

declare module 'natural/lib/natural/stemmers/porter_stemmer_it.js' {
  const stemmer: { stem(word: string): string };
  export default stemmer;
}

declare module 'natural/lib/natural/stemmers/porter_stemmer_nl.js' {
  const stemmer: { stem(word: string): string };
  export default stemmer;
}

declare module 'natural/lib/natural/stemmers/porter_stemmer_no.js' {
  const stemmer: { stem(word: string): string };
  export default stemmer;
}

declare module 'natural/lib/natural/stemmers/porter_stemmer_pt.js' {
  const stemmer: { stem(word: string): string };
  export default stemmer;
}

declare module 'natural/lib/natural/stemmers/porter_stemmer_ru.js' {
  const stemmer: { stem(word: string): string };
  export default stemmer;
}

declare module 'natural/lib/natural/stemmers/porter_stemmer_sv.js' {
  const stemmer: { stem(word: string): string };
  export default stemmer;
}
