import { countedForm, type Prepared, type TextSettings } from '../text/index.ts';
import type { WordPlaces } from './fit-job.ts';

export function placesOf(words: Prepared, settings: TextSettings): WordPlaces {
  const places = new Map(words.vocabulary.map((form, index) => [form, index]));
  return (word) => {
    const form = countedForm(word, settings);
    return form === null ? undefined : places.get(form);
  };
}
