import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { _electron } from 'playwright-core';
import { describe, expect, it } from 'vitest';
import { electronBinary } from '../../main/shells/electron-binary.mjs';
import { hasDisplay } from '../../main/shells/browser.ts';

const top = join(import.meta.dirname, '..', '..');
const program = electronBinary();
const why =
  program === null
    ? 'Electron’s program is not on this machine'
    : !hasDisplay()
      ? 'there is no display'
      : process.getuid?.() === 0
        ? 'root has no sandbox to run it in'
        : null;

describe('the app in Electron itself', () => {
  if (why !== null) process.stdout.write(`Skipped, because ${why}: the app in Electron itself.\n`);

  it.skipIf(why !== null)('opens its window on the demo, shut off from the network', async () => {
    const home = await mkdtemp(join(tmpdir(), 'understory-'));
    const app = await _electron.launch({
      executablePath: program ?? '',
      args: [top, `--user-data-dir=${join(home, 'settings')}`],
      env: { ...process.env, HOME: home } as Record<string, string>,
    });
    try {
      const page = await app.firstWindow();
      await page.waitForLoadState('domcontentloaded');
      expect(page.url()).toBe('app://understory/');
      expect(await page.title()).toBe('Understory');
      const inside = await page.evaluate(async () => ({
        isolated: globalThis.crossOriginIsolated,
        node: 'process' in globalThis || 'require' in globalThis,
        bridge: Object.keys((globalThis as { understory?: object }).understory ?? {}).sort(),
        outside: await fetch('https://example.org/').then(
          () => 'reached',
          () => 'refused',
        ),
        opened: globalThis.open('https://example.org/') === null,
      }));
      expect(inside).toEqual({
        isolated: true,
        node: false,
        bridge: ['calls', 'cancel', 'onEvent', 'onProgress'],
        outside: 'refused',
        opened: true,
      });
      const about = await page.evaluate(() =>
        (
          globalThis as unknown as {
            understory: { calls: { about: (id: number, takes: null) => Promise<unknown> } };
          }
        ).understory.calls.about(900_000, null),
      );
      expect(about).toMatchObject({ value: { shell: 'electron', dialogs: true } });
    } finally {
      await app.close();
      await rm(home, { recursive: true, force: true });
    }
  });
});
