import type { Api, NamedFile, Refused } from '../api.ts';
import { strataSvg } from '../reports/strata-svg.ts';
import { give } from './answers.ts';
import { safeFileName } from './file-names.ts';
import type { OpenStudy } from './open-study.ts';
import { strata } from './strata.ts';

/** The strata as a drawing, with bands in the order asked for; what is not named comes last. */
export function strataFigure(
  open: OpenStudy,
  { theme, transcripts }: Api['strataFigure']['takes'],
): { readonly value: NamedFile } | Refused {
  const { study, now } = open;
  if (theme !== null && !study.themes.has(theme)) {
    return open.refusal({ ok: false, code: 'unknown theme', subject: theme });
  }
  const whole = strata(open);
  const place = new Map(transcripts.map((id, index) => [id, index]));
  const order = whole.bands
    .map((band, index) => ({ index, at: place.get(band.transcript) ?? Infinity }))
    .sort((a, b) => (a.at === b.at ? a.index - b.index : a.at - b.at))
    .map(({ index }) => index);
  const chosen = theme === null ? -1 : whole.themes.indexOf(theme);
  const svg = strataSvg(whole, {
    order,
    chosen,
    label: theme === null ? null : now.label(theme),
    study: study.name,
  });
  return give({
    fileName: `${safeFileName(study.name)} strata.svg`,
    bytes: new TextEncoder().encode(svg),
  });
}
