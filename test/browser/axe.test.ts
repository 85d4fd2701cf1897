import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { expect, it } from 'vitest';
import { startApp } from './app.ts';
import { launchChromium } from './chromium.ts';
import { scenes } from './scenes.ts';

const axe = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');

interface Finding {
  readonly id: string;
  readonly nodes: readonly {
    readonly target: readonly string[];
    readonly failureSummary: string;
  }[];
}

// Rules of axe-core for WCAG 2.2 A and AA (W3C Recommendation 2023) and its best practices.
for (const colorScheme of ['light', 'dark'] as const) {
  it(`axe finds nothing on any screen, ${colorScheme}`, { timeout: 600_000 }, async () => {
    const app = await startApp();
    const browser = await launchChromium();
    try {
      const context = await browser.newContext({
        viewport: { width: 1280, height: 800 },
        colorScheme,
        reducedMotion: 'reduce',
        // The rules are put into the page from outside; the page's own policy lets no script in.
        bypassCSP: true,
      });
      const page = await context.newPage();
      page.setDefaultTimeout(30_000);
      await page.goto(await app.address());
      const found: string[] = [];
      for (const scene of scenes) {
        await scene.reach(page, app.home);
        await page.waitForTimeout(150);
        await page.evaluate(axe);
        const violations = (await page.evaluate(
          'axe.run(document, { resultTypes: ["violations"] }).then((result) => result.violations)',
        )) as readonly Finding[];
        for (const { id, nodes } of violations) {
          for (const node of nodes) {
            found.push(`${scene.name}: ${id}: ${node.target.join(' ')}: ${node.failureSummary}`);
          }
        }
      }
      expect(found).toEqual([]);
    } finally {
      await browser.close();
      await app.stop();
    }
  });
}
