/** The commonest small words of languages: what a stretch of talk is told apart by. */
const commonWords: Readonly<Record<string, readonly string[]>> = {
  eng: 'the and to of a it i you that was in we they is he she on for my but so have do with not be this had what there me at were just when would'.split(
    ' ',
  ),
  deu: 'und die der das ich nicht ist es in zu den mit auf ein eine war so wir sie dann auch aber wie da man was dem von haben hat noch mir mich ja schon wenn'.split(
    ' ',
  ),
  fra: "et le la les de des un une je c'est que qui pas il elle on nous vous est dans pour ça ce mais avec en du au sur j'ai était y a plus comme".split(
    ' ',
  ),
  spa: 'y el la los las de que en un una no es yo lo se por con para me pero como más te le mi había muy ya está cuando porque del al'.split(
    ' ',
  ),
  ita: "e il la di che non un una è in per si ho mi con ma sono come lo le del della anche più era c'è perché io gli al".split(
    ' ',
  ),
  nld: 'en de het een ik dat is niet van in je was te die maar we dan er ook zo met op voor heb als wel ze nog bij om naar'.split(
    ' ',
  ),
  nor: 'og i det er jeg på en som at ikke til var med for vi de har så den av men å om et han da meg hun også'.split(
    ' ',
  ),
  por: 'e o a de que não um uma em eu para com é os as do da por se mas no na foi como mais ele ela muito já também'.split(
    ' ',
  ),
  rus: 'и в не на я что с он как это а но мы так у же по то она они за было был да из от все ну мне'.split(
    ' ',
  ),
  swe: 'och i det är jag på en som att inte till var med för vi de har så den av men om ett han då mig hon också'.split(
    ' ',
  ),
};

const sets = new Map(
  Object.entries(commonWords).map(([language, words]) => [language, new Set(words)]),
);

/**
 * The language that a text most likely is in, ISO 639-3, by its share of each language's commonest
 * small words; null where too little is said to tell, or two come out nearly alike.
 */
export function guessLanguage(text: string, least = 12): string | null {
  const words = (text.toLowerCase().match(/\p{L}[\p{L}\p{M}'’]*/gu) ?? []).map((word) =>
    word.replaceAll('’', "'"),
  );
  if (words.length < least) return null;
  let best: string | null = null;
  let most = 0;
  let second = 0;
  for (const [language, common] of sets) {
    const share = words.filter((word) => common.has(word)).length / words.length;
    if (share > most) {
      second = most;
      most = share;
      best = language;
    } else if (share > second) second = share;
  }
  // Kin languages share small words; two in three of the best is too near to tell.
  return most >= 0.15 && second * 5 <= most * 4 ? best : null;
}
