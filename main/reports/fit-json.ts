import type { FitDone, Fitted } from '../../engine/themes/index.ts';
import { rowOf } from '../../engine/themes/index.ts';
import { countedForm } from '../../engine/text/index.ts';
import { settingsOf } from '../../engine/themes/index.ts';
import { transcriptsInOrder, type Desk } from '../desk.ts';
import type { SkippedFile } from '../gather/source-file.ts';
import { themeRows } from './theme-table.ts';

export interface FitReport {
  readonly done: FitDone;
  readonly skipped: readonly (SkippedFile & { readonly sentence: string })[];
  readonly unmatched: readonly string[];
}

/**
 * fit.json: what the fit was made from and how, for people and programs that check it. Holds no
 * clock time and no path of the machine, so that the same call gives the same bytes.
 */
export function fitJson(desk: Desk, fitted: Fitted, report: FitReport): string {
  const { fit } = fitted;
  const { text } = settingsOf(fit.settings);
  const probability = (theme: string, word: string): number | null => {
    const row = rowOf(fitted, theme);
    const form = countedForm(word, text);
    const index = form === null ? -1 : fitted.words.vocabulary.indexOf(form);
    return row < 0 || index < 0 ? null : fitted.phi[row * fitted.words.vocabulary.length + index];
  };
  return `${JSON.stringify(
    {
      program: 'Understory',
      method: fit.method,
      preparation: fit.preparation,
      start: fit.start.kind === 'warm' ? 're-fit' : 'from scratch',
      seed: fit.start.seed,
      settings: fit.settings,
      passages: fit.passages,
      vocabulary: fit.vocabulary,
      countedWords: fit.countedWords,
      leftOut: report.done.leftOut,
      sweeps: fit.sweeps,
      stopReason: fit.stopReason,
      bound: fit.bound,
      boundTerms: fit.boundTerms,
      boundBySweep: fit.trace.flatMap(({ sweep, bound }) =>
        bound === null ? [] : [{ sweep, bound }],
      ),
      trace: fit.trace,
      hashes: fit.hashes,
      themes: themeRows(desk).map((row) => ({
        id: row.id,
        name: desk.study.themes.get(row.id)?.name ?? null,
        share: row.share,
        pinned: row.pinned,
        words: row.words.map(({ surface, form, probability: value }) => ({
          word: surface,
          form,
          probability: value,
        })),
        seeds: row.seeds.map((word) => ({ word, probability: probability(row.id, word) })),
        shutOut: row.shutOut.map((word) => ({ word, probability: probability(row.id, word) })),
      })),
      unheardSeeds: report.done.unheardSeeds,
      transcripts: transcriptsInOrder(desk.study).map((transcript) => ({
        name: transcript.name,
        file: transcript.source.fileName,
        format: transcript.source.format,
        sha256: transcript.source.hash,
        turns: transcript.turns.length,
        details: transcript.details,
        speakers: transcript.speakers.map(({ label, role, participant }) => ({
          label,
          role,
          participant:
            participant === null ? null : (desk.study.participants.get(participant)?.name ?? null),
        })),
      })),
      attributesUnmatched: report.unmatched,
      skipped: {
        count: report.skipped.length,
        files: report.skipped.map(({ file, refusal, sentence }) => ({
          file,
          code: refusal.code,
          reason: sentence,
        })),
      },
    },
    null,
    2,
  )}\n`;
}
