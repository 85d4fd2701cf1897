import type { MenuItemConstructorOptions } from 'electron';
import { describe, expect, it } from 'vitest';
import { menuTemplate } from '../../../main/shells/menu.ts';

function itemsOf(platform: NodeJS.Platform, development = false) {
  const commands: string[] = [];
  const template = menuTemplate({ platform, development, command: (name) => commands.push(name) });
  const items = template.flatMap(({ submenu }) => submenu as MenuItemConstructorOptions[] | []);
  return { template, items: items.filter((item) => item !== undefined), commands };
}
const choose = (item: MenuItemConstructorOptions): void => (item.click as () => void)();

describe.each(['linux', 'win32', 'darwin'] as const)('the menu on %s', (platform) => {
  it('has the window carry out commands, under the usual keys', () => {
    const { items, commands } = itemsOf(platform);
    const own = items.filter((item) => item.click !== undefined);
    own.forEach(choose);
    expect(commands).toEqual([
      'start study',
      'open study',
      'add transcripts',
      'lock study',
      'close study',
      'undo',
      'redo',
      'find',
      'find',
    ]);
    const keys = Object.fromEntries(own.map((item) => [item.accelerator, item.label]));
    expect(keys).toMatchObject({
      'CmdOrCtrl+N': 'Start a study…',
      'CmdOrCtrl+O': 'Open a study…',
      'CmdOrCtrl+Z': 'Undo',
      [platform === 'win32' ? 'Ctrl+Y' : 'Shift+CmdOrCtrl+Z']: 'Redo',
      'CmdOrCtrl+K': 'Find…',
      'CmdOrCtrl+F': 'Find…',
    });
  });

  it('uses no key twice', () => {
    const keys = itemsOf(platform).items.flatMap(({ accelerator }) => accelerator ?? []);
    expect(new Set(keys).size).toBe(keys.length);
  });

  it('leaves cutting, copying and pasting to the system, and undo not', () => {
    const roles = itemsOf(platform).items.map(({ role }) => role);
    expect(roles).toEqual(expect.arrayContaining(['cut', 'copy', 'paste', 'selectAll']));
    expect(roles).not.toContain('undo');
    expect(roles).not.toContain('redo');
  });

  it('shows developers’ tools to developers alone', () => {
    const roles = (development: boolean) =>
      itemsOf(platform, development).items.map(({ role }) => role);
    expect(roles(false)).not.toContain('toggleDevTools');
    expect(roles(false)).not.toContain('reload');
    expect(roles(true)).toContain('toggleDevTools');
  });
});

describe('the menu', () => {
  it('begins with the app’s own menu on macOS', () => {
    expect(itemsOf('darwin').template[0].role).toBe('appMenu');
    expect(itemsOf('linux').template[0].label).toBe('&File');
  });
});
