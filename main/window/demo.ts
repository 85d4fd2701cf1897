import { mkdir, readFile } from 'node:fs/promises';
import { dirname } from 'node:path';
import type { Refused } from '../api.ts';
import { Desk } from '../desk.ts';
import { attributeEdits, readAttributeTable } from '../gather/attributes.ts';
import { findFiles } from '../gather/find-files.ts';
import { gather } from '../gather/gather.ts';
import { randomIds, type MintId } from '../ids.ts';
import { createStudyFile, type StudyFile, type StudyFileOptions } from '../project/index.ts';
import { sentenceFor } from '../sentences/sentences.ts';
import { BufferedStore } from '../store.ts';
import { refuse, give, isRefused } from './answers.ts';
import { fitForWindow } from './fit-for-window.ts';
import { startGroup } from './open-study.ts';
import { firstEdits } from './first-edits.ts';
import type { CallContext, Surroundings } from './session-types.ts';
import { folderFailure } from './write-file.ts';

export const demoName = 'Winter timetable';
const demoThemes = 9;

/**
 * The demo study with a first fit, so that every place has something to show. It is made in memory
 * and written when it is whole: what is stopped or interrupted leaves no file.
 */
export async function buildDemo(
  { demoFolder, readerName, now }: Surroundings,
  path: string,
  options: StudyFileOptions,
  context: CallContext,
): Promise<{ readonly value: StudyFile } | Refused> {
  const { found } = await findFiles([demoFolder], demoFolder);
  const tables = found.filter(({ name }) => /\.csv$/iu.test(name));
  const files = found.filter((file) => !tables.includes(file));
  if (files.length === 0) return refuse('no demo');

  const store = new BufferedStore(null);
  const reader = { id: randomIds('reader'), name: readerName.trim() || 'Reader' };
  // All of it is one start, which nobody wants taken back.
  const mintId: MintId = (what) => (what === 'group' ? startGroup : randomIds(what));
  const desk = new Desk(store, { by: reader.id, now, mintId });
  const id = randomIds('study');
  const steps = [
    desk.make(
      [
        ...firstEdits(id, demoName, reader),
        {
          edit: {
            kind: 'settingsChanged',
            changes: [{ key: 'themes', from: null, to: demoThemes }],
          },
        },
      ],
      { group: startGroup },
    ),
    await gather(desk, files, { interviewers: [] }),
  ];
  if (steps.some((step) => !step.ok) || desk.study.transcripts.size === 0) return refuse('no demo');
  for (const table of tables) {
    const rows = readAttributeTable(await readFile(table.path, 'utf8'));
    if (rows === null) continue;
    const { edits } = attributeEdits(desk.study, rows);
    desk.make(
      edits.map((edit) => ({ edit })),
      { group: startGroup },
    );
  }
  const fitted = await fitForWindow(desk, 'from scratch', {}, context.onProgress, context.signal);
  if (isRefused(fitted)) return fitted;

  try {
    await mkdir(dirname(path), { recursive: true });
  } catch (error) {
    const failure = folderFailure(error, dirname(path));
    return { code: failure.code, refused: sentenceFor(failure) };
  }
  const created = await createStudyFile(path, { studyId: id }, options);
  if (!created.ok) return { code: created.code, refused: sentenceFor(created) };
  const written = store.flush(created.value);
  if (written.ok) return give(created.value);
  created.value.close();
  return { code: written.code, refused: sentenceFor(written) };
}
