import type { HowManyResult, Recommendation } from '../../engine/evidence/index.ts';
import { columns } from './columns.ts';
import { csv, type CsvOptions } from './csv.ts';
import { decimals } from './format.ts';

/** Numbers of themes compared, as lines to read. */
export function howManyText({ points, groups, people, recommendation }: HowManyResult): string {
  const table = columns(
    ['themes', 'perplexity', '(floor)', 'coherence', '(floor)', 'steadiness', '(floor)', ''],
    points.map(({ floor, ...point }) => [
      String(point.themes),
      point.perplexity.toFixed(1),
      floor.perplexity.toFixed(1),
      point.coherence.toFixed(3),
      floor.coherence.toFixed(3),
      point.steadiness.toFixed(3),
      floor.steadiness.toFixed(3),
      '',
    ]),
  );
  return [
    `Each number is fitted without decisions to ${people} participants, and again without each of ` +
      `${groups} groups of them. Perplexity is held out (lower is better); it keeps falling and does ` +
      'not choose.',
    'A floor is what the same study reaches with its words shuffled among the passages.',
    '',
    ...table,
    '',
    recommendationSentence(recommendation),
    '',
  ].join('\n');
}

/** What may be said about how many themes there are. It never chooses. */
export function recommendationSentence(recommendation: Recommendation): string {
  switch (recommendation.kind) {
    case 'range':
      return `${recommendation.from} to ${recommendation.to} cannot be told apart; read them.`;
    case 'one':
      return `${recommendation.themes} stands out; read it and the numbers beside it.`;
    case 'none':
      return (
        'No number of themes is more coherent than shuffled words; ' +
        'there may be too little text for themes, so read with care.'
      );
  }
}

/** NAME.howmany.csv: a row a number of themes. */
export function howManyCsv({ points }: HowManyResult, options: CsvOptions): string {
  const head = [
    'themes',
    'perplexity',
    'perplexity_floor',
    'coherence',
    'coherence_error',
    'coherence_floor',
    'steadiness',
    'steadiness_error',
    'steadiness_floor',
  ];
  const rows = points.map(({ floor, ...point }) => [
    point.themes,
    decimals(point.perplexity),
    decimals(floor.perplexity),
    decimals(point.coherence),
    decimals(point.coherenceError),
    decimals(floor.coherence),
    decimals(point.steadiness),
    decimals(point.steadinessError),
    decimals(floor.steadiness),
  ]);
  return csv([head, ...rows], options);
}
