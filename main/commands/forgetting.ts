import { rewriteBackups } from '../project/index.ts';
import { placesFor, usualBackups } from '../backup-settings.ts';
import type { StudyFile } from '../project/index.ts';
import type { Erased } from '../forgetting/erase.ts';
import { planSeal, seal } from '../forgetting/sealing.ts';
import { planWithdrawal, withdraw } from '../forgetting/withdrawal.ts';
import {
  beyondReach,
  exportedInWords,
  forgettingSentences,
  mentionInWords,
  noWayBack,
} from '../sentences/forgetting.ts';
import { sentenceFor, sentenceForFit } from '../sentences/sentences.ts';
import { openStudy } from './open.ts';
import { readOptions, usageStop } from './options.ts';
import { ProgressLine, Stop, type ExitCode, type Terminal } from './terminal.ts';

export const withdrawUsage =
  'understory withdraw study.understory --participant NAME [--name WORDS]… [--no-refit] [--yes]';
export const sealUsage = 'understory seal study.understory [--name WORDS]… [--no-refit] [--yes]';

const shared = {
  name: { type: 'string', multiple: true },
  'no-refit': { type: 'boolean' },
  yes: { type: 'boolean' },
} as const;

/** Withdraws a participant; without --yes it only says what would go. */
export async function withdrawCommand(
  words: readonly string[],
  terminal: Terminal,
): Promise<ExitCode> {
  const options = { participant: { type: 'string' }, ...shared } as const;
  const { values, positionals } = readOptions(words, options, withdrawUsage);
  if (positionals.length !== 1) throw usageStop('Name one study.', withdrawUsage);
  if (values.participant === undefined) {
    throw usageStop('Say with --participant who is withdrawn.', withdrawUsage);
  }
  const yes = values.yes === true;
  const { desk, file } = await openStudy(positionals[0], terminal, {
    readOnly: !yes,
    call: ['withdraw', values.participant, values.name ?? []],
  });
  try {
    const { study } = desk;
    const who = [...study.participants.values()].find(({ name }) => name === values.participant);
    if (who === undefined) {
      throw new Stop(
        sentenceFor({ ok: false, code: 'unknown participant', subject: values.participant }),
      );
    }
    const request = { participant: who.id, names: values.name ?? [] };
    const plan = planWithdrawal(desk, request);
    if (!plan.ok) throw new Stop(sentenceFor(plan));
    const { transcripts, shared: among, codings, memos, fits, exported, mentions } = plan.value;
    const named = (ids: readonly string[]): string =>
      ids.map((id) => study.transcripts.get(id)?.name ?? id).join(', ') || 'none';
    terminal.out(
      `Transcripts that go: ${named(transcripts)}\n` +
        `Transcripts in which their turns are emptied: ${named(among)}\n` +
        `Codings and marks that go: ${codings}; memos: ${memos}; fits: ${fits}\n` +
        listed('Reports that left with their words', exported.map(exportedInWords)) +
        listed('Also erased, in', mentions.map(mentionInWords)),
    );
    if (!yes) return notYet(terminal);
    const done = await withdraw(file, desk, desk.context, request, {
      refit: values['no-refit'] !== true,
      fit: fitting(terminal),
    });
    return finished(done, file, terminal);
  } finally {
    file.close();
  }
}

/** Seals the originals behind stand-ins; without --yes it only says what would go. */
export async function sealCommand(words: readonly string[], terminal: Terminal): Promise<ExitCode> {
  const { values, positionals } = readOptions(words, shared, sealUsage);
  if (positionals.length !== 1) throw usageStop('Name one study.', sealUsage);
  const yes = values.yes === true;
  const names = values.name ?? [];
  const { desk, file } = await openStudy(positionals[0], terminal, {
    readOnly: !yes,
    call: ['seal', names],
  });
  try {
    const plan = planSeal(file, desk);
    if (!plan.ok) throw new Stop(forgettingSentences[plan.code]);
    const { wordings, originals, fits, exported, names: elsewhere } = plan.value;
    terminal.out(
      `Earlier wordings that go: ${wordings}; originals of stand-ins: ${originals}; fits: ${fits}\n` +
        listed('Reports that left before', exported.map(exportedInWords)) +
        elsewhere
          .map(({ name, mentions }) =>
            listed(`“${name}” stands also in`, mentions.map(mentionInWords)),
          )
          .join(''),
    );
    if (!yes) return notYet(terminal);
    const done = await seal(
      file,
      desk,
      desk.context,
      { names },
      {
        refit: values['no-refit'] !== true,
        fit: fitting(terminal),
      },
    );
    return finished(done, file, terminal);
  } finally {
    file.close();
  }
}

function listed(title: string, lines: readonly string[]): string {
  return lines.length === 0 ? '' : `${title}:\n${lines.map((line) => `  ${line}\n`).join('')}`;
}

function notYet(terminal: Terminal): ExitCode {
  terminal.out(`${beyondReach}\n${noWayBack}\n`);
  terminal.err('Nothing was changed; say --yes to carry it out.\n');
  return 0;
}

function fitting(terminal: Terminal) {
  const line = new ProgressLine(terminal);
  return {
    signal: terminal.signal,
    onProgress: (_: unknown, fraction: number) =>
      line.show(`Fitting: ${Math.floor(fraction * 100)} %`, fraction),
  };
}

function finished(
  done: Erased | { readonly ok: false; readonly code: 'nothing to seal' },
  file: StudyFile,
  terminal: Terminal,
): ExitCode {
  if (!done.ok) throw new Stop(whyNotErased(done));
  // Backups that hold what was erased may not stay.
  const settings = terminal.backups?.() ?? usualBackups;
  const backups = rewriteBackups(file, placesFor(settings, file.path), { now: terminal.now });
  const { records, fits, refitted } = done.value;
  terminal.out(
    `${records} records lost their content, ${fits} ${fits === 1 ? 'fit' : 'fits'} among it` +
      `${refitted ? '; the study was fitted again first' : ''}; ` +
      `${backups.removed.length} ${backups.removed.length === 1 ? 'backup' : 'backups'} removed.\n${beyondReach}\nHead: ${file.head}\n`,
  );
  for (const left of backups.left) terminal.err(`${sentenceFor(left)}\n`);
  return backups.left.length > 0 ? 1 : 0;
}

/** One sentence on why nothing was erased. */
export function whyNotErased(
  refused: Exclude<Erased, { readonly ok: true }> | { readonly code: 'nothing to seal' },
): string {
  if (refused.code in forgettingSentences) {
    return forgettingSentences[refused.code as keyof typeof forgettingSentences];
  }
  if ('themes' in refused) return sentenceForFit(refused);
  return sentenceFor(refused as Parameters<typeof sentenceFor>[0]);
}
