import { basename, join } from 'node:path';
import type { BrowserWindow, Dialog } from 'electron';
import type { SystemDialogs } from '../window/session-types.ts';

const studies = { name: 'Understory studies', extensions: ['understory'] };
const transcripts = {
  name: 'Transcripts',
  extensions: 'txt md docx odt rtf pdf html htm vtt srt csv tsv xlsx'.split(' '),
};
const everything = { name: 'All files', extensions: ['*'] };

export interface DialogOptions {
  readonly dialog: Pick<Dialog, 'showOpenDialog' | 'showSaveDialog'>;
  /** The window that a dialog belongs to; null where there is none. */
  readonly window: () => BrowserWindow | null;
  readonly studiesFolder: string;
}

/** The system's own file dialogs. */
export function systemDialogs({ dialog, window, studiesFolder }: DialogOptions): SystemDialogs {
  type Open = Electron.OpenDialogOptions;
  type Save = Electron.SaveDialogOptions;

  async function open(options: Open): Promise<readonly string[] | null> {
    const over = window();
    const { canceled, filePaths } = await (over === null
      ? dialog.showOpenDialog(options)
      : dialog.showOpenDialog(over, options));
    return canceled || filePaths.length === 0 ? null : filePaths;
  }

  async function save(options: Save): Promise<string | null> {
    const over = window();
    const { canceled, filePath } = await (over === null
      ? dialog.showSaveDialog(options)
      : dialog.showSaveDialog(over, options));
    return canceled || filePath === '' ? null : filePath;
  }

  return {
    chooseStudy: async () => {
      const paths = await open({
        title: 'Open a study',
        properties: ['openFile'],
        filters: [studies, everything],
      });
      return paths?.[0] ?? null;
    },
    placeStudy: (name) =>
      save({
        title: 'Keep the study as',
        defaultPath: join(studiesFolder, `${fileName(name) || 'study'}.understory`),
        filters: [studies],
        properties: ['createDirectory', 'showOverwriteConfirmation'],
      }),
    chooseTranscripts: () =>
      open({
        title: 'Add transcripts',
        properties: ['openFile', 'multiSelections'],
        filters: [transcripts, everything],
      }),
    chooseFolder: async (title) => {
      const paths = await open({ title, properties: ['openDirectory', 'createDirectory'] });
      return paths?.[0] ?? null;
    },
    placeFile: (name) =>
      save({
        title: 'Save',
        defaultPath: fileName(basename(name)),
        properties: ['createDirectory', 'showOverwriteConfirmation'],
      }),
  };
}

/** A name that every system takes for a file: without separators, control characters, end dots. */
function fileName(name: string): string {
  return name
    .replace(/[\p{Cc}\p{Cf}/\\:*?"<>|]/gu, ' ')
    .replace(/\s+/gu, ' ')
    .replace(/^[ .]+|[ .]+$/gu, '')
    .slice(0, 120)
    .trim();
}
