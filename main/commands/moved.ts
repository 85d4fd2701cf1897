import { resolveTheme, type Study } from '../../engine/study/index.ts';
import { whatMoved, type Fitted } from '../../engine/themes/index.ts';
import type { Desk } from '../desk.ts';
import { themeName } from '../reports/theme-name.ts';
import { openStudy } from './open.ts';
import { readOptions, usageStop } from './options.ts';
import type { ExitCode, Terminal } from './terminal.ts';

export const movedUsage = 'understory moved study.understory';

/** Prints what moved between the fit on screen and the one that it started from. */
export async function moved(words: readonly string[], terminal: Terminal): Promise<ExitCode> {
  const { positionals } = readOptions(words, {}, movedUsage);
  if (positionals.length !== 1) throw usageStop('Name one study.', movedUsage);
  const { desk, file } = await openStudy(positionals[0], terminal, { readOnly: true, call: null });
  try {
    terminal.out(movedText(desk));
    return 0;
  } finally {
    file.close();
  }
}

/** What moved, in lines. */
export function movedText(desk: Desk): string {
  const { study } = desk;
  const after = desk.fitted(study.fit);
  if (after === null) return 'There is no fit yet.\n';
  const before = desk.fitted(fitBefore(study));
  if (before === null) return 'This is the first fit: there is nothing to compare it with.\n';
  const result = whatMoved(study, before, after);
  const nameOf = (id: string): string => nameIn(study, id, before, after);
  const lines = [
    `${result.passages.length} of ${result.compared} passages moved, ` +
      `${result.themes.length} of ${after.fit.themes.length} themes changed words.`,
    ...result.appeared.map((id) => `New: ${nameOf(id)}`),
    ...result.gone.map((id) => `No longer modelled: ${nameOf(id)}`),
    ...result.themes.map(({ theme, gained, lost }) =>
      [
        `${nameOf(theme)}:`,
        gained.length === 0 ? '' : `gained ${gained.join(', ')}`,
        gained.length > 0 && lost.length > 0 ? ';' : '',
        lost.length === 0 ? '' : `lost ${lost.join(', ')}`,
      ]
        .filter((part) => part !== '')
        .join(' ')
        .replace(' ;', ';'),
    ),
    ...result.passages.map(({ passage, from, to, strengths }) => {
      const { transcript, number } = after.words.passages[passage];
      const name = study.transcripts.get(transcript)?.name ?? transcript;
      return (
        `${name}, passage ${number}: from ${nameOf(from)} (${strengths.fromBefore.toFixed(2)} → ` +
        `${strengths.fromAfter.toFixed(2)}) to ${nameOf(to)} (${strengths.toBefore.toFixed(2)} → ` +
        `${strengths.toAfter.toFixed(2)})`
      );
    }),
  ];
  return `${lines.join('\n')}\n`;
}

/** The fit that the one on screen took over from. */
export function fitBefore(study: Study): string | null {
  const ids = [...study.fits.keys()];
  const fit = study.fit === null ? undefined : study.fits.get(study.fit);
  if (fit === undefined) return null;
  const from = fit.start.from ?? ids[ids.indexOf(fit.id) - 1] ?? null;
  // The fit that it began from may have been erased since.
  return from !== null && study.fits.has(from) ? from : null;
}

function nameIn(study: Study, id: string, before: Fitted, after: Fitted): string {
  const theme = resolveTheme(study, id);
  if (theme === undefined) return id;
  const fitted = after.fit.themes.includes(theme.id) ? after : before;
  return themeName(theme, fitted);
}
