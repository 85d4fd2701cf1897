import { unexplainedPassages, type SteadinessResult } from '../../engine/evidence/index.ts';
import { settingsOf, type Fitted } from '../../engine/themes/index.ts';
import { themeConcentrations } from '../concentration.ts';
import type { Desk } from '../desk.ts';
import { columns } from './columns.ts';
import { csv, type CsvOptions } from './csv.ts';
import { decimals } from './format.ts';
import { themeName } from './theme-name.ts';

interface Row {
  readonly id: string;
  readonly name: string;
  readonly measured: SteadinessResult['themes'][number];
  /** People with a passage that the theme leads, and the one with most of its words. */
  readonly people: number;
  readonly person: string;
  readonly personShare: number;
  readonly question: string;
  readonly questionShare: number;
}

/** Steadiest first. */
function rowsOf(desk: Desk, fitted: Fitted, result: SteadinessResult): Row[] {
  const { themes, participants } = desk.study;
  const concentrations = themeConcentrations(desk, fitted);
  return fitted.fit.themes
    .map((id, row): Row => {
      const theme = themes.get(id);
      const { people, questions } = concentrations[row];
      return {
        id,
        name: theme === undefined ? id : themeName(theme, fitted),
        measured: result.themes[row],
        people: people.led,
        person: people.most === null ? '' : (participants.get(people.most)?.name ?? people.most),
        personShare: people.share,
        question: questions.most ?? '',
        questionShare: questions.share,
      };
    })
    .sort((a, b) => b.measured.steadiness - a.measured.steadiness);
}

/** How steady the themes of a fit are, as lines to read. */
export function steadinessText(desk: Desk, fitted: Fitted, result: SteadinessResult): string {
  const { floor, refits, refitsAtLeast, people, leftOut } = result;
  const two = (value: number): string => value.toFixed(2);
  const percent = (share: number): string => `${Math.round(100 * share)} %`;
  const rows = rowsOf(desk, fitted, result);
  const table = columns(
    ['steadiness', 'coherence', 'stayed', 'people', 'from one person', 'after one question', ''],
    [
      ...rows.map(({ name, measured, ...row }) => [
        two(measured.steadiness),
        two(measured.coherence),
        `${measured.stayed} of ${measured.passages}`,
        String(row.people),
        percent(row.personShare),
        percent(row.questionShare),
        name,
      ]),
      [two(floor.steadiness), two(floor.coherence), percent(floor.stayed), '', '', '', '(floor)'],
    ],
  );
  const above = rows.filter(({ measured }) => measured.steadiness > floor.steadiness).length;
  return [
    `Each of ${refits} re-fits leaves out ${leftOut} of ${people} participants. A passage has stayed ` +
      `where its theme leads it again, by its words alone, in at least ${refitsAtLeast} of ${refits}.`,
    'Steadiness is the mean cosine between what sets a theme apart from the words of the study as a ' +
      'whole, and the same in the re-fits; 1 at most.',
    'The floor is what the same study reaches with its words shuffled among the passages.',
    '',
    ...table,
    '',
    `${above} of ${rows.length} themes are steadier than the floor.`,
    `Strength: shuffled words reach ${two(floor.strength)}; a lower strength says little.`,
    `Held-out perplexity ${result.perplexity.toFixed(1)}, with shuffled words ` +
      `${floor.perplexity.toFixed(1)} (lower is better; ${result.scoredWords} words scored).`,
    ...unexplainedLines(desk, fitted),
    '',
  ].join('\n');
}

const unexplainedShown = 5;

function unexplainedLines(desk: Desk, fitted: Fitted): string[] {
  const { passages } = fitted.words;
  const worst = unexplainedPassages(
    fitted.unexplained,
    passages.map(({ countedWords }) => countedWords),
    settingsOf(desk.study.settings).suggestions.countedWords,
    unexplainedShown,
  );
  if (worst.length === 0) return [];
  return [
    'Unexplained:',
    ...worst.map(({ passage, surprise }) => {
      const { transcript, number } = passages[passage];
      const name = desk.study.transcripts.get(transcript)?.name ?? transcript;
      return `  ${name}, passage ${number} (${surprise.toFixed(2)} nats a word)`;
    }),
  ];
}

/** NAME.steady.csv: a row a theme, steadiest first. */
export function steadinessCsv(
  desk: Desk,
  fitted: Fitted,
  result: SteadinessResult,
  options: CsvOptions,
): string {
  const { floor, refits, refitsAtLeast } = result;
  const head = [
    'theme_id',
    'theme',
    'steadiness',
    'steadiness_floor',
    'cosine',
    'cosine_floor',
    'passages',
    'stayed',
    'stayed_share_floor',
    'refits',
    'refits_at_least',
    'coherence',
    'coherence_floor',
    'strength_floor',
    'people',
    'most_from_person',
    'person_share',
    'most_after_question',
    'question_share',
    'perplexity',
    'perplexity_floor',
  ];
  const rows = rowsOf(desk, fitted, result).map(({ measured, ...row }) => [
    row.id,
    row.name,
    decimals(measured.steadiness),
    decimals(floor.steadiness),
    decimals(measured.cosine),
    decimals(floor.cosine),
    measured.passages,
    measured.stayed,
    decimals(floor.stayed),
    refits,
    refitsAtLeast,
    decimals(measured.coherence),
    decimals(floor.coherence),
    decimals(floor.strength),
    row.people,
    row.person,
    decimals(row.personShare),
    row.question,
    decimals(row.questionShare),
    decimals(result.perplexity),
    decimals(floor.perplexity),
  ]);
  return csv([head, ...rows], options);
}
