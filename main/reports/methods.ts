import type { Fit, Study } from '../../engine/study/index.ts';
import { settingsOf, type FitDone, type Fitted } from '../../engine/themes/index.ts';
import { headSentence } from './excerpt-book.ts';
import { themeRows } from './theme-table.ts';
import type { Desk } from '../desk.ts';

/** What a fit says about the words that it did not count. */
export type LeftOut = FitDone['leftOut'];

/**
 * The methods paragraph: how the themes came about, with every number that somebody needs to judge
 * or repeat it, the estimator under its published name, and what it does not show.
 */
export function methodsText(desk: Desk, fitted: Fitted, head: string | null = null): string {
  const { study } = desk;
  const made = head === null ? '' : `\n${headSentence(head)}\n`;
  return `# Methods

${material(study, fitted)} ${counting(study, fitted)} ${model(desk, fitted)} ${reading(desk)}
${made}
## What this does not show

A theme model counts words. It reads no irony, no silence and no context. Strengths are shares of a
passage's counted words, not probabilities that a theme applies; suggestions are for reading, never
findings, and a theme is a candidate until a person has named and defined it. Interviewees are seldom
a random sample; not hearing a thing is not its absence. Before excerpts are shared a person must
read them for what identifies people; the consent given, the ethics board's decision and local law
come first.

## Sources

- Blei, D. M., Ng, A. Y. & Jordan, M. I. (2003). Latent Dirichlet allocation. Journal of Machine
  Learning Research 3, 993-1022.
- Teh, Y. W., Newman, D. & Welling, M. (2007). A collapsed variational Bayesian inference algorithm
  for latent Dirichlet allocation. Advances in Neural Information Processing Systems 19.
- Asuncion, A., Welling, M., Smyth, P. & Teh, Y. W. (2009). On smoothing and inference for topic
  models. Proceedings of the 25th Conference on Uncertainty in Artificial Intelligence.
- Jagarlamudi, J., Daumé III, H. & Udupa, R. (2012). Incorporating lexical priors into topic models.
  Proceedings of the 13th Conference of the European Chapter of the ACL.
- Schofield, A. & Mimno, D. (2016). Comparing apples to apple: the effects of stemmers on topic
  models. Transactions of the ACL 4, 287-300.
`;
}

function material(study: Study, fitted: Fitted): string {
  const participants = new Set(fitted.words.passages.map(({ participant }) => participant));
  const words = fitted.words.passages.reduce((sum, passage) => sum + passage.words, 0);
  return (
    `${many(study.transcripts.size, 'transcript')} with ${many(participants.size, 'participant')} ` +
    `(${many(words, 'word')} spoken by them) were divided into ` +
    `${many(fitted.words.passages.length, 'passage')} of about ` +
    `${settingsOf(fitted.fit.settings).text.passageMinimumWords} to ` +
    `${settingsOf(fitted.fit.settings).text.passageMaximumWords} words within one speaker's talk; ` +
    'what interviewers said was kept for reading and not modelled.'
  );
}

function counting(study: Study, fitted: Fitted): string {
  const { fit } = fitted;
  const { text } = settingsOf(fit.settings);
  const lists = [
    text.leaveOutStopWords ? 'stop words (negations kept)' : '',
    text.leaveOutFillers ? 'spoken fillers' : '',
    text.extraStopWords.length > 0 ? many(text.extraStopWords.length, 'further word') : '',
  ].filter((part) => part !== '');
  const seeds = [...study.themes.values()].some((theme) => theme.seeds.length > 0);
  return (
    `Words were counted in lower case${text.stemming ? ', by their stems' : ', unstemmed (Schofield & Mimno 2016)'}` +
    `${lists.length === 0 ? '' : `, without ${listed(lists)}`}, and without words found in fewer than ` +
    `${many(text.minimumPassages, 'passage')}, said by fewer than ` +
    `${many(text.minimumParticipants, 'participant')} or found in more than ` +
    `${Math.round(text.maximumPassageShare * 100)} % of the passages` +
    `${seeds ? ' (seed words exempt)' : ''}. This left ` +
    `${many(fit.countedWords, 'counted word')} of ${fit.vocabulary} different forms ` +
    `(preparation rules ${fit.preparation}).`
  );
}

function model(desk: Desk, fitted: Fitted): string {
  const { fit } = fitted;
  const settings = settingsOf(fit.settings);
  const rows = themeRows(desk);
  const seeded = rows.filter(({ seeds }) => seeds.length > 0).length;
  const pinned = rows.filter((row) => row.pinned).length;
  const shutOut = rows.reduce((sum, row) => sum + row.shutOut.length, 0);
  const shaped = [
    seeded > 0 ? `${many(seeded, 'theme')} with seed words (Jagarlamudi, Daumé & Udupa 2012)` : '',
    pinned > 0 ? `${many(pinned, 'pinned theme')}` : '',
    shutOut > 0 ? `${many(shutOut, 'word')} shut out of a theme` : '',
  ].filter((part) => part !== '');
  return (
    `Latent Dirichlet allocation (Blei, Ng & Jordan 2003) with ${many(fit.themes.length, 'theme')} was ` +
    'fitted by collapsed variational inference with the zero-order approximation, CVB0 (Teh, Newman ' +
    '& Welling 2007; Asuncion et al. 2009), with Dirichlet priors of ' +
    `${settings.alpha} on passage-theme proportions and ${settings.eta} on theme-word distributions` +
    `${shaped.length === 0 ? '' : `, made asymmetric by decisions: ${listed(shaped)}`}. ` +
    `${howStarted(fit)} ` +
    `The evidence lower bound of the mean-field posterior that the result implies is ` +
    `${fit.bound.toFixed(1)} nats. The calculation is deterministic: the same study, settings and ` +
    `seed (${fit.start.seed}) give the same result, bit for bit (method ${fit.method}; result ` +
    `SHA-256 ${fit.hashes.result}).`
  );
}

function howStarted(fit: Fit): string {
  const ended =
    fit.stopReason === 'converged'
      ? 'until the likelihood settled'
      : fit.stopReason === 'stopped by a person'
        ? 'until a person stopped it'
        : 'up to the limit set';
  if (fit.start.kind === 'warm') {
    return (
      `It was a re-fit around decisions made: it started from the stored result of the fit before, ` +
      `each theme held by its own expected counts, and made ${many(fit.sweeps, 'sweep')} ${ended}.`
    );
  }
  const { model } = settingsOf(fit.settings);
  const schedule = model.schedule
    .map(({ exponent, sweeps }) => `${sweeps} at exponent ${exponent}`)
    .join(', ');
  return (
    `It was a fit from scratch: ${many(model.runs, 'annealed run')} (sweeps: ${schedule}) from ` +
    'different seeded starts were brought together by a density-weighted k-means consensus of their ' +
    `themes (after Kotliar et al. 2019), the themes were then held fixed, and each passage's ` +
    `proportions found in ${many(model.foldPasses, 'pass', 'passes')}.`
  );
}

function reading(desk: Desk): string {
  let confirmed = 0;
  let rejected = 0;
  let byHand = 0;
  let none = 0;
  for (const codings of desk.study.codings.values()) {
    for (const { standing } of codings.values()) {
      if (standing === 'confirmed') confirmed++;
      else if (standing === 'rejected') rejected++;
      else byHand++;
    }
  }
  for (const nones of desk.study.nones.values()) none += nones.size;
  const { strength, countedWords } = settingsOf(desk.study.settings).suggestions;
  return (
    `A theme is suggested for a passage from a strength of ${strength} on, in passages of at least ` +
    `${many(countedWords, 'counted word')}. People confirmed ${many(confirmed, 'suggestion')}, ` +
    `rejected ${rejected}, made ${many(byHand, 'coding')} by hand, and found that no theme applies ` +
    `in ${many(none, 'passage')}.`
  );
}

function many(count: number, one: string, more = `${one}s`): string {
  return `${count.toLocaleString('en-GB')} ${count === 1 ? one : more}`;
}

function listed(parts: readonly string[]): string {
  return parts.length < 2
    ? parts.join('')
    : `${parts.slice(0, -1).join(', ')} and ${parts[parts.length - 1]}`;
}
