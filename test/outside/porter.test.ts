import { expect, test } from 'vitest';
import { stemmerFor } from '../../engine/text/index.ts';
import values from './values/porter.json' with { type: 'json' };

// Porter (1980); made with nltk's original algorithm, see the file.
test('English stems are those of Porter (1980)', () => {
  const stem = stemmerFor('eng');
  expect(values.stems.map(([word]) => [word, stem(word!)])).toEqual(values.stems);
});
