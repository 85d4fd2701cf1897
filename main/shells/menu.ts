import type { MenuItemConstructorOptions } from 'electron';
import type { Events } from '../api.ts';

type Command = Events['command'];

export interface MenuOptions {
  readonly platform: NodeJS.Platform;
  /** Has the window carry out a command. */
  readonly command: (command: Command) => void;
  /** Adds what developers need. */
  readonly development: boolean;
}

/**
 * The native menu, with the accelerators that people know from everywhere else. Undo and redo go to
 * the window, which knows whether a field is being typed in; cutting, copying and pasting are the
 * system's own.
 */
export function menuTemplate({
  platform,
  command,
  development,
}: MenuOptions): MenuItemConstructorOptions[] {
  const mac = platform === 'darwin';
  const item = (label: string, accelerator: string, name: Command): MenuItemConstructorOptions => ({
    label,
    accelerator,
    click: () => command(name),
  });
  const line: MenuItemConstructorOptions = { type: 'separator' };

  const app: MenuItemConstructorOptions = { role: 'appMenu' };
  const file: MenuItemConstructorOptions = {
    label: '&File',
    submenu: [
      item('Start a study…', 'CmdOrCtrl+N', 'start study'),
      item('Open a study…', 'CmdOrCtrl+O', 'open study'),
      line,
      item('Add transcripts…', 'CmdOrCtrl+I', 'add transcripts'),
      line,
      item('Lock now', 'CmdOrCtrl+L', 'lock study'),
      item('Close study', 'CmdOrCtrl+Shift+W', 'close study'),
      { role: mac ? 'close' : 'quit' },
    ],
  };
  const edit: MenuItemConstructorOptions = {
    label: '&Edit',
    submenu: [
      item('Undo', 'CmdOrCtrl+Z', 'undo'),
      item('Redo', platform === 'win32' ? 'Ctrl+Y' : 'Shift+CmdOrCtrl+Z', 'redo'),
      line,
      { role: 'cut' },
      { role: 'copy' },
      { role: 'paste' },
      { role: 'pasteAndMatchStyle' },
      { role: 'selectAll' },
      line,
      item('Find…', 'CmdOrCtrl+K', 'find'),
      // The other key that people try for it.
      {
        ...item('Find…', 'CmdOrCtrl+F', 'find'),
        visible: false,
        acceleratorWorksWhenHidden: true,
      },
    ],
  };
  const view: MenuItemConstructorOptions = {
    label: '&View',
    submenu: [
      { role: 'resetZoom' },
      { role: 'zoomIn' },
      // Without the shift key, as keyboards have it.
      {
        role: 'zoomIn',
        accelerator: 'CmdOrCtrl+=',
        visible: false,
        acceleratorWorksWhenHidden: true,
      },
      { role: 'zoomOut' },
      line,
      { role: 'togglefullscreen' },
      ...(development
        ? ([line, { role: 'reload' }, { role: 'toggleDevTools' }] as MenuItemConstructorOptions[])
        : []),
    ],
  };
  const help: MenuItemConstructorOptions = {
    role: 'help',
    submenu: mac ? [] : [{ role: 'about' }],
  };
  const menu = [file, edit, view, { role: 'windowMenu' } as const, help];
  return mac ? [app, ...menu] : menu;
}
