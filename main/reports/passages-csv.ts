import type { Fitted } from '../../engine/themes/index.ts';
import type { Desk } from '../desk.ts';
import { csv, type CsvOptions } from './csv.ts';
import { decimals } from './format.ts';
import { printedProportions } from './proportions.ts';

/**
 * passages.csv: every passage of the fit with its proportions, a column a theme headed by its id.
 * `unexplained` is the mean negative log likelihood a counted word, in nats; empty where none was
 * counted, and the proportions are then the prior's.
 */
export function passagesCsv(desk: Desk, fitted: Fitted, options: CsvOptions): string {
  const { transcripts, participants } = desk.study;
  const head = [
    'transcript',
    'participant',
    'speaker',
    'passage',
    'start',
    'end',
    'words',
    'counted_words',
    'unexplained',
    ...fitted.fit.themes,
  ];
  const rows = fitted.words.passages.map((passage, index) => [
    transcripts.get(passage.transcript)?.name ?? '',
    participants.get(passage.participant)?.name ?? '',
    passage.speaker ?? '',
    passage.number,
    passage.start,
    passage.end,
    passage.words,
    passage.countedWords,
    passage.countedWords === 0 ? '' : decimals(fitted.unexplained[index]),
    ...printedProportions(fitted, index).map(decimals),
  ]);
  return csv([head, ...rows], options);
}
