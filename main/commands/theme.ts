import { existsSync } from 'node:fs';
import { readFile } from 'node:fs/promises';
import { basename, resolve } from 'node:path';
import { applyPlan, applySettings } from '../decisions.ts';
import { Desk } from '../desk.ts';
import { attributeEdits, readAttributeTable } from '../gather/attributes.ts';
import { findFiles, type FoundFile } from '../gather/find-files.ts';
import { gather, type SkippedFile } from '../gather/gather.ts';
import { derivedIds, hashOf } from '../ids.ts';
import { emptyPlan } from '../plan.ts';
import { createStudyFile } from '../project/index.ts';
import { sentenceFor, sentenceForSkipped, type FileRefusal } from '../sentences/sentences.ts';
import { BufferedStore } from '../store.ts';
import { refuse } from './refuse.ts';
import { fitWithProgress } from './fitting.ts';
import { readOptions, usageStop, wholeNumber } from './options.ts';
import { outputFiles } from './outputs.ts';
import { readPlan } from './plan-file.ts';
import { ProgressLine, Stop, type ExitCode, type Terminal } from './terminal.ts';
import { stageFiles } from './write-files.ts';

export const themeUsage =
  'understory theme FILES OR FOLDERS… --out DIR [--themes 12] [--seed 1] [--plan plan.json] ' +
  '[--save study.understory] [--interviewer NAME]… [--attributes table.csv] [--no-guard] [--strict]';

const options = {
  themes: { type: 'string' },
  seed: { type: 'string' },
  out: { type: 'string' },
  plan: { type: 'string' },
  save: { type: 'string' },
  interviewer: { type: 'string', multiple: true },
  attributes: { type: 'string' },
  'no-guard': { type: 'boolean' },
  strict: { type: 'boolean' },
} as const;

/** Transcripts in, themes and coded excerpts out, in one go. */
export async function theme(words: readonly string[], terminal: Terminal): Promise<ExitCode> {
  const { values, positionals } = readOptions(words, options, themeUsage);
  if (positionals.length === 0) throw usageStop('Name files or folders to read.', themeUsage);
  if (values.out === undefined) throw usageStop('Say with --out where to write.', themeUsage);
  const themes = wholeNumber(
    values.themes,
    'themes',
    { least: 1, most: 200, otherwise: 12 },
    themeUsage,
  );
  const seed = wholeNumber(
    values.seed,
    'seed',
    { least: 0, most: 4_294_967_295, otherwise: 1 },
    themeUsage,
  );
  const plan = values.plan === undefined ? emptyPlan : await readPlan(values.plan, terminal.folder);
  const interviewers = [...(values.interviewer ?? []), ...plan.interviewers];

  if (values.save !== undefined && existsSync(resolve(terminal.folder, values.save))) {
    throw new Stop(sentenceFor({ ok: false, code: 'already there', path: values.save }));
  }
  const { found, missed } = await findFiles(positionals, terminal.folder);
  const skipped: SkippedFile[] = missed.map(({ name, code }) => ({
    file: name,
    refusal: { code },
  }));
  const tables = await attributeTables(found, values.attributes, terminal);
  const files = found.filter((file) => !tables.used.has(file));

  const inputs = await Promise.all(files.map(async (file) => [file.name, await hashOfFile(file)]));
  const store = new BufferedStore(null);
  const desk = new Desk(store, {
    by: 'command line',
    now: terminal.now,
    mintId: derivedIds(['theme', inputs, plan, interviewers, themes, seed]),
  });
  const name = values.save === undefined ? 'Study' : studyName(values.save);
  refuse(
    desk.make([{ edit: { kind: 'studyStarted', study: desk.context.mintId('study'), name } }]),
  );
  refuse(applySettings(desk, { themes, seed }));

  const line = new ProgressLine(terminal);
  const gathered = await gather(desk, files, interviewers, (done) => {
    line.show(`Reading: ${done + 1} of ${files.length} files`);
  });
  line.end();
  if (!gathered.ok) throw new Stop(sentenceFor(gathered));
  skipped.push(...gathered.value.skipped);
  for (const { file, refusal } of skipped) {
    terminal.err(`Skipped ${file}: ${sentenceForSkipped(refusal as FileRefusal)}\n`);
  }
  if (gathered.value.transcripts.length === 0) {
    throw new Stop(
      'No transcript could be read, so nothing was written. Give files in .txt, .md, .docx, .vtt or .srt.',
    );
  }
  const unmatched = describeParticipants(desk, tables.texts, terminal);
  refuse(applyPlan(desk, { ...plan, interviewers: [] }));

  const done = await fitWithProgress(desk, 'from scratch', terminal);
  sayUnheard(desk, done.unheardSeeds, terminal);
  const outputs = outputFiles(desk, {
    guard: values['no-guard'] !== true,
    done,
    skipped,
    unmatched,
  });
  const staged = await stageFiles(resolve(terminal.folder, values.out), outputs);
  try {
    if (values.save !== undefined) await save(desk, store, values.save, terminal);
    await staged.commit();
  } finally {
    await staged.discard();
  }
  const count = gathered.value.transcripts.length;
  terminal.err(
    `${count} ${count === 1 ? 'transcript' : 'transcripts'}, ${done.passages} passages, ` +
      `${desk.fitted(desk.study.fit)?.fit.themes.length ?? 0} themes: written to ${values.out}\n`,
  );
  return values.strict === true && skipped.length > 0 ? 1 : 0;
}

/** Warns of seed words that nobody says: they could not be taken into account. */
export function sayUnheard(
  desk: Desk,
  unheard: readonly { readonly theme: string; readonly word: string }[],
  terminal: Terminal,
): void {
  for (const { theme: id, word } of unheard) {
    const name = desk.study.themes.get(id)?.name ?? id;
    terminal.err(
      `The seed “${word}” of “${name}” is said by no participant, so it had no effect.\n`,
    );
  }
}

async function save(
  desk: Desk,
  store: BufferedStore,
  path: string,
  terminal: Terminal,
): Promise<void> {
  const created = await createStudyFile(resolve(terminal.folder, path), {
    studyId: desk.study.id,
  });
  if (!created.ok) throw new Stop(sentenceFor(created));
  const written = store.flush(created.value);
  created.value.close();
  if (!written.ok) throw new Stop(sentenceFor(written));
}

function studyName(path: string): string {
  return basename(path).replace(/\.understory$/u, '') || 'Study';
}

/**
 * Tables of attributes: the one named, and those found among the files whose first heading is
 * "participant".
 */
async function attributeTables(
  found: readonly FoundFile[],
  named: string | undefined,
  terminal: Terminal,
): Promise<{ readonly texts: Map<string, string>; readonly used: ReadonlySet<FoundFile> }> {
  const texts = new Map<string, string>();
  const used = new Set<FoundFile>();
  for (const file of found) {
    if (!/\.csv$/iu.test(file.name)) continue;
    try {
      const text = await readFile(file.path, 'utf8');
      if (readAttributeTable(text) === null) continue;
      texts.set(file.name, text);
      used.add(file);
    } catch {
      // It stays among the files and is named there with the reason.
    }
  }
  if (named !== undefined) {
    const path = resolve(terminal.folder, named);
    let text: string;
    try {
      text = await readFile(path, 'utf8');
    } catch {
      throw new Stop(`The table “${named}” could not be read. Check its name and place.`, 2);
    }
    if (readAttributeTable(text) === null) {
      throw new Stop(
        `“${named}” is no table of attributes. Head its first column “participant” and each other column with an attribute.`,
        2,
      );
    }
    if (![...used].some((file) => file.path === path)) texts.set(basename(named), text);
  }
  return { texts, used };
}

function describeParticipants(
  desk: Desk,
  texts: ReadonlyMap<string, string>,
  terminal: Terminal,
): string[] {
  const missing: string[] = [];
  for (const [file, text] of texts) {
    const table = readAttributeTable(text);
    if (table === null) continue;
    const { edits, unmatched } = attributeEdits(desk.study, table);
    refuse(desk.make(edits.map((edit) => ({ edit }))));
    missing.push(...unmatched);
    terminal.err(
      `Attributes of ${edits.length} participants taken from ${file}` +
        `${unmatched.length === 0 ? '' : `; not in the transcripts: ${unmatched.join(', ')}`}\n`,
    );
  }
  return missing;
}

async function hashOfFile({ path }: FoundFile): Promise<string> {
  try {
    return hashOf(await readFile(path));
  } catch {
    return '';
  }
}
