import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { expect, it } from 'vitest';
import { startApp } from './app.ts';
import { launchChromium } from './chromium.ts';
import { scenes, sizes } from './scenes.ts';

const folder = join(import.meta.dirname, '..', '..', 'screenshots');

// `npm run screenshots`: every scene at every size, light and dark, for people to look at.
for (const colorScheme of ['light', 'dark'] as const) {
  for (const viewport of sizes) {
    it(`${viewport.width}x${viewport.height}, ${colorScheme}`, async () => {
      mkdirSync(folder, { recursive: true });
      const app = await startApp();
      const browser = await launchChromium();
      try {
        const page = await browser.newPage({ viewport, colorScheme, reducedMotion: 'reduce' });
        page.setDefaultTimeout(20_000);
        const faults: string[] = [];
        page.on('pageerror', (error) => faults.push(error.message));
        await page.goto(await app.address());
        for (const [index, scene] of scenes.entries()) {
          await scene.reach(page, app.home);
          await page.waitForTimeout(250);
          const number = String(index + 1).padStart(2, '0');
          await page.screenshot({
            path: join(folder, `${number}-${scene.name}-${viewport.width}-${colorScheme}.png`),
          });
        }
        expect(faults).toEqual([]);
      } finally {
        await browser.close();
        await app.stop();
      }
    });
  }
}
