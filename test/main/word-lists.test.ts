import { expect, test } from 'vitest';
import { formOf, languages } from '../../engine/text/index.ts';
import { wordLists } from '../../main/word-lists.ts';

test('there are lists for every language, of single words', () => {
  for (const language of languages) {
    const { stopWords, fillers } = wordLists[language];
    expect(stopWords.length).toBeGreaterThan(50);
    expect(fillers.length).toBeGreaterThan(10);
    for (const filler of fillers) expect(formOf(filler, language)).not.toBeNull();
  }
});

test.each([
  ['eng', ['not', 'no', 'never', "can't", "don't", 'nobody', 'nothing', 'without', 'canna']],
  ['deu', ['nicht', 'nein', 'nie', 'kein', 'keine', 'niemand', 'ohne']],
  ['fra', ['pas', 'non', 'jamais', 'rien', 'sans']],
  ['spa', ['no', 'nunca', 'nada', 'nadie', 'sin']],
  ['ita', ['non', 'no', 'mai', 'senza']],
  ['nld', ['niet', 'nee', 'nooit', 'geen', 'zonder']],
  ['nor', ['ikke', 'nei', 'aldri', 'ingen', 'uten']],
  ['por', ['não', 'nunca', 'nada', 'sem', 'nem']],
  ['rus', ['не', 'нет', 'никогда', 'без']],
  ['swe', ['inte', 'nej', 'aldrig', 'ingen', 'utan']],
] as const)('negations in %s are on no list', (language, negations) => {
  const left = new Set([...wordLists[language].stopWords, ...wordLists[language].fillers]);
  expect(negations.filter((word) => left.has(word))).toEqual([]);
});

test('the commonest words of English speech are on a list', () => {
  const left = new Set([...wordLists.eng.stopWords, ...wordLists.eng.fillers]);
  const common = ['the', 'and', "i'm", "they're", 'she', 'um', 'mm-hm', 'yeah', 'going', 'thing'];
  expect(common.filter((word) => !left.has(word))).toEqual([]);
});
