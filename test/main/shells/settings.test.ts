import { mkdtemp, readFile, rm, stat, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { hasDisplay, openerFailed, openerFor } from '../../../main/shells/browser.ts';
import { placesOfApp, settingsFolder } from '../../../main/shells/places.ts';
import { recentPaths } from '../../../main/shells/recent-paths.ts';
import {
  placement,
  readWindowState,
  writeWindowState,
  type WindowState,
} from '../../../main/shells/window-state.ts';

let folder = '';
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'understory-'));
});
afterEach(() => rm(folder, { recursive: true }));

describe('recent studies', () => {
  it('are kept as paths, newest first, each once, ten at most', async () => {
    const file = join(folder, 'settings', 'recent.json');
    const recent = recentPaths(file);
    await Promise.all(Array.from({ length: 12 }, (_, n) => recent.add(`/s/${n}.understory`)));
    await recent.add('/s/5.understory');
    const paths = await recentPaths(file).list();
    expect(paths).toHaveLength(10);
    expect(paths.slice(0, 3)).toEqual(['/s/5.understory', '/s/11.understory', '/s/10.understory']);
    await recent.remove('/s/11.understory');
    expect(await recent.list()).not.toContain('/s/11.understory');
    const kept: unknown = JSON.parse(await readFile(file, 'utf8'));
    expect(kept).toEqual(await recent.list());
    if (process.platform !== 'win32') expect((await stat(file)).mode & 0o077).toBe(0);
  });

  it('are none where the list is damaged or cannot be written', async () => {
    const file = join(folder, 'recent.json');
    await writeFile(file, '{"a":');
    expect(await recentPaths(file).list()).toEqual([]);
    await writeFile(file, '[1, "/a", null]');
    expect(await recentPaths(file).list()).toEqual(['/a']);
    const blocked = recentPaths(join(file, 'recent.json'));
    await expect(blocked.add('/a')).resolves.toBeUndefined();
  });
});

describe('the window’s place', () => {
  const display = { x: 0, y: 0, width: 1920, height: 1080 };
  const second = { x: 1920, y: 0, width: 1280, height: 1024 };
  const state = (x: number, y: number, width = 1000, height = 700): WindowState => ({
    bounds: { x, y, width, height },
    maximized: false,
  });

  it('is where it stood, on any display', () => {
    expect(placement(state(100, 50), [display])).toEqual(state(100, 50));
    expect(placement(state(2000, 10), [display, second])).toEqual(state(2000, 10));
  });

  it('is the system’s choice where no display shows enough of it', () => {
    for (const { bounds } of [state(2000, 10), state(-950, 0), state(0, -30), state(10, 1060)]) {
      const found = placement({ bounds, maximized: true }, [display]);
      expect(found).toEqual({ bounds: { width: 1280, height: 800 }, maximized: true });
    }
  });

  it('is no larger than its display and no smaller than can be used', () => {
    expect(placement(state(0, 0, 5000, 4000), [display]).bounds).toMatchObject({
      width: 1920,
      height: 1080,
    });
    expect(placement(state(0, 0, 200, 10), [display]).bounds).toMatchObject({
      width: 720,
      height: 520,
    });
    const small = { x: 0, y: 0, width: 1024, height: 740 };
    expect(placement(null, [small]).bounds).toEqual({ width: 1024, height: 740 });
    expect(placement(null, []).bounds).toEqual({ width: 1280, height: 800 });
  });

  it('is kept, and forgotten where its file is damaged', async () => {
    const file = join(folder, 'window.json');
    expect(readWindowState(file)).toBeNull();
    writeWindowState(file, state(1, 2));
    expect(readWindowState(file)).toEqual(state(1, 2));
    for (const damaged of ['', 'null', '[]', '{"bounds":{"x":"1"},"maximized":false}', '{"x":1}']) {
      await writeFile(file, damaged);
      expect(readWindowState(file), damaged).toBeNull();
    }
    writeWindowState(join(file, 'window.json'), state(1, 2));
  });
});

describe('folders', () => {
  it('of settings are where each system has them', () => {
    expect(settingsFolder({}, 'linux', '/home/a')).toBe('/home/a/.config/Understory');
    expect(settingsFolder({ XDG_CONFIG_HOME: '/c' }, 'linux', '/home/a')).toBe('/c/Understory');
    expect(settingsFolder({ XDG_CONFIG_HOME: 'c' }, 'linux', '/home/a')).toBe(
      '/home/a/.config/Understory',
    );
    expect(settingsFolder({}, 'darwin', '/Users/a')).toBe(
      '/Users/a/Library/Application Support/Understory',
    );
    expect(settingsFolder({ APPDATA: '/r' }, 'win32', '/u')).toBe(join('/r', 'Understory'));
  });

  it('of the app’s own parts are found from sources, from a build and from its chunks', () => {
    const built = {
      window: '/app/out/renderer',
      preload: '/app/out/preload/preload.cjs',
      demo: '/app/resources/demo',
      icon: '/app/resources/icon/icon.png',
      favicon: '/app/resources/icon/icon.ico',
    };
    expect(placesOfApp('file:///app/main/shells/places.ts')).toEqual(built);
    expect(placesOfApp('file:///app/out/main/electron.js')).toEqual(built);
    expect(placesOfApp('file:///app/out/main/chunks/x-1a.js')).toEqual(built);
  });
});

describe('the browser', () => {
  it('is opened only where there is a display', () => {
    expect(hasDisplay({}, 'linux')).toBe(false);
    expect(hasDisplay({ DISPLAY: '' }, 'linux')).toBe(false);
    expect(hasDisplay({ DISPLAY: ':0' }, 'linux')).toBe(true);
    expect(hasDisplay({ WAYLAND_DISPLAY: 'wayland-0' }, 'linux')).toBe(true);
    expect(hasDisplay({}, 'darwin')).toBe(true);
  });

  it('is opened by the system’s own program, never through a shell', () => {
    expect(openerFor('http://127.0.0.1:1/#a', 'linux')).toEqual([
      'xdg-open',
      ['http://127.0.0.1:1/#a'],
    ]);
    expect(openerFor('x', 'darwin')[0]).toBe('open');
    expect(openerFor('x', 'win32')[0]).toBe('rundll32');
  });

  it('is known not to open where that program is missing or fails', async () => {
    await openerFailed('x', [join(folder, 'missing'), []]);
    await openerFailed('x', [process.execPath, ['-e', 'process.exit(3)']]);
  });

  it('is not known to have opened because that program ended well', async () => {
    const failed = openerFailed('x', [process.execPath, ['-e', '']]).then(() => 'failed');
    const waited = new Promise((resolve) => setTimeout(() => resolve('waited'), 1000));
    expect(await Promise.race([failed, waited])).toBe('waited');
  });
});
