import { existsSync } from 'node:fs';
import { readFile, rm } from 'node:fs/promises';
import { basename, dirname, resolve } from 'node:path';
import { compareCodeUnits } from '../../engine/numbers/index.ts';
import { applyPlan, applySettings } from '../decisions.ts';
import { Desk } from '../desk.ts';
import { guessPlan } from '../gather/answers.ts';
import { attributeEdits, readAttributeTable } from '../gather/attributes.ts';
import { findFiles, type FoundFile } from '../gather/find-files.ts';
import { gather, labelsNotFound } from '../gather/gather.ts';
import type { SkippedFile } from '../gather/source-file.ts';
import { isInside } from '../is-inside.ts';
import { derivedIds, hashOf, randomIds } from '../ids.ts';
import { emptyPlan } from '../plan.ts';
import { decode, readCsv } from '../formats/index.ts';
import { createStudyFile, passwordFault } from '../project/index.ts';
import { sentenceFor, sentenceForSkipped, type FileRefusal } from '../sentences/sentences.ts';
import { BufferedStore } from '../store.ts';
import { refuse } from './refuse.ts';
import { fitWithProgress } from './fitting.ts';
import { gatherTables } from './answers.ts';
import { keepFieldNotes, takeInCodebook } from './beside.ts';
import { readOptions, usageStop, wholeNumber } from './options.ts';
import { outputFiles } from './outputs.ts';
import { givenPassword } from './password.ts';
import { readPlan } from './plan-file.ts';
import { ProgressLine, Stop, stopIfAsked, type ExitCode, type Terminal } from './terminal.ts';
import { checkFolder, stageFiles } from './write-files.ts';

export const themeUsage =
  'understory theme FILES OR FOLDERS… --out DIR [--themes 12] [--seed 1] [--plan plan.json] ' +
  '[--save study.understory] [--interviewer NAME]… [--attributes table.csv] ' +
  '[--text COLUMN]… [--participant COLUMN] [--attribute COLUMN]… [--sheet NAME] ' +
  '[--codebook FILE] [--by-hand] [--notes FILE OR FOLDER]… [--no-guard] [--strict]';

const options = {
  themes: { type: 'string' },
  seed: { type: 'string' },
  out: { type: 'string' },
  plan: { type: 'string' },
  save: { type: 'string' },
  interviewer: { type: 'string', multiple: true },
  attributes: { type: 'string' },
  text: { type: 'string', multiple: true },
  participant: { type: 'string' },
  attribute: { type: 'string', multiple: true },
  sheet: { type: 'string' },
  codebook: { type: 'string' },
  'by-hand': { type: 'boolean' },
  notes: { type: 'string', multiple: true },
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

  const out = resolve(terminal.folder, values.out);
  await checkFolder(out);
  const saveTo = values.save === undefined ? null : resolve(terminal.folder, values.save);
  if (saveTo !== null) await checkSave(saveTo, out);
  const password = saveTo === null ? null : await givenPassword(terminal);
  const fault = password === null ? null : passwordFault(password);
  if (fault !== null) {
    throw new Stop(sentenceFor({ ok: false, code: `password ${fault}`, path: saveTo ?? '' }));
  }
  const given = [values.plan, values.save, values.codebook, ...(values.notes ?? [])].flatMap(
    (path) => (path === undefined ? [] : [resolve(terminal.folder, path)]),
  );
  // What an earlier run left in the folder to write to is no input of this one.
  const { found, missed } = await findFiles(positionals, terminal.folder, [out, ...given]);
  const skipped: SkippedFile[] = missed.map(({ name, code }) => ({
    file: name,
    refusal: { code },
  }));
  const tables = await attributeTables(found, values.attributes, terminal);
  const files = found.filter((file) => !tables.used.has(file));

  const inputs = await Promise.all(files.map(async (file) => [file.name, await hashOfFile(file)]));
  inputs.sort(([a, hashA], [b, hashB]) => compareCodeUnits(a, b) || compareCodeUnits(hashA, hashB));
  const store = new BufferedStore(null);
  const desk = new Desk(store, {
    by: 'command line',
    now: terminal.now,
    mintId: derivedIds(['theme', inputs, plan, interviewers, themes, seed, ...moreAsked(values)]),
  });
  const name = saveTo === null ? 'Study' : studyName(saveTo);
  refuse(
    desk.make([{ edit: { kind: 'studyStarted', study: desk.context.mintId('study'), name } }]),
  );
  // What was asked for on the command line goes before what the plan says.
  const asked = {
    ...(values.themes === undefined ? {} : { themes }),
    ...(values.seed === undefined ? {} : { seed }),
  };
  refuse(applySettings(desk, { ...plan.settings, ...asked }));

  const line = new ProgressLine(terminal);
  const gathered = await gather(desk, files, {
    interviewers,
    onProgress: (done) => {
      stopIfAsked(terminal);
      line.show(`Reading: ${done + 1} of ${files.length} files`, (done + 1) / files.length);
    },
  });
  line.end();
  if (!gathered.ok) throw new Stop(sentenceFor(gathered));
  const answers = gatherTables(desk, gathered.value.tables, values, terminal);
  skipped.push(...gathered.value.skipped, ...answers.skipped);
  for (const { file, refusal } of skipped) {
    terminal.err(`Skipped ${file}: ${sentenceForSkipped(refusal as FileRefusal)}\n`);
  }
  const count = gathered.value.transcripts.length + answers.transcripts.length;
  if (count === 0) {
    throw new Stop(
      'No transcript could be read, so nothing was written; give files in .txt, .docx, .odt, .rtf, .pdf, .vtt, .srt, or a table of answers.',
    );
  }
  for (const label of labelsNotFound(desk.study, interviewers)) {
    terminal.err(
      `No transcript has an interviewer “${label}”; check the label, or see fit.json for the speakers found.\n`,
    );
  }
  const unmatched = describeParticipants(desk, tables.texts, terminal);
  if (values.notes !== undefined) await keepFieldNotes(desk, values.notes, terminal);
  if (values.codebook !== undefined) {
    await takeInCodebook(desk, values.codebook, values['by-hand'] === true, terminal);
  }
  refuse(applyPlan(desk, { ...plan, settings: {}, interviewers: [] }));

  const done = await fitWithProgress(desk, 'from scratch', terminal);
  sayUnheard(desk, done.unheardSeeds, terminal);
  const outputs = outputFiles(desk, {
    guard: values['no-guard'] !== true,
    done,
    skipped,
    unmatched,
  });
  const keep = [...found.map(({ path }) => path), ...given];
  const staged = await stageFiles(out, outputs, keep);
  try {
    if (saveTo !== null) await save(store, saveTo, password);
    try {
      await staged.commit();
    } catch (error) {
      if (saveTo !== null) await rm(saveTo, { force: true });
      throw error;
    }
  } finally {
    await staged.discard();
  }
  terminal.err(
    `${count} ${count === 1 ? 'transcript' : 'transcripts'}, ${done.passages} passages, ` +
      `${desk.fitted(desk.study.fit)?.fit.themes.length ?? 0} themes: written to ${values.out}\n`,
  );
  return values.strict === true && skipped.length > 0 ? 1 : 0;
}

/** Options that only some calls have: ids follow from them where they are given. */
function moreAsked(values: Readonly<Record<string, unknown>>): unknown[] {
  const names = ['text', 'participant', 'attribute', 'sheet', 'codebook', 'by-hand', 'notes'];
  return names.flatMap((name) => (values[name] === undefined ? [] : [[name, values[name]]]));
}

/** Warns of seeds that nobody says, or that are several words: they could not be used. */
export function sayUnheard(
  desk: Desk,
  unheard: readonly { readonly theme: string; readonly word: string }[],
  terminal: Terminal,
): void {
  for (const { theme: id, word } of unheard) {
    const name = desk.study.themes.get(id)?.name ?? id;
    terminal.err(
      `The seed “${word}” of “${name}” is no word that a participant says, so it had no effect; give single words as they are said.\n`,
    );
  }
}

async function save(store: BufferedStore, path: string, password: string | null): Promise<void> {
  // The file says its id to anybody, and one that followed from the transcripts would confirm a guess.
  const studyId = randomIds('study');
  const created = await createStudyFile(path, { studyId, password: password ?? undefined });
  if (!created.ok) throw new Stop(sentenceFor(created));
  const written = store.flush(created.value);
  created.value.close();
  if (written.ok) return;
  await rm(path, { force: true });
  throw new Stop(sentenceFor(written));
}

/** Stops before any work where a new study cannot come to stand at `path`. */
async function checkSave(path: string, out: string): Promise<void> {
  if (existsSync(path)) throw new Stop(sentenceFor({ ok: false, code: 'already there', path }));
  const folder = dirname(path);
  if (existsSync(folder)) return await checkFolder(folder);
  if (!isInside(folder, out)) {
    throw new Stop(`There is no folder “${folder}” to save the study in; make it first.`);
  }
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
    if (!/\.(csv|tsv)$/iu.test(file.name)) continue;
    // What is no such table stays among the files and is named there with the reason.
    const text = await tableText(file.path);
    if (text === null || readAttributeTable(text) === null || holdsAnswers(text)) continue;
    texts.set(file.name, text);
    used.add(file);
  }
  if (named !== undefined) {
    const path = resolve(terminal.folder, named);
    const text = await tableText(path);
    if (text === null) {
      throw new Stop(`The table “${named}” could not be read; check its name and place.`, 2);
    }
    if (readAttributeTable(text) === null) {
      throw new Stop(
        `“${named}” is no table of attributes; head its first column “participant” and each other column with an attribute.`,
        2,
      );
    }
    if (![...used].some((file) => file.path === path)) texts.set(basename(named), text);
  }
  return { texts, used };
}

function holdsAnswers(text: string): boolean {
  const read = readCsv(text);
  return read?.ok === true && guessPlan(read.value.sheets[0]) !== null;
}

/** Null where it cannot be read or is no text. */
async function tableText(path: string): Promise<string | null> {
  try {
    const decoded = decode(await readFile(path));
    return decoded.ok ? decoded.text : null;
  } catch {
    return null;
  }
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
